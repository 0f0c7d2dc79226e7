/**
 * How a real number becomes an integer. Four modes, each of them something firmware does:
 *
 * - `half-even`: to the nearest, ties to the even one. No bias; the default of IEEE 754.
 * - `half-up`: to the nearest, ties upwards. `(x + half) >> n` in C, the rounding shifts of DSP
 *   instruction sets, and an ADC, whose code is floor(x / LSB + 1/2).
 * - `toward-zero`: drops the fraction. `/` and integer casts in C.
 * - `floor`: to the next integer below. `>>` of a two's complement number.
 *
 * Ties away from zero (`lround`) is left out: it belongs to floating-point code, equals `half-up`
 * for everything above zero, and differs from it only on exact ties below zero.
 */
export const ROUNDINGS = ['half-even', 'half-up', 'toward-zero', 'floor'] as const;
export type Rounding = (typeof ROUNDINGS)[number];

/**
 * The integer that `x` rounds to. Exact for every finite x; never -0.
 * From 2^52 on every double is an integer and is returned as it is; NaN and the infinities too.
 */
export function roundTo(x: number, rounding: Rounding): number {
  switch (rounding) {
    case 'half-even':
      return roundHalfEven(x);
    case 'half-up':
      // Adding 0 turns -0 into 0.
      return Math.round(x) + 0;
    case 'toward-zero':
      return Math.trunc(x) + 0;
    case 'floor':
      return Math.floor(x) + 0;
  }
}

const TWO_TO_52 = 4_503_599_627_370_496;

// Doubles between 2^52 and 2^53 are one apart, so the addition itself rounds, half to even.
function roundHalfEven(x: number): number {
  if (!(Math.abs(x) < TWO_TO_52)) return x;
  return x >= 0 ? x + TWO_TO_52 - TWO_TO_52 : x - TWO_TO_52 + TWO_TO_52;
}
