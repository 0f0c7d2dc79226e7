import type { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { nextDown, nextUp } from '../../src/numeric/neighbours.js';
import { Random } from '../../src/numeric/random.js';
import { wrightOmega } from '../../src/numeric/wright-omega.js';
import { worstErrorInUlps, type Region } from './ulp.js';

const POINTS_PER_REGION = 150;
const UNDERFLOW = -745.1332191019411;

describe('wrightOmega', () => {
  const regions: Record<string, Region> = {
    'over the table': (random) => random.between(-32, 16),
    'where omega is small beside x': (random) => random.between(-8, -3),
    'around 0': (random) => random.between(-1, 1),
    'of tiny numbers': (random) => random.between(-1, 1) * 2 ** random.integer(-60, -4),
    // Half way between knots the series is at its widest.
    'half way between knots': (random) =>
      (random.integer(-32 * 16, 16 * 16 - 1) + 0.5) / 16 + random.between(-1e-7, 1e-7),
    'just below the table': (random) => random.between(-34, -32),
    'far below the table': (random) => random.between(-708, -32),
    'where results are subnormal': (random) => random.between(UNDERFLOW, -708.3),
    'just above the table': (random) => random.between(16, 40),
    'far above the table': (random) => 10 ** random.between(1.7, 300),
    'where the logarithm fades': (random) => 10 ** random.between(15, 19),
  };

  test.each(Object.entries(regions))('errs by at most 3 ulp %s', (_, region) => {
    const random = new Random(11);
    const worst = worstErrorInUlps(wrightOmega, exactOmega, region, random, POINTS_PER_REGION);
    expect(worst.error, worst.place).toBeLessThanOrEqual(3);
  });

  test.each([
    [-Infinity, 0],
    [Infinity, Infinity],
    [NaN, NaN],
    [1, 1],
    [UNDERFLOW, Number.MIN_VALUE],
    [nextDown(UNDERFLOW), 0],
    [Number.MAX_VALUE, Number.MAX_VALUE],
  ])('of %d is exactly %d', (x, expected) => {
    expect(wrightOmega(x)).toBe(expected);
  });

  test('of 0 is the omega constant 0.56714329040978387 (from memory)', () => {
    expect(wrightOmega(0)).toBeCloseTo(0.5671432904097838, 15);
  });

  test('does not fall where the methods meet', () => {
    for (const joint of [-32, 16, 1e18]) {
      expect(wrightOmega(nextDown(joint))).toBeLessThanOrEqual(wrightOmega(joint));
      expect(wrightOmega(joint)).toBeLessThanOrEqual(wrightOmega(nextUp(joint)));
    }
  });

  test('inverts w + ln w, written as W(w e^w) = w', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: 30, noNaN: true }), (w) => {
        // x = w + ln w loses half a last place of x; omega passes on w / (1 + w) of it.
        const x = w + Math.log(w);
        const slack = 4 * Number.EPSILON * w * (1 + Math.abs(x) / (1 + w));
        expect(Math.abs(wrightOmega(x) - w)).toBeLessThanOrEqual(slack);
      }),
      { seed: 12 },
    );
  });

  /** Newton's method at 56 digits; each pass doubles those that are right. */
  function exactOmega(x: Decimal): Decimal {
    let w = x.gt(1) ? x : x.exp();
    for (let pass = 0; pass < 20; pass++) {
      const step = newtonStep(w, x);
      w = w.minus(step);
      if (step.abs().lt(w.times(1e-20))) return w;
    }
    throw new Error(`no reference for ${x.toString()}`);
  }

  // From w + ln w = x where omega is large, from w = e^(x - w) where it is small: the other form
  // would overshoot.
  function newtonStep(w: Decimal, x: Decimal): Decimal {
    if (x.gt(1)) return w.plus(w.ln()).minus(x).times(w).div(w.plus(1));
    const image = x.minus(w).exp();
    return w.minus(image).div(image.plus(1));
  }
});
