import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { intendedDecimal } from '../../src/fixed/intended-decimal.js';

const SEED = 86;

describe('intendedDecimal', () => {
  test.each([
    [1.65 / 0.1, 16.5],
    [0.1 * 0.1, 0.01],
    [3.3 / 0.2, 16.5],
    [-1.65 / 0.1, -16.5],
    [0.1 + 0.2, 0.3],
  ])('of %d is %d', (x, decimal) => {
    expect(intendedDecimal(x)).toBe(decimal);
  });

  test('leaves every power of two alone', () => {
    for (let exponent = -1022; exponent <= 1023; exponent++) {
      expect(intendedDecimal(2 ** exponent)).toBe(2 ** exponent);
    }
  });

  test.each([0, 1 / 3, 2 / 3, Math.PI, Infinity, -Infinity, NaN])('leaves %d alone', (x) => {
    expect(intendedDecimal(x)).toBe(x);
  });

  test('finds the exact decimal product of any two short decimals', () => {
    const short = fc.integer({ min: 1, max: 9999 });
    const places = fc.integer({ min: 0, max: 6 });
    fc.assert(
      fc.property(short, places, short, places, (a, m, b, n) => {
        const product = intendedDecimal(Number(`${a}e-${m}`) * Number(`${b}e-${n}`));
        expect(product).toBe(Number(`${a * b}e-${m + n}`));
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });
});
