import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { CurvePoints } from '../../../src/source/translate/curve-points.js';
import {
  interpolateByProcedure3,
  shareAtIrradiance,
} from '../../../src/source/translate/iec-60891-interpolation.js';
import {
  translateByProcedure1,
  translateByProcedure2,
} from '../../../src/source/translate/iec-60891.js';
import { faultOf } from '../fault-of.js';
import { at, curveAt, DEVICE, errorOf, measured } from './device.js';

const STC = at(1000, 25);
const BETA = (curveAt(at(1000, 50)).openCircuitVoltage - curveAt(STC).openCircuitVoltage) / 25;
const VOC = curveAt(STC).openCircuitVoltage;
const ISC = curveAt(STC).shortCircuitCurrent;
/** kappa was chosen so that peaks at 1000 W/m² from 25 to 65 °C agree within 0.1 %. */
const RESISTANCE = { seriesResistance: DEVICE.reference.seriesResistance, curveCorrection: 0.0014 };
const FIRST = { ...RESISTANCE, shortCircuitCoefficient: 0.0032, openCircuitCoefficient: BETA };
const SECOND = {
  ...RESISTANCE,
  shortCircuitCoefficient: 0.0032 / ISC,
  openCircuitCoefficient: BETA / VOC,
  // What a pure single diode implies: Ns A k T / q / Voc.
  irradianceCoefficient: DEVICE.reference.idealityVoltage / VOC,
};

const points = fc
  .array(fc.tuple(fc.double({ min: -5, max: 50 }), fc.double({ min: -2, max: 12 })), {
    minLength: 2,
    maxLength: 30,
  })
  .map((pairs): CurvePoints => ({
    voltage: pairs.map(([v]) => v || 0),
    current: pairs.map(([, i]) => i || 0),
  }));
const conditions = fc
  .tuple(
    fc.double({ min: 1, max: 1500, noNaN: true }),
    fc.double({ min: -40, max: 90, noNaN: true }),
  )
  .map(([irradiance, celsius]) => at(irradiance, celsius));

describe('Equal conditions', () => {
  test('return any points exactly, noise and order included, by procedures 1 and 2', () => {
    fc.assert(
      fc.property(points, conditions, (any, point) => {
        for (const { voltage, current } of [
          translateByProcedure1(any, point, point, FIRST),
          translateByProcedure2(any, point, point, SECOND),
        ]) {
          expect([...voltage]).toEqual(any.voltage);
          expect([...current]).toEqual(any.current);
        }
      }),
      { seed: 601 },
    );
  });

  test('return the points of a exactly by procedure 3 at a share of 0', () => {
    fc.assert(
      fc.property(points, points, conditions, conditions, (one, other, from, to) => {
        const a = { ...from, points: one };
        const result = interpolateByProcedure3(a, { ...to, points: other }, 0);
        expect([...result.points.voltage]).toEqual(one.voltage);
        expect([...result.points.current]).toEqual(one.current);
        expect(result.irradiance).toBe(from.irradiance);
        expect(result.cellTemperature).toBe(from.cellTemperature);
      }),
      { seed: 602 },
    );
  });
});

