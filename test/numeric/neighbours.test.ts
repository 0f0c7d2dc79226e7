import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { middleDouble, nextDown, nextUp } from '../../src/numeric/neighbours.js';

const anyDouble = fc.double({ noNaN: true, noDefaultInfinity: true });

describe('nextUp', () => {
  test.each([
    [0, Number.MIN_VALUE],
    [-0, Number.MIN_VALUE],
    [-Number.MIN_VALUE, 0],
    [1, 1 + 2 ** -52],
    [-1, -1 + 2 ** -53],
    [1 - 2 ** -53, 1],
    [Number.MAX_VALUE, Infinity],
    [Infinity, Infinity],
    [-Infinity, -Number.MAX_VALUE],
    [NaN, NaN],
  ])('of %d is %d', (x, expected) => {
    expect(nextUp(x)).toBe(expected);
  });

  test('leaves no double between', () => {
    fc.assert(
      fc.property(anyDouble, (x) => {
        const next = nextUp(x);
        expect(next).toBeGreaterThan(x);
        expect([x, next]).toContain(x / 2 + next / 2);
      }),
      { seed: 1 },
    );
  });

  test('is undone by nextDown', () => {
    fc.assert(
      fc.property(anyDouble, (x) => {
        expect(nextDown(nextUp(x)) === x).toBe(true);
      }),
      { seed: 2 },
    );
  });
});

describe('middleDouble', () => {
  test('lies strictly between two doubles that are not neighbours', () => {
    fc.assert(
      fc.property(anyDouble, anyDouble, (x, y) => {
        const [low, high] = [Math.min(x, y), Math.max(x, y)];
        fc.pre(nextUp(low) < high);
        const middle = middleDouble(low, high);
        expect(middle > low && middle < high).toBe(true);
      }),
      { seed: 3 },
    );
  });

  test('leaves as many doubles below as above, give or take one', () => {
    expect(middleDouble(1, nextUp(nextUp(1)))).toBe(nextUp(1));
    // [1, 2) and [2, 4) hold 2^52 doubles each; so do [-4, -2) and so on.
    expect(middleDouble(1, 4)).toBe(2);
    expect(middleDouble(-4, -1)).toBe(-2);
    expect(middleDouble(-3, 3)).toBe(0);
  });

  test('halves any bracket down to neighbours in 64 steps', () => {
    let high = Number.MAX_VALUE;
    let steps = 0;
    for (let low = -Number.MAX_VALUE; nextUp(low) < high; steps += 1) {
      const middle = middleDouble(low, high);
      if (middle < 1e-300) low = middle;
      else high = middle;
    }
    expect(high).toBe(1e-300);
    expect(steps).toBeLessThanOrEqual(64);
  });
});
