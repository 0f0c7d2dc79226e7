import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import { STC_TEMPERATURE, uniformConditions } from '../../../src/quantities.js';
import { compileCurve } from '../../../src/source/network/compiled-curve.js';
import { faultOf } from '../fault-of.js';
import { anyArray, type Diodes } from './any-array.js';
import { ARRAY_MODULE } from './array-module.js';

const PLANS: readonly { diodes: Diodes; arrays: number; error: number }[] = [
  { diodes: 'ideal', arrays: 40, error: 1e-5 },
  { diodes: 'junction', arrays: 6, error: 1e-3 },
  { diodes: 'breakdown', arrays: 10, error: 1e-4 },
  { diodes: 'mixed', arrays: 6, error: 1e-3 },
];

describe('compileCurve', () => {
  test.each(PLANS)(
    'keeps within $error of Isc wherever it is asked: $arrays arrays with $diodes diodes',
    ({ diodes, arrays, error }) => {
      const random = new Random(21).split(diodes);
      for (let index = 0; index < arrays; index++) {
        const curve = anyArray(random, diodes, 2);
        if (!(curve.openCircuitVoltage > 0)) continue;
        const currentError = error * curve.shortCircuitCurrent;
        const compiled = compileCurve(curve, { currentError });
        for (let point = 0; point < 300; point++) {
          const voltage = curve.openCircuitVoltage * random.uniform();
          const miss = Math.abs(compiled.current(voltage) - curve.current(voltage));
          expect([index, voltage, miss <= currentError]).toEqual([index, voltage, true]);
        }
        expect(compiled.peaks()).toBe(curve.peaks());
        expect(compiled.current(0)).toBe(curve.shortCircuitCurrent);
        expect(compiled.current(curve.openCircuitVoltage)).toBe(0);
      }
    },
  );

  test('never lets the current rise with voltage, and has the slope of its pieces', () => {
    const curve = ARRAY_MODULE.at(uniformConditions(800, STC_TEMPERATURE));
    const compiled = compileCurve(curve, { currentError: 1e-5 });
    let before = Infinity;
    for (let voltage = 0; voltage <= curve.openCircuitVoltage; voltage += 0.003) {
      const current = compiled.current(voltage);
      expect(current).toBeLessThanOrEqual(before);
      before = current;
    }
    const slope = (compiled.current(30.00001) - compiled.current(30)) / 0.00001;
    expect(compiled.slope(30)).toBeCloseTo(slope, 4);
  });

  test('answers beyond 0 V and open circuit as the curve itself does', () => {
    const curve = ARRAY_MODULE.at(uniformConditions(800, STC_TEMPERATURE));
    const compiled = compileCurve(curve, { currentError: 1e-4 });
    for (const voltage of [-3, curve.openCircuitVoltage + 1]) {
      expect(compiled.current(voltage)).toBe(curve.current(voltage));
      expect(compiled.slope(voltage)).toBe(curve.slope(voltage));
    }
  });

  test('needs twice the points for a quarter of the error', () => {
    const curve = ARRAY_MODULE.at(uniformConditions(1000, STC_TEMPERATURE));
    const coarse = compileCurve(curve, { currentError: 4e-4 }).pieces;
    const fine = compileCurve(curve, { currentError: 1e-4 }).pieces;
    expect(fine / coarse).toBeGreaterThan(1.6);
    expect(fine / coarse).toBeLessThan(2.5);
  });

  test('takes a curve in the dark: the curve itself answers', () => {
    const curve = ARRAY_MODULE.at(uniformConditions(0, STC_TEMPERATURE));
    const compiled = compileCurve(curve, { currentError: 1e-6 });
    expect(compiled.openCircuitVoltage).toBe(0);
    expect(compiled.current(0)).toBe(curve.current(0));
  });

  test.each([0, -1, NaN, 1e-12])('refuses an error of %s A', (currentError) => {
    const curve = ARRAY_MODULE.at(uniformConditions(1000, STC_TEMPERATURE));
    expect(faultOf(() => compileCurve(curve, { currentError })).problems[0]).toMatchObject({
      code: 'ARGUMENT',
      field: 'currentError',
    });
  });
});
