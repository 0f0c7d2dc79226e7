import { Decimal } from 'decimal.js';
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import { inversePhiLeft, phi } from '../../../src/source/fit/curvature.js';

// Source of all values: e^x to 60 digits.
const Precise = Decimal.clone({ precision: 60 });
const ULP = Math.pow(2, -53);

/** The double itself, not its shortest decimal. */
const precise = (x: number): Decimal => {
  let exponent = 0;
  let mantissa = x;
  while (!Number.isInteger(mantissa)) {
    mantissa *= 2;
    exponent -= 1;
  }
  return new Precise(mantissa).mul(new Precise(2).pow(exponent));
};
const exactPhi = (x: Decimal): Decimal => x.exp().minus(1).minus(x);
const miss = (found: number, expected: Decimal): number =>
  precise(found).div(expected).minus(1).abs().toNumber();

describe('phi(x) = e^x - 1 - x', () => {
  test.each([
    [-40, -0.5, 10],
    [-0.5, 0.5, 4],
    [0.5, 40, 10],
    [-1e-3, 1e-3, 4],
  ])('from %d to %d is within %d ulp', (low, high, ulps) => {
    const random = new Random(911);
    for (let i = 0; i < 500; i += 1) {
      const x = random.between(low, high);
      expect(miss(phi(x), exactPhi(precise(x)))).toBeLessThan(2 * ulps * ULP);
    }
  });

  test('is x²/2 where x is tiny, and 0 at 0', () => {
    expect(phi(1e-12)).toBeCloseTo(5e-25, 35);
    expect(phi(0)).toBe(0);
  });
});

describe('The inverse of phi(-x)', () => {
  test('gives back x to 1e-14, from 1e-6 to 300', () => {
    const random = new Random(912);
    for (let i = 0; i < 500; i += 1) {
      const x = Math.exp(random.between(Math.log(1e-6), Math.log(300)));
      const found = inversePhiLeft(phi(-x));
      // Half of phi's error near zero, more than all of it nowhere.
      expect(Math.abs(found / x - 1)).toBeLessThan(1e-14);
    }
  });

  test('is 0 of 0', () => {
    expect(inversePhiLeft(0)).toBe(0);
  });
});
