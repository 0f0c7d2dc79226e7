import { describe, expect, test } from 'vitest';
import { fromCelsius, uniformConditions } from '../../src/quantities.js';
import { Module } from '../../src/source/module.js';
import { faultOf } from './fault-of.js';

const MODULE = new Module(
  'a module',
  54,
  {
    photocurrent: 8.2,
    saturationCurrent: 1e-7,
    idealityVoltage: 1.8,
    seriesResistance: 0.22,
    shuntConductance: 1 / 415,
  },
  { technology: 'poly-si', shortCircuitCoefficient: 0.0032 },
);

const at = (irradiance: number, celsius: number) =>
  MODULE.at(uniformConditions(irradiance, fromCelsius(celsius)));

describe('Module', () => {
  test('is a source of one group', () => {
    expect(MODULE.groups).toBe(1);
  });

  test('gives nothing at night: zeros, and one peak of no power', () => {
    for (const celsius of [-60, 25, 120]) {
      const night = at(0, celsius);
      expect(night.shortCircuitCurrent).toBe(0);
      expect(night.openCircuitVoltage).toBe(0);
      expect(night.peaks()).toEqual([{ voltage: 0, current: 0, power: 0 }]);
    }
  });

  test('gives more current with more light, and less voltage when warmer', () => {
    expect(at(1100, 25).shortCircuitCurrent).toBeGreaterThan(at(1000, 25).shortCircuitCurrent);
    expect(at(1000, 60).openCircuitVoltage).toBeLessThan(at(1000, 25).openCircuitVoltage);
    expect(at(1000, 60).shortCircuitCurrent).toBeGreaterThan(at(1000, 25).shortCircuitCurrent);
  });

  const IRRADIANCE = 'must be from 0 to 2000 W/m², found ';
  const TEMPERATURE = 'must be from 213.15 to 393.15 K (-60 to 120 °C), found ';

  test.each([
    ['irradiance', -1, 25, IRRADIANCE],
    ['irradiance', 2001, 25, IRRADIANCE],
    ['irradiance', NaN, 25, IRRADIANCE],
    ['cellTemperature', 1000, -61, TEMPERATURE],
    ['cellTemperature', 1000, 121, TEMPERATURE],
    ['cellTemperature', 1000, NaN, TEMPERATURE],
  ])('refuses %s out of range: %d W/m², %d °C', (field, irradiance, celsius, message) => {
    const fault = faultOf(() => at(irradiance, celsius));
    expect(fault.kind).toBe('input');
    expect(fault.problems).toHaveLength(1);
    expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    expect(fault.problems[0]!.message).toContain(message);
  });
});
