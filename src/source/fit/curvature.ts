/**
 * phi(x) = e^x - 1 - x, how far the exponential has left its tangent at zero, and its inverse on the
 * left branch: the two functions that the exact reduction of a datasheet is made of.
 */
import { expm1 } from '../../numeric/exponential.js';

/**
 * e^x - 1 - x without the cancellation near zero; at least 0. Error below 4 ulp for |x| up to 0.5,
 * below 10 ulp beyond (held against 40-digit references).
 */
export function phi(x: number): number {
  if (Math.abs(x) > 0.5) return expm1(x) - x;
  let sum = 0;
  for (let n = SERIES_TERMS; n >= 3; n -= 1) sum = (x / n) * (1 + sum);
  return 0.5 * x * x * (1 + sum);
}

// 0.5^14 · 2 / 16! is below 2^-57.
const SERIES_TERMS = 16;

/**
 * The x >= 0 for which phi(-x) = x - 1 + e^-x is `value`.
 *
 * The function is convex and rises from 0, so Newton's method descends to the root from any point
 * above it. Such a point: value + 1, for e^-x > 0. Near zero x ≈ √(2 value), and with
 * s = √(2 value), s + s²/4 is above the root up to s = 2 (phi(-x) >= x²/2 - x³/6 gives that).
 * Accuracy: 4e-16 relative and what `phi` adds, halved (a square root).
 */
export function inversePhiLeft(value: number): number {
  if (!(value > 0)) return 0;
  const s = Math.sqrt(2 * value);
  let x = s < 2 ? Math.min(s + 0.25 * s * s, value + 1) : value + 1;
  for (let pass = 0; pass < MOST_PASSES; pass += 1) {
    const step = (phi(-x) - value) / -expm1(-x);
    x -= step;
    // The next step would be the square of this one times e^-x / (2 (1 - e^-x)).
    if (Math.abs(step) <= SETTLED * x) break;
  }
  return x;
}

const SETTLED = 1e-9;
// 3 to 6 in practice.
const MOST_PASSES = 60;
