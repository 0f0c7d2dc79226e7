import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ROUNDINGS, roundTo, type Rounding } from '../../src/fixed/rounding.js';

const SEED = 81;

describe('roundTo', () => {
  // Definitions of the modes worked out by hand on halves; common practice.
  const table: readonly (readonly [x: number, Readonly<Record<Rounding, number>>])[] = [
    [0.5, { 'toward-zero': 0, floor: 0, 'half-up': 1, 'half-even': 0 }],
    [1.5, { 'toward-zero': 1, floor: 1, 'half-up': 2, 'half-even': 2 }],
    [2.5, { 'toward-zero': 2, floor: 2, 'half-up': 3, 'half-even': 2 }],
    [-0.5, { 'toward-zero': 0, floor: -1, 'half-up': 0, 'half-even': 0 }],
    [-1.5, { 'toward-zero': -1, floor: -2, 'half-up': -1, 'half-even': -2 }],
    [-2.5, { 'toward-zero': -2, floor: -3, 'half-up': -2, 'half-even': -2 }],
    [-0.3, { 'toward-zero': 0, floor: -1, 'half-up': 0, 'half-even': 0 }],
  ];
  const rows = table.flatMap(([x, row]) => ROUNDINGS.map((mode) => [x, mode, row[mode]] as const));

  // toBe tells 0 from -0.
  test.each(rows)('takes %d by %s to %d', (x, mode, expected) => {
    expect(roundTo(x, mode)).toBe(expected);
  });

  test('is exact for every double, down to 2^-60 (against integer arithmetic)', () => {
    const mantissa = fc.bigInt({ min: -(2n ** 53n), max: 2n ** 53n });
    const shift = fc.bigInt({ min: 0n, max: 60n });
    fc.assert(
      fc.property(mantissa, shift, fc.constantFrom(...ROUNDINGS), (k, n, mode) => {
        expect(roundTo(Number(k) / Number(2n ** n), mode)).toBe(Number(shifted(k, n, mode)));
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });

  test('is exact on and one ulp beside every half below 2^52', () => {
    const half = fc
      .tuple(fc.bigInt({ min: -(2n ** 52n), max: 2n ** 52n }), fc.constantFrom(-1n, 0n, 1n))
      // 2^53 holds the mantissa of k + 1/2 shifted as far left as it goes.
      .map(([k, ulps]) => {
        const twice = 2n * k + 1n;
        const room = 53 - twice.toString(2).replace('-', '').length;
        return room < 0
          ? { mantissa: twice, shift: 1n }
          : { mantissa: (twice << BigInt(room)) + ulps, shift: BigInt(room + 1) };
      })
      .filter(({ mantissa }) => mantissa > -(2n ** 53n) && mantissa < 2n ** 53n);
    fc.assert(
      fc.property(half, fc.constantFrom(...ROUNDINGS), ({ mantissa, shift }, mode) => {
        const x = Number(mantissa) / Number(2n ** shift);
        expect(roundTo(x, mode)).toBe(Number(shifted(mantissa, shift, mode)));
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });

  test.each(ROUNDINGS)('by %s never gives -0', (mode) => {
    for (const x of [-0, 0, -Number.MIN_VALUE, -0.25, -0.49999999999999994, -0.5]) {
      expect(Object.is(roundTo(x, mode), -0), `${x}`).toBe(false);
    }
  });

  test.each(ROUNDINGS)('by %s leaves NaN, infinities and large doubles as they are', (mode) => {
    for (const x of [NaN, Infinity, -Infinity, 2 ** 52, -(2 ** 52), 2 ** 53 + 2, 1e300, -1e300]) {
      expect(roundTo(x, mode)).toBe(x);
    }
  });

  test('rounds the double just below one half down in both nearest modes', () => {
    expect(roundTo(0.49999999999999994, 'half-up')).toBe(0);
    expect(roundTo(0.49999999999999994, 'half-even')).toBe(0);
  });
});

/** k / 2^n in integers: the shifts and divisions that a C compiler emits. */
function shifted(k: bigint, n: bigint, mode: Rounding): bigint {
  const below = k >> n;
  switch (mode) {
    case 'floor':
      return below;
    case 'toward-zero':
      return k / 2n ** n;
    case 'half-up':
      return n === 0n ? k : (k + (1n << (n - 1n))) >> n;
    case 'half-even': {
      const twiceRest = 2n * (k - (below << n));
      const up = twiceRest > 2n ** n || (twiceRest === 2n ** n && (below & 1n) === 1n);
      return up ? below + 1n : below;
    }
  }
}
