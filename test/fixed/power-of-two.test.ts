import { describe, expect, test } from 'vitest';
import { exponentOfTwo, powerOfTwo } from '../../src/fixed/power-of-two.js';

describe('powerOfTwo and exponentOfTwo', () => {
  test('are inverse over all normal doubles', () => {
    for (let exponent = -1022; exponent <= 1023; exponent++) {
      // 2 ** e is exact in every engine for whole e; the sources may not use it, tests may.
      expect(powerOfTwo(exponent)).toBe(2 ** exponent);
      expect(exponentOfTwo(powerOfTwo(exponent))).toBe(exponent);
    }
  });

  test.each([3, 0.3, 0.001, 1 - 2 ** -53, 1 + 2 ** -52, 6, 0, -0, -2, NaN, Infinity, -Infinity])(
    '%d is no power of two',
    (x) => {
      expect(exponentOfTwo(x)).toBeUndefined();
    },
  );
});
