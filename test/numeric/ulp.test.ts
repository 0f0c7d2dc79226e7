import { expect, test } from 'vitest';
import { nextDown, nextUp } from '../../src/numeric/neighbours.js';
import { errorInUlps, exactly, Precise } from './ulp.js';

test('the exact value of a double is that of its bits, not of its decimals', () => {
  // IEEE 754: 0.1 is 7205759403792794 / 2^56.
  expect(exactly(0.1).eq('0.1000000000000000055511151231257827021181583404541015625')).toBe(true);
});

test('the double 0.1 is 0.4 ulp away from one tenth', () => {
  // 7205759403792794 - 0.1 · 2^56 = 0.4 exactly.
  expect(errorInUlps(0.1, new Precise('0.1'))).toBe(0.4);
});

test.each([1, -1, 1.5, 1e300, 2 ** -1022, 3 * Number.MIN_VALUE, 0.1])(
  'the double above %d is one ulp away from it',
  (x) => {
    expect(errorInUlps(nextUp(Math.abs(x)) * Math.sign(x), exactly(x))).toBe(1);
  },
);

test('the unit halves below a power of two', () => {
  expect(errorInUlps(nextDown(1), new Precise(1))).toBe(0.5);
  expect(errorInUlps(1, exactly(nextDown(1)))).toBe(1);
  const barelyBelowOne = new Precise(1).minus(new Precise(2).pow(-60));
  expect(errorInUlps(nextDown(1), barelyBelowOne)).toBe(1 - 2 ** -7);
});

test('infinity stands for 2^1024, and NaN is never right', () => {
  expect(errorInUlps(Infinity, exactly(Number.MAX_VALUE))).toBe(1);
  expect(errorInUlps(-Infinity, exactly(-Number.MAX_VALUE))).toBe(1);
  expect(errorInUlps(NaN, new Precise(1))).toBe(Infinity);
});
