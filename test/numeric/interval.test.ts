import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Interval } from '../../src/numeric/interval.js';
import { IntervalGradient } from '../../src/numeric/interval-gradient.js';

/** Exact rational arithmetic on doubles: m · 2^-1100, as an integer. */
const exact = (x: number): bigint => {
  const view = new DataView(new ArrayBuffer(8));
  view.setFloat64(0, x);
  const bits = view.getBigUint64(0);
  const exponent = Number((bits >> 52n) & 0x7ffn);
  const fraction = bits & 0xfffffffffffffn;
  const mantissa = exponent === 0 ? fraction : fraction | 0x10000000000000n;
  const value = mantissa << BigInt(Math.max(exponent, 1) - 1075 + 1100);
  return x < 0 ? -value : value;
};
const ONE = 1n << 1100n;

const numbers = fc.double({ min: -1e100, max: 1e100, noNaN: true }).filter((x) => {
  // Products stay within the integers' 2^-1100.
  return x === 0 || Math.abs(x) > 1e-100;
});
const intervals = fc
  .tuple(numbers, numbers)
  .map(([a, b]) => new Interval(Math.min(a, b), Math.max(a, b)));
const pairs = fc.tuple(intervals, intervals);

describe('Interval', () => {
  test.each([
    ['sum', (a: bigint, b: bigint) => a + b, (a: Interval, b: Interval) => a.plus(b), 1n],
    ['difference', (a: bigint, b: bigint) => a - b, (a: Interval, b: Interval) => a.minus(b), 1n],
    ['product', (a: bigint, b: bigint) => a * b, (a: Interval, b: Interval) => a.times(b), ONE],
  ] as const)('encloses the exact %s of any of its numbers', (_, of, enclosure, unit) => {
    fc.assert(
      fc.property(pairs, ([a, b]) => {
        const result = enclosure(a, b);
        for (const x of [a.low, a.high]) {
          for (const y of [b.low, b.high]) {
            const value = of(exact(x), exact(y));
            expect(exact(result.low) * unit <= value).toBe(true);
            expect(exact(result.high) * unit >= value).toBe(true);
          }
        }
      }),
      { seed: 901, numRuns: 2000 },
    );
  });

  test('encloses the exact quotient where the divisor has a sign, and is everything elsewhere', () => {
    fc.assert(
      fc.property(pairs, ([a, b]) => {
        const result = a.over(b);
        if (b.low <= 0 && b.high >= 0) {
          expect(result).toEqual(new Interval(-Infinity, Infinity));
          return;
        }
        for (const x of [a.low, a.high]) {
          for (const y of [b.low, b.high]) {
            // low <= x / y without dividing.
            const sign = y > 0 ? 1n : -1n;
            expect(exact(result.low) * exact(y) * sign <= exact(x) * ONE * sign).toBe(true);
            expect(exact(result.high) * exact(y) * sign >= exact(x) * ONE * sign).toBe(true);
          }
        }
      }),
      { seed: 902, numRuns: 2000 },
    );
  });

  test('takes what cannot be told for everything', () => {
    const everything = new Interval(-Infinity, Infinity);
    expect(everything.times(Interval.point(0))).toEqual(everything);
    expect(everything.minus(everything)).toEqual(everything);
    expect(new Interval(1, 2).over(new Interval(-1, 1))).toEqual(everything);
  });

  test('tells signs, sizes, and what lies in what', () => {
    expect([new Interval(1, 2), new Interval(-2, -1)].every(({ hasSign }) => hasSign)).toBe(true);
    expect([new Interval(0, 2), new Interval(-2, 1)].some(({ hasSign }) => hasSign)).toBe(false);
    expect(new Interval(-3, 2).magnitude).toBe(3);
    expect(new Interval(-3, 2).includes(new Interval(-3, 1))).toBe(true);
    expect(new Interval(-3, 2).includes(new Interval(-4, 1))).toBe(false);
    expect(new Interval(0, 2).hull(new Interval(5, 6))).toEqual(new Interval(0, 6));
    expect(new Interval(0, 2).intersection(new Interval(1, 6))).toEqual(new Interval(1, 2));
  });
});

describe('IntervalGradient', () => {
  /** f(x, y) = (x y + e^-x) / (y + 2) - 3 x. */
  const f = (x: IntervalGradient, y: IntervalGradient): IntervalGradient =>
    x.times(y).plus(x.scaled(-1).exp()).over(y.shifted(2)).minus(x.scaled(3));
  const value = (x: number, y: number): number => (x * y + Math.exp(-x)) / (y + 2) - 3 * x;
  const byX = (x: number, y: number): number => (y - Math.exp(-x)) / (y + 2) - 3;
  const byY = (x: number, y: number): number => (x - (x * y + Math.exp(-x)) / (y + 2)) / (y + 2);
  const around = (x: number, y: number, radius: number) => ({
    centre: [x, y],
    offsets: [Interval.around(0, radius), Interval.around(0, radius)],
  });
  // Of values about 1: the reference rounds as well.
  const ROUNDING = 1e-14;

  test('encloses values and derivatives at every point of a box', () => {
    const coordinate = fc.double({ min: 0.1, max: 3, noNaN: true });
    const share = fc.double({ min: -1, max: 1, noNaN: true });
    fc.assert(
      fc.property(
        coordinate,
        coordinate,
        fc.double({ min: 0, max: 0.5, noNaN: true }),
        fc.array(fc.tuple(share, share), { minLength: 5, maxLength: 5 }),
        (x0, y0, radius, places) => {
          const [x, y] = IntervalGradient.variables(around(x0, y0, radius));
          const result = f(x!, y!);
          for (const [s, t] of places) {
            const at = [x0 + s * radius, y0 + t * radius] as const;
            const found = [value(...at), byX(...at), byY(...at)];
            const enclosures = [result.value, ...result.slopes];
            for (const [index, { low, high }] of enclosures.entries()) {
              expect(found[index]).toBeGreaterThanOrEqual(low - ROUNDING);
              expect(found[index]).toBeLessThanOrEqual(high + ROUNDING);
            }
          }
        },
      ),
      { seed: 903, numRuns: 500 },
    );
  });

  test('knows that a quantity moves with itself: x - x over a box of 1 is nothing', () => {
    const [x] = IntervalGradient.variables(around(1, 1, 0.5));
    const { value: nothing } = x!.minus(x!);
    expect(nothing.magnitude).toBeLessThan(1e-15);
    // Interval arithmetic alone would say -1 to 1; the mean value form of x / x leaves 1 ± 1.
    expect(x!.value.minus(x!.value).magnitude).toBeGreaterThanOrEqual(1);
  });

  test('has an excess that falls with the square of the width', () => {
    const excess = (radius: number): number => {
      const [x, y] = IntervalGradient.variables(around(1, 1, radius));
      const { low, high } = f(x!, y!).value;
      const corners = [-radius, radius].flatMap((s) =>
        [-radius, radius].map((t) => value(1 + s, 1 + t)),
      );
      return high - low - (Math.max(...corners) - Math.min(...corners));
    };
    expect(excess(0.001) / excess(0.01)).toBeLessThan(0.02);
  });
});