describe('Against the single-diode model, from 1000 W/m² and 25 °C,', () => {
  test.each([
    ['procedure 1', 800, 47, 0.001, 0.008],
    ['procedure 1', 500, 25, 0.02, 0.02],
    ['procedure 1', 200, 25, 0.08, 0.08],
    ['procedure 2', 800, 47, 0.003, 0.006],
    ['procedure 2', 200, 25, 0.002, 0.002],
  ])(
    '%s to %d W/m² and %d °C errs by at most %d of power and %d of Isc, as stated',
    (procedure, irradiance, celsius, ofPower, ofCurrent) => {
      const target = at(irradiance, celsius);
      const moved =
        procedure === 'procedure 1'
          ? translateByProcedure1(measured(STC), STC, target, FIRST)
          : translateByProcedure2(measured(STC), STC, target, SECOND);
      const error = errorOf(moved, target);
      expect(Math.abs(error.ofPower)).toBeLessThan(ofPower);
      expect(error.ofCurrent).toBeLessThan(ofCurrent);
    },
  );

  test('leaving kappa out costs what is stated', () => {
    const target = at(800, 47);
    const first = translateByProcedure1(measured(STC), STC, target, {
      ...FIRST,
      curveCorrection: 0,
    });
    const second = translateByProcedure2(measured(STC), STC, target, {
      ...SECOND,
      curveCorrection: 0,
    });
    expect(errorOf(first, target).ofPower).toBeCloseTo(0.009, 3);
    expect(errorOf(first, target).ofCurrent).toBeCloseTo(0.019, 3);
    expect(errorOf(second, target).ofPower).toBeCloseTo(0.0105, 3);
    expect(errorOf(second, target).ofCurrent).toBeCloseTo(0.019, 3);
  });

  test('procedure 2 back from 800 W/m² and 47 °C errs by 1.2 % of power at most, as stated', () => {
    const from = at(800, 47);
    const moved = translateByProcedure2(measured(from), from, STC, SECOND);
    const { ofPower } = errorOf(moved, STC);
    expect(Math.abs(ofPower)).toBeLessThan(0.012);
    expect(Math.abs(ofPower)).toBeGreaterThan(0.01);
  });

  test.each([
    [600, 47, 0.5, 0.002, 0.003],
    [200, 25, 0.5, 0.002, 0.005],
    [800, 35, 2, 0.004, 0.019],
  ])(
    'procedure 3 towards %d W/m² and %d °C, a share of %d of the way, errs by at most %d of power and %d of Isc',
    (irradiance, celsius, share, ofPower, ofCurrent) => {
      const end = at(irradiance, celsius);
      const a = { ...STC, points: measured(STC) };
      const result = interpolateByProcedure3(a, { ...end, points: measured(end) }, share);
      const error = errorOf(result.points, result);
      expect(Math.abs(error.ofPower)).toBeLessThan(ofPower);
      expect(error.ofCurrent).toBeLessThan(ofCurrent);
    },
  );
});

describe('Procedure 3', () => {
  const a = { ...STC, points: measured(STC) };
  const b = { ...at(600, 47), points: measured(at(600, 47)) };

  test('at a share of 1 lies on the curve of b', () => {
    const { points: moved } = interpolateByProcedure3(a, b, 1);
    // Straight lines between points 0.09 V apart: h² |I''| / 8, I'' being up to 1.4 A/V².
    for (let index = 0; index < moved.voltage.length; index++) {
      const miss = moved.current[index]! - curveAt(b).current(moved.voltage[index]!);
      expect(Math.abs(miss)).toBeLessThan((0.09 * 0.09 * 1.4) / 8);
    }
  });

  test('pairs currents that differ by the difference of the short-circuit currents', () => {
    const { points: moved } = interpolateByProcedure3(a, b, 0.25);
    const shift = curveAt(b).shortCircuitCurrent - curveAt(a).shortCircuitCurrent;
    expect(moved.voltage[0]).toBe(0);
    expect(moved.current[0]).toBeCloseTo(curveAt(a).shortCircuitCurrent + 0.25 * shift, 12);
  });

  test('leaves out points of a for which b was not measured far enough', () => {
    const short = { ...b, points: { voltage: [0, 20, 29], current: [4.97, 4.85, 0.5] } };
    const { points: moved } = interpolateByProcedure3(a, short, 0.5);
    expect(moved.voltage.length).toBeLessThan(401);
    expect(moved.voltage.length).toBeGreaterThan(200);
  });

  test('takes short-circuit currents given where curves start above 0 V', () => {
    const from = (point: typeof a) => ({
      ...point,
      shortCircuitCurrent: curveAt(point).shortCircuitCurrent,
      points: {
        voltage: Array.from(point.points.voltage).slice(5),
        current: Array.from(point.points.current).slice(5),
      },
    });
    const whole = interpolateByProcedure3(a, b, 0.5).points;
    const cut = interpolateByProcedure3(from(a), from(b), 0.5).points;
    expect(cut.voltage.at(-1)).toBeCloseTo(whole.voltage.at(-1)!, 12);
  });

  test('finds the share at which an irradiance lies', () => {
    expect(shareAtIrradiance(a, b, 800)).toBe(0.5);
    expect(interpolateByProcedure3(a, b, shareAtIrradiance(a, b, 700)).irradiance).toBe(700);
    const fault = faultOf(() => shareAtIrradiance(a, a, 700));
    expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field: 'b.irradiance' });
  });
});

