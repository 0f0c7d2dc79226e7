/**
 * Models of cell temperature: NOCT (older IEC 61215), Faiman 2008 (Prog. Photovolt. 16:307), Ross,
 * and the first-order lag of EN 50530.
 *
 * Status: NOCT and Faiman with its coefficients, one published copy each, in agreement with memory;
 * the range of Ross coefficients, one copy; the lag and its constants, from memory. The values were
 * computed from them outside this project.
 */
import { describe, expect, test } from 'vitest';
import { fromCelsius, toCelsius } from '../../src/quantities.js';
import {
  FAIMAN_2008,
  faimanTemperature,
  noctTemperature,
  rossTemperature,
} from '../../src/weather/cell-temperature.js';
import {
  advanceLag,
  EN_50530_THERMAL_LAG,
  laggedTemperature,
} from '../../src/weather/thermal-lag.js';

const AIR = fromCelsius(25);
/** Kelvins of a few hundred carry a few roundings of 6e-14 K each. */
const ROUNDING = 2e-13;

const expectCelsius = (found: number, celsius: number, unit: number): void => {
  expect(Math.abs(toCelsius(found) - celsius)).toBeLessThanOrEqual(0.5 * unit + ROUNDING);
};

describe('In air of 25 °C', () => {
  test('NOCT 47 °C at 1000 W/m² gives 58.75 °C', () => {
    expectCelsius(noctTemperature(AIR, 1000, fromCelsius(47)), 58.75, 0);
  });

  test('NOCT is what it is named for: the cell temperature at 800 W/m² in air of 20 °C', () => {
    expectCelsius(noctTemperature(fromCelsius(20), 800, fromCelsius(45.5)), 45.5, 0);
  });

  test.each([
    [0, 65, 1e-3],
    [1, 56.407035, 1e-6],
    [5, 41.891892, 1e-6],
  ])('Faiman in wind of %d m/s at 1000 W/m² gives %d °C', (wind, celsius, unit) => {
    expectCelsius(faimanTemperature(AIR, 1000, wind), celsius, unit);
  });

  test('Faiman has the combined coefficients 25 W/(m² K) and 6.84 W s/(m³ K)', () => {
    expect(FAIMAN_2008).toEqual({ stillLoss: 25, windLoss: 6.84 });
  });

  test('Ross adds k G', () => {
    expectCelsius(rossTemperature(AIR, 1000, 0.035), 60, 0);
  });

  test.each([
    [100, 25],
    [500, 37],
    [1000, 52],
  ])('the lag at rest at %d W/m² gives %d °C', (irradiance, celsius) => {
    expectCelsius(laggedTemperature(AIR, irradiance), celsius, 0);
  });

  test('the lag gives 40.963617 °C 300 s after a step from 0 to 1000 W/m²', () => {
    const { timeConstant } = EN_50530_THERMAL_LAG;
    const state = advanceLag(0, 1000, 1000, 300, timeConstant);
    expectCelsius(laggedTemperature(AIR, state), 40.963617, 1e-6);
    // 22 + 30 (1 - 1/e).
    expectCelsius(laggedTemperature(AIR, state), 22 + 30 * (1 - 1 / Math.E), 0);
  });

  test('the lag has T_0 = -3 K, k = 0.03 K m²/W and tau = 300 s', () => {
    expect(EN_50530_THERMAL_LAG).toEqual({ offset: -3, coefficient: 0.03, timeConstant: 300 });
  });
});
