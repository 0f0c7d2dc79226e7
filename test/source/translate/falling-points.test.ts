import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { FallingPoints } from '../../../src/source/translate/falling-points.js';
import { faultOf } from '../fault-of.js';

/** Points whose current falls strictly with voltage, from 8 A at -1 V to below 0 A. */
const falling = fc
  .array(
    fc.tuple(
      fc.double({ min: 0.1, max: 3, noNaN: true }),
      fc.double({ min: 0.01, max: 3, noNaN: true }),
    ),
    {
      minLength: 1,
      maxLength: 20,
    },
  )
  .map((steps) => {
    const points: [number, number][] = [[-1, 8]];
    for (const [rise, fall] of steps) {
      const [v, i] = points.at(-1)!;
      points.push([v + rise, i - fall]);
    }
    const [v, i] = points.at(-1)!;
    return [...points, [v + 1.5, Math.min(i, 0) - 1]] as [number, number][];
  });

const curveOf = (points: readonly (readonly [number, number])[]) =>
  new FallingPoints({ voltage: points.map(([v]) => v), current: points.map(([, i]) => i) });

describe('FallingPoints', () => {
  test('passes exactly through points that fall, given in any order', () => {
    fc.assert(
      fc.property(falling, fc.integer({ min: 1, max: 19 }), (points, turn) => {
        const turned = [...points.slice(turn), ...points.slice(0, turn)];
        const curve = curveOf(turned);
        for (const [v, i] of points) expect(curve.voltageAt(i)).toBe(v);
      }),
      { seed: 611 },
    );
  });

  test('has voltages that fall as current rises, and none beyond the points', () => {
    fc.assert(
      fc.property(falling, (points) => {
        const curve = curveOf(points);
        const least = points.at(-1)![1];
        let last = Infinity;
        for (let step = 0; step <= 50; step++) {
          const voltage = curve.voltageAt(Math.min(least + ((8 - least) * step) / 50, 8))!;
          expect(voltage).toBeLessThanOrEqual(last);
          last = voltage;
        }
        expect(curve.voltageAt(8.001)).toBeUndefined();
        expect(curve.voltageAt(least - 0.001)).toBeUndefined();
      }),
      { seed: 612 },
    );
  });

  test('is straight between points', () => {
    const curve = curveOf([
      [-2, 8.4],
      [2, 8],
      [30, 4],
      [34, -4],
    ]);
    expect(curve.shortCircuitCurrent).toBeCloseTo(8.2, 14);
    expect(curve.openCircuitVoltage).toBe(32);
    expect(curve.voltageAt(6)).toBe(16);
  });

  test('levels points that rise to their mean, which keeps the sum of all currents', () => {
    const curve = curveOf([
      [0, 8],
      [10, 7.9],
      [12, 8.1],
      [20, 7],
      [30, 0],
    ]);
    expect(curve.shortCircuitCurrent).toBe(8);
    // 7.9 and 8.1 make 8, which is no lower than the point before: all three become one.
    expect(curve.voltageAt(8)).toBeCloseTo(22 / 3, 14);
    expect(curve.voltageAt(7)).toBe(20);
  });

  test('finds the axes on level stretches as well', () => {
    const level = curveOf([
      [-1, 8],
      [5, 8],
      [10, 8],
      [20, 0],
      [22, 0],
    ]);
    expect(level.shortCircuitCurrent).toBe(8);
    expect(level.openCircuitVoltage).toBe(21);
  });

  test('takes points at one voltage for a vertical step', () => {
    const step = curveOf([
      [0, 8],
      [10, 8 - 1],
      [10, 3],
      [11, 0],
    ]);
    expect(step.voltageAt(5)).toBe(10);
  });

  test('reads Isc and Voc to the error of a straight line where the curve bends', () => {
    // I = 8 - V²/100: I'' = -0.02 A/V², points 2 V apart around 0 V: 4 x 0.02 / 8 = 0.01 A.
    const bent = curveOf([-3, -1, 1, 3, 27, 29].map((v) => [v, 8 - (v * Math.abs(v)) / 100]));
    expect(Math.abs(bent.shortCircuitCurrent - 8)).toBeLessThanOrEqual(0.01);
    // Around 28.28 V the slope is 0.57 A/V.
    expect(Math.abs(bent.openCircuitVoltage - Math.sqrt(800))).toBeLessThanOrEqual(0.01 / 0.54);
  });

  test('says which way the axes were missed', () => {
    const fault = faultOf(
      () =>
        curveOf([
          [1, 8],
          [20, 7],
        ]).shortCircuitCurrent,
    );
    expect(fault.problems[0]).toMatchObject({
      code: 'NOT_COVERED',
      message: 'the points do not reach short circuit (0 V): they lie from 1 to 20 V.',
    });
    const other = faultOf(
      () =>
        curveOf([
          [1, 8],
          [20, 7],
        ]).openCircuitVoltage,
    );
    expect(other.problems[0]!.message).toBe(
      'the points do not reach open circuit (0 A): they lie from 7 to 8 A.',
    );
  });
});