describe('Refused are', () => {
  const curve: CurvePoints = { voltage: [0, 20, 33], current: [8, 7.8, 0] };
  const refusal = (action: () => unknown) => {
    const { kind, problems } = faultOf(action);
    expect(kind).toBe('input');
    return problems[0]!;
  };

  test.each<[string, CurvePoints, string]>([
    ['a single point', { voltage: [1], current: [2] }, 'points'],
    ['voltages without currents', { voltage: [1, 2], current: [2] }, 'points.current'],
    ['a voltage that is no number', { voltage: [1, NaN], current: [2, 1] }, 'points.voltage[1]'],
    ['an endless current', { voltage: [1, 2], current: [Infinity, 1] }, 'points.current[0]'],
  ])('%s', (_, points, field) => {
    const problem = refusal(() => translateByProcedure1(points, STC, STC, FIRST));
    expect(problem).toMatchObject({ code: 'ARGUMENT', field });
  });

  test.each([
    ['no light', at(0, 25), STC, 'from.irradiance'],
    ['negative light', STC, at(-1, 25), 'to.irradiance'],
    ['too much light', STC, at(2001, 25), 'to.irradiance'],
    ['cells too cold', at(1000, -61), STC, 'from.cellTemperature'],
    ['cells too hot', STC, at(1000, 121), 'to.cellTemperature'],
  ])('%s', (_, from, to, field) => {
    for (const action of [
      () => translateByProcedure1(curve, from, to, FIRST),
      () => translateByProcedure2(curve, from, to, SECOND),
    ]) {
      expect(refusal(action)).toMatchObject({ code: 'ARGUMENT', field });
    }
  });

  test('coefficients that are no numbers, and negative resistances', () => {
    const odd = { ...SECOND, irradianceCoefficient: NaN };
    expect(refusal(() => translateByProcedure2(curve, STC, STC, odd))).toMatchObject({
      field: 'irradianceCoefficient',
    });
    const negative = { ...FIRST, seriesResistance: -0.1 };
    expect(refusal(() => translateByProcedure1(curve, STC, STC, negative))).toMatchObject({
      field: 'seriesResistance',
    });
  });

  test('points that reach neither Isc nor Voc, where these are needed', () => {
    const middle: CurvePoints = { voltage: [10, 20], current: [8, 7.8] };
    const first = refusal(() => translateByProcedure1(middle, STC, at(800, 25), FIRST));
    expect(first.code).toBe('NOT_COVERED');
    expect(first.message).toContain('short circuit (0 V): they lie from 10 to 20 V');
    const second = refusal(() => translateByProcedure2(middle, STC, at(800, 25), SECOND));
    expect(second.code).toBe('NOT_COVERED');
    expect(second.message).toContain('open circuit (0 A): they lie from 7.8 to 8 A');
  });

  test('a share that is no number, leaves the light behind or pairs nothing', () => {
    const a = { ...STC, points: curve };
    const b = { ...at(500, 25), points: { voltage: [0, 20, 32], current: [4, 3.9, 0] } };
    expect(refusal(() => interpolateByProcedure3(a, b, NaN))).toMatchObject({ field: 'share' });
    expect(refusal(() => interpolateByProcedure3(a, b, 2))).toMatchObject({ field: 'share' });
    expect(refusal(() => interpolateByProcedure3(a, b, -3))).toMatchObject({
      field: 'result.irradiance',
      message: 'must be from 0 to 2000 W/m², found 2500.',
    });
    const apart = { ...b, shortCircuitCurrent: 100 };
    expect(refusal(() => interpolateByProcedure3(a, apart, 0.5))).toMatchObject({
      code: 'NOT_COVERED',
    });
  });
});
