import { describe, expect, test } from 'vitest';
import {
  faimanTemperature,
  noctTemperature,
  rossTemperature,
} from '../../src/weather/cell-temperature.js';
import { faultOf } from '../source/fault-of.js';

describe('Every model', () => {
  test.each([
    ['NOCT', (air: number, irradiance: number) => noctTemperature(air, irradiance, 318.15)],
    ['Faiman', (air: number, irradiance: number) => faimanTemperature(air, irradiance, 2)],
    ['Ross', (air: number, irradiance: number) => rossTemperature(air, irradiance, 0.03)],
  ])('has cells at air temperature in the dark, and warmer with more light: %s', (_, model) => {
    expect(model(270, 0)).toBe(270);
    expect(model(270, 500)).toBeGreaterThan(model(270, 400));
    for (const [field, air, irradiance] of [
      ['air', 25, 500],
      ['air', NaN, 500],
      ['air', 360, 500],
      ['irradiance', 298, -1],
      ['irradiance', 298, 2001],
      ['irradiance', 298, NaN],
    ] as const) {
      const fault = faultOf(() => model(air, irradiance));
      expect(fault.kind).toBe('input');
      expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    }
  });

  test('refuses its own numbers out of range', () => {
    const stillAir = { stillLoss: 0, windLoss: 6 };
    for (const [field, action] of [
      ['nominal', () => noctTemperature(298, 500, 47)],
      ['windSpeed', () => faimanTemperature(298, 500, -1)],
      ['windSpeed', () => faimanTemperature(298, 500, NaN)],
      ['stillLoss', () => faimanTemperature(298, 500, 1, stillAir)],
      ['windLoss', () => faimanTemperature(298, 500, 1, { stillLoss: 25, windLoss: -6 })],
      ['coefficient', () => rossTemperature(298, 500, 30)],
    ] as const) {
      expect(faultOf(action).problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    }
  });
});

test('Wind cools: Faiman falls with wind towards the air', () => {
  const temperatures = [0, 1, 3, 10, 100].map((wind) => faimanTemperature(298, 1000, wind));
  expect(temperatures).toEqual([...temperatures].sort((a, b) => b - a));
  expect(temperatures.at(-1)! - 298).toBeLessThan(2);
});
