/**
 * IEC 60891, procedures 1, 2 (form of 2009) and 3: translation of measured I-V curves. The
 * equations are from memory; the values were computed from them outside this project, for the
 * 54-cell module of Villalva and others 2009 (its datasheet: two independent copies).
 */
import { describe, expect, test } from 'vitest';
import { fromCelsius } from '../../src/quantities.js';
import type { CurvePoints } from '../../src/source/translate/curve-points.js';
import { interpolateByProcedure3 } from '../../src/source/translate/iec-60891-interpolation.js';
import {
  translateByProcedure1,
  translateByProcedure2,
} from '../../src/source/translate/iec-60891.js';

/** The point checked, and the ends of the curve that it stands on. */
const POINTS: CurvePoints = { voltage: [0, 26.3, 32.9], current: [8.21, 7.61, 0] };
const STC = { irradiance: 1000, cellTemperature: fromCelsius(25) };
const TARGET = { irradiance: 800, cellTemperature: fromCelsius(47) };
const RESISTANCE = { seriesResistance: 0.221, curveCorrection: 0 };
const FIRST = { ...RESISTANCE, shortCircuitCoefficient: 0.0032, openCircuitCoefficient: -0.123 };
const SECOND = {
  ...RESISTANCE,
  shortCircuitCoefficient: 0.0032 / 8.21,
  openCircuitCoefficient: -0.123 / 32.9,
  irradianceCoefficient: 0.06,
};

// Values near 30 carry a few roundings of 4e-15 each; the printed digits end at 5e-8 V.
const ROUNDING = 5e-14;

describe('From 1000 W/m² and 25 °C to 800 W/m² and 47 °C, (26.3 V, 7.61 A) goes', () => {
  test('by procedure 1 to 23.9413236 V and 6.038400 A', () => {
    const { voltage, current } = translateByProcedure1(POINTS, STC, TARGET, FIRST);
    expect(Math.abs(current[1]! - 6.0384)).toBeLessThan(ROUNDING);
    expect(Math.abs(voltage[1]! - 23.9413236)).toBeLessThan(ROUNDING);
  });

  test('by procedure 2 to 23.478339536 V and 6.140204044 A', () => {
    const { voltage, current } = translateByProcedure2(POINTS, STC, TARGET, SECOND);
    // Half a unit of the last digit printed.
    expect(Math.abs(current[1]! - 6.140204044)).toBeLessThanOrEqual(5e-10);
    expect(Math.abs(voltage[1]! - 23.478339536)).toBeLessThanOrEqual(5e-10);
  });

  test('the same with Isc and Voc given beside the points', () => {
    const lone: CurvePoints = { voltage: [26.3, 26.4], current: [7.61, 7.5] };
    const first = { ...FIRST, shortCircuitCurrent: 8.21 };
    const second = { ...SECOND, openCircuitVoltage: 32.9 };
    expect(translateByProcedure1(lone, STC, TARGET, first).voltage[0]).toBe(
      translateByProcedure1(POINTS, STC, TARGET, FIRST).voltage[1],
    );
    expect(translateByProcedure2(lone, STC, TARGET, second).voltage[0]).toBe(
      translateByProcedure2(POINTS, STC, TARGET, SECOND).voltage[1],
    );
  });
});

test('Procedure 1 turns a point back about kappa I2 (T2 - T1)', () => {
  // 23.9413236 V less 0.001 ohm/K x 6.0384 A x 22 K.
  const { voltage } = translateByProcedure1(POINTS, STC, TARGET, {
    ...FIRST,
    curveCorrection: 1e-3,
  });
  expect(Math.abs(voltage[1]! - 23.8084788)).toBeLessThan(ROUNDING);
});

test('Procedure 3 halfway between two lines meets what the equations give by hand', () => {
  // a: 8 - V/10, b: 4 - V/10, so the partner of (Va, Ia) is (Va, Ia - 4) and no voltage moves.
  const a = { ...STC, points: { voltage: [0, 40, 80], current: [8, 4, 0] } };
  const b = { ...TARGET, points: { voltage: [0, 40, 80], current: [4, 0, -4] } };
  const { points, irradiance, cellTemperature } = interpolateByProcedure3(a, b, 0.5);
  expect([...points.voltage]).toEqual([0, 40, 80]);
  expect([...points.current]).toEqual([6, 2, -2]);
  expect(irradiance).toBe(900);
  expect(cellTemperature).toBeCloseTo(fromCelsius(36), 12);
});
