import type { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { exp, expm1 } from '../../src/numeric/exponential.js';
import { log, log1p } from '../../src/numeric/logarithm.js';
import { nextDown } from '../../src/numeric/neighbours.js';
import { Random } from '../../src/numeric/random.js';
import { worstErrorInUlps, type Region } from './ulp.js';

const SMALLEST_NORMAL = 2 ** -1022;
const POINTS_PER_REGION = 1000;

function signed(random: Random, magnitude: number): number {
  return random.uniform() < 0.5 ? -magnitude : magnitude;
}

describe('log', () => {
  const regions: Record<string, Region> = {
    'between 0 and 100': (random) => random.between(1e-3, 100),
    'over the whole range': (random) => random.between(1, 2) * 2 ** random.integer(-1022, 1023),
    'of subnormal numbers': (random) => random.integer(1, 2 ** 52) * Number.MIN_VALUE,
    'of subnormal numbers with few bits': (random) =>
      random.integer(1, 2 ** random.integer(1, 20)) * Number.MIN_VALUE,
    'near 1': (random) => random.between(0.93, 1.07),
    'ever nearer to 1': (random) =>
      1 + signed(random, random.between(1, 2) * 2 ** random.integer(-52, -5)),
    'where the two methods meet': (random) => 1 + signed(random, random.between(0.06, 0.07)),
    'at the boundaries of the table': (random) =>
      (1 + random.integer(0, 128) / 128) * (1 + random.between(-1e-9, 1e-9)),
  };

  test.each(Object.entries(regions))('errs by at most 0.58 ulp %s', (_, region) => {
    const worst = worstErrorInUlps(log, (x) => x.ln(), region, new Random(4), POINTS_PER_REGION);
    expect(worst.error, worst.place).toBeLessThanOrEqual(0.58);
  });

  test.each([
    [Infinity, Infinity],
    [0, -Infinity],
    [-0, -Infinity],
    [-Number.MIN_VALUE, NaN],
    [-1, NaN],
    [-Infinity, NaN],
    [NaN, NaN],
    [1, 0],
  ])('of %d is exactly %d', (x, expected) => {
    expect(log(x)).toBe(expected);
  });

  // Nearest doubles of -1074 ln 2, -1022 ln 2 and 1024 ln 2 - 2^-54, by decimal.js at 60 digits.
  test.each([
    ['the smallest double', Number.MIN_VALUE, -744.4400719213812],
    ['the largest subnormal double', nextDown(SMALLEST_NORMAL), -708.3964185322641],
    ['the smallest normal double', SMALLEST_NORMAL, -708.3964185322641],
    ['the largest double', Number.MAX_VALUE, 709.782712893384],
  ])('of %s is right', (_, x, expected) => {
    expect(log(x)).toBe(expected);
  });

  test('undoes exp up to the rounding of both', () => {
    const exponent = fc.double({ min: -708, max: 709, noNaN: true });
    fc.assert(
      fc.property(exponent, (x) => {
        // Half a place of e^x, 0.51 · 2^-52 at most, is as much in x; log errs by 0.58 ulp of x.
        const tolerance = 0.51 * 2 ** -52 + 0.58 * 2 ** -52 * Math.abs(x);
        expect(Math.abs(log(exp(x)) - x)).toBeLessThanOrEqual(tolerance);
      }),
      { seed: 5 },
    );
  });
});

describe('log1p', () => {
  const regions: Record<string, Region> = {
    'between -1 and 10': (random) => random.between(-0.999, 10),
    'between -1/16 and 1/16': (random) => random.between(-0.0625, 0.0625),
    'where the two methods meet': (random) => signed(random, random.between(0.06, 0.07)),
    'near 0': (random) => signed(random, random.between(1, 2) * 2 ** random.integer(-60, -5)),
    'of subnormal and other tiny numbers': (random) =>
      signed(random, random.integer(1, 2 ** 53 - 1) * 2 ** random.integer(-1074, -113)),
    'of large numbers': (random) => random.between(1, 2) * 2 ** random.integer(0, 1023),
    'near -1': (random) => -1 + random.between(1, 2) * 2 ** random.integer(-53, -2),
    'at the boundaries of the table': (random) =>
      (random.integer(0, 128) / 128) * (1 + random.between(-1e-9, 1e-9)),
  };

  test.each(Object.entries(regions))('errs by at most 0.58 ulp %s', (_, region) => {
    const worst = worstErrorInUlps(log1p, exactLog1p, region, new Random(6), POINTS_PER_REGION);
    expect(worst.error, worst.place).toBeLessThanOrEqual(0.58);
  });

  test.each([
    [Infinity, Infinity],
    [-1, -Infinity],
    [-1 - 2 ** -52, NaN],
    [-Infinity, NaN],
    [NaN, NaN],
    [0, 0],
    [-0, -0],
    [Number.MIN_VALUE, Number.MIN_VALUE],
    [-Number.MIN_VALUE, -Number.MIN_VALUE],
    [2 ** -55, 2 ** -55],
    [-(2 ** -55), -(2 ** -55)],
    [Number.MAX_VALUE, 709.782712893384],
  ])('of %d is exactly %d', (x, expected) => {
    expect(log1p(x)).toBe(expected);
  });

  test('undoes expm1 up to the rounding of both', () => {
    const small = fc.double({ min: -1, max: 1, noNaN: true });
    fc.assert(
      fc.property(small, (x) => {
        // An error of 0.58 ulp in y = expm1(x) is at most 0.58 · 2^-52 |y| e^-x in x, and
        // |y| e^-x <= 1.72 |x| there; log1p adds 0.58 ulp of x. Subnormal x come back exactly.
        const tolerance = (0.58 * 1.72 + 0.58) * 2 ** -52 * Math.abs(x);
        expect(Math.abs(log1p(expm1(x)) - x)).toBeLessThanOrEqual(tolerance);
      }),
      { seed: 7 },
    );
  });

  /** Below 10^-18 the sum would lose the digits that matter: the series instead. */
  function exactLog1p(x: Decimal): Decimal {
    if (x.abs().gt(1e-18)) return x.plus(1).ln();
    return x.minus(x.pow(2).div(2)).plus(x.pow(3).div(3));
  }
});
