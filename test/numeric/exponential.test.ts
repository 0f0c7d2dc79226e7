import type { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { exp, expm1 } from '../../src/numeric/exponential.js';
import { nextDown, nextUp } from '../../src/numeric/neighbours.js';
import { Random } from '../../src/numeric/random.js';
import { exactly, Precise, worstErrorInUlps, type Region } from './ulp.js';

const OVERFLOW = 709.782712893384;
const UNDERFLOW = -745.1332191019411;
const POINTS_PER_REGION = 1000;

/** Where k changes from one table entry to the next: the polynomial is at its widest. */
const atTableBoundary: Region = (random) =>
  ((random.integer(-900 * 128, 900 * 128) + 0.5) / 128) * 0.6931471805599453 +
  random.between(-1e-7, 1e-7);

const tiny: Region = (random) =>
  signed(random, random.between(1, 2) * 2 ** random.integer(-60, -4));

function signed(random: Random, magnitude: number): number {
  return random.uniform() < 0.5 ? -magnitude : magnitude;
}

describe('exp', () => {
  const regions: Record<string, Region> = {
    'between -10 and 10': (random) => random.between(-10, 10),
    'over the whole range of normal results': (random) => random.between(-708, 709),
    'near 0': tiny,
    'at the boundaries of the table': (random) => {
      const x = atTableBoundary(random);
      return x > OVERFLOW || x < UNDERFLOW ? x / 2 : x;
    },
    'up to overflow': (random) => random.between(707, OVERFLOW),
    'where results turn subnormal': (random) => random.between(-708.5, -708.2),
    'where results are subnormal': (random) => random.between(UNDERFLOW, -708.3),
  };

  test.each(Object.entries(regions))('errs by at most 0.51 ulp %s', (_, region) => {
    const worst = worstErrorInUlps(exp, (x) => x.exp(), region, new Random(1), POINTS_PER_REGION);
    expect(worst.error, worst.place).toBeLessThanOrEqual(0.51);
  });

  test.each([
    [-Infinity, 0],
    [Infinity, Infinity],
    [NaN, NaN],
    [0, 1],
    [-0, 1],
    [Number.MIN_VALUE, 1],
    [-Number.MIN_VALUE, 1],
    [nextUp(OVERFLOW), Infinity],
    [Number.MAX_VALUE, Infinity],
    [nextDown(UNDERFLOW), 0],
    [-Number.MAX_VALUE, 0],
  ])('of %d is exactly %d', (x, expected) => {
    expect(exp(x)).toBe(expected);
  });

  test('overflows at the first double whose exponential rounds to 2^1024', () => {
    const firstToOverflow = new Precise(2).pow(1024).minus(new Precise(2).pow(970));
    expect(exactly(OVERFLOW).exp().lt(firstToOverflow)).toBe(true);
    expect(exactly(nextUp(OVERFLOW)).exp().gte(firstToOverflow)).toBe(true);
    expect(exp(OVERFLOW)).toBeLessThan(Infinity);
  });

  test('underflows at the first double whose exponential is below half the smallest double', () => {
    const halfSmallest = new Precise(2).pow(-1075);
    expect(exactly(UNDERFLOW).exp().gt(halfSmallest)).toBe(true);
    expect(exactly(nextDown(UNDERFLOW)).exp().lt(halfSmallest)).toBe(true);
    expect(exp(UNDERFLOW)).toBe(Number.MIN_VALUE);
  });
});

describe('expm1', () => {
  const regions: Record<string, Region> = {
    'between -5 and 40': (random) => random.between(-5, 40),
    'over the whole range': (random) => random.between(-708, OVERFLOW),
    'between -1/8 and 1/8': (random) => random.between(-0.125, 0.125),
    'where the two methods meet': (random) => signed(random, random.between(0.12, 0.14)),
    'near 0': tiny,
    'of subnormal and other tiny numbers': (random) =>
      signed(random, random.integer(1, 2 ** 53 - 1) * 2 ** random.integer(-1074, -113)),
    'where e^x fades against 1': (random) => random.between(-40, -30),
    'where 1 fades against e^x': (random) => random.between(30, 45),
  };

  test.each(Object.entries(regions))('errs by at most 0.58 ulp %s', (_, region) => {
    const worst = worstErrorInUlps(expm1, exactExpm1, region, new Random(2), POINTS_PER_REGION);
    expect(worst.error, worst.place).toBeLessThanOrEqual(0.58);
  });

  test.each([
    [-Infinity, -1],
    [Infinity, Infinity],
    [NaN, NaN],
    [0, 0],
    [-0, -0],
    [nextUp(OVERFLOW), Infinity],
    [Number.MAX_VALUE, Infinity],
    [-Number.MAX_VALUE, -1],
    [Number.MIN_VALUE, Number.MIN_VALUE],
    [-Number.MIN_VALUE, -Number.MIN_VALUE],
    [2 ** -55, 2 ** -55],
    [-(2 ** -55), -(2 ** -55)],
  ])('of %d is exactly %d', (x, expected) => {
    expect(expm1(x)).toBe(expected);
  });

  test('equals exp where 1 is less than a quarter of the last place', () => {
    const large = fc.double({ min: 40, max: OVERFLOW, noNaN: true });
    fc.assert(
      fc.property(large, (x) => {
        expect(expm1(x)).toBe(exp(x));
      }),
      { seed: 3 },
    );
  });

  /** Below 2^-60 the difference would lose the digits that matter: Taylor's series instead. */
  function exactExpm1(x: Decimal): Decimal {
    if (x.abs().gt(1e-18)) return x.exp().minus(1);
    return x.plus(x.pow(2).div(2)).plus(x.pow(3).div(6));
  }
});
