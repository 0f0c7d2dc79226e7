import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { fromCelsius, uniformConditions } from '../../src/quantities.js';
import { Module } from '../../src/source/module.js';

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

  test.each([
    ['irradiance', -1, 25, 'irradiance must be from 0 to 2000 W/m², found -1.'],
    ['irradiance', 2001, 25, 'irradiance must be from 0 to 2000 W/m², found 2001.'],
    ['irradiance', NaN, 25, 'irradiance must be from 0 to 2000 W/m², found NaN.'],
    ['cellTemperature', 1000, -61, 'from 213.15 to 393.15 K (-60 to 120 °C), found 212.'],
    ['cellTemperature', 1000, 121, 'from 213.15 to 393.15 K (-60 to 120 °C), found 394.'],
    ['cellTemperature', 1000, NaN, 'from 213.15 to 393.15 K (-60 to 120 °C), found NaN.'],
  ])('refuses a %s out of range: %d W/m², %d °C', (field, irradiance, celsius, message) => {
    try {
      at(irradiance, celsius);
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(Fault);
      const { kind, problems } = error as Fault;
      expect(kind).toBe('input');
      expect(problems).toHaveLength(1);
      expect(problems[0]).toMatchObject({ code: 'ARGUMENT', field });
      expect(`${field} ${problems[0]!.message}`).toContain(message.slice(0, 40));
    }
  });
});
