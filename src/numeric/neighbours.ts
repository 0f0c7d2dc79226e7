/** Doubles as points on a line of integers, where each one's neighbours are one step away. */

const double = new Float64Array(1);
const bits = new BigInt64Array(double.buffer);

/**
 * The least double above x; +Infinity above the largest.
 *
 *   x = ±0  2^-1074    x = -2^-1074  0    x = +Inf  +Inf    x = NaN  NaN
 *   x = -Inf  the lowest finite double
 */
export function nextUp(x: number): number {
  return x < Infinity ? atRank(rank(x) + 1n) : x;
}

/** The greatest double below x: -nextUp(-x). */
export function nextDown(x: number): number {
  return -nextUp(-x);
}

/**
 * The double half way between two others by the number of doubles between, not by their values:
 * halving [0, 1] this way reaches 2^-1074 in 62 steps, where the mean takes 1074.
 * low <= high, neither NaN. Lies strictly between unless they are equal or neighbours.
 */
export function middleDouble(low: number, high: number): number {
  // Shifting rounds towards -Infinity.
  return atRank((rank(low) + rank(high)) >> 1n);
}

/** 0 for both zeros, 1 for the smallest positive double, -1 for its negative, and so on. */
function rank(x: number): bigint {
  double[0] = Math.abs(x);
  return x < 0 ? -bits[0]! : bits[0]!;
}

function atRank(position: bigint): number {
  bits[0] = position < 0n ? -position : position;
  return position < 0n ? -double[0]! : double[0]!;
}
