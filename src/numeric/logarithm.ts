/**
 * ln x and ln(1 + x) from IEEE 754 basic operations alone, so every engine gives the same bits.
 *
 * Method: P. T. P. Tang, ACM TOMS 16 (1990) 378-400. With x = 2^e z, 1 <= z < 2, and F the middle
 * of that 1/128 of the interval in which z lies,
 *
 *   ln x = e ln 2 + ln F + ln(1 + u),   u = (z - F)/F,   |u| <= 1/256,
 *
 * where ln 2 and ln F come in two parts each, the first of them short enough to add up exactly.
 * Near x = 1, where those would cancel, a polynomial in x - 1 takes over.
 */
import * as table from './logarithm-table.js';
import { POWERS_OF_TWO } from './powers-of-two.js';

// Engines fold a module's own constants into the code, but look imported ones up at every call.
const { LN2_HIGH, LN2_LOW, POINT, RECIPROCAL, LOG_HIGH, LOG_LOW } = table;
const [U3, U4, U5, U6] = table.LOG1P_IN_STEP;
const [Q3, Q4, Q5, Q6, Q7, Q8, Q9, Q10, Q11, Q12] = table.LOG1P_NEAR_ZERO;
const POWERS = POWERS_OF_TWO;

const double = new Float64Array(1);
const words = new Int32Array(double.buffer);
/** Where the sign, the exponent and the top of the fraction are: 1 if the low word comes first. */
const TOP = new Uint8Array(new Uint16Array([1]).buffer)[0]!;

/**
 * ln x. Error below 0.66 ulp by the sum of all roundings, subnormal x included; 0.572 ulp in the
 * worst of 700 000 arguments compared with 56-digit arithmetic.
 *
 *   x = +Inf  +Inf     x = ±0  -Inf          x < 0  NaN          x = NaN  NaN
 *   x = 1     0
 */
export function log(x: number): number {
  double[0] = x;
  const top = words[TOP]!;
  // The factor 1 tells the compiler that the call gives a number, so that the value returned from
  // the common path needs no box.
  if ((top - 0x3fee0000) >>> 0 < 0x30000) return 1 * log1pNearZero(x - 1);
  const e = top >> 20;
  if ((e - 1) >>> 0 >= 2046) return 1 * logNearLimits(x);
  const j = (top >> 13) & 127;
  return logOfProduct(e - 1023, j, x * POWERS[2046 - e]! - POINT[j]!);
}

/**
 * ln(1 + x) without the loss of x's last places near 0. Error below 0.66 ulp by the sum of all
 * roundings; 0.573 ulp in the worst of 800 000 arguments compared with 56-digit arithmetic.
 *
 *   x = +Inf  +Inf     x = -1  -Inf          x < -1  NaN         x = NaN  NaN
 *   x = ±0    ±0       |x| < 2^-54  x, subnormal numbers included
 */
export function log1p(x: number): number {
  if (Math.abs(x) < 0.0625) return 1 * log1pNearZero(x);
  const sum = 1 + x;
  if (!(sum > 0 && sum < Infinity)) return 1 * logNearLimits(sum);
  // What the rounding of 1 + x left off, exactly: D. E. Knuth, TAOCP vol. 2, 4.2.2.
  const one = sum - x;
  const rest = x - (sum - one) + (1 - one);
  double[0] = sum;
  const top = words[TOP]!;
  const e = top >> 20;
  const j = (top >> 13) & 127;
  const scale = POWERS[2046 - e]!;
  return logOfProduct(e - 1023, j, sum * scale - POINT[j]! + rest * scale);
}

/** ln(2^e (F + f)) with F = POINT[j] and |f| <= 1/256. */
function logOfProduct(e: number, j: number, f: number): number {
  const u = f * RECIPROCAL[j]!;
  const uu = u * u;
  const curve = uu * (-0.5 + u * U3 + uu * (U4 + u * U5 + uu * U6));
  return e * LN2_HIGH + LOG_HIGH[j]! + (u + (curve + (e * LN2_LOW + LOG_LOW[j]!)));
}

/** ln(1 + x) for |x| <= 1/16. */
function log1pNearZero(x: number): number {
  // 2^-54. Also keeps the sign of -0, and subnormal numbers whole.
  if (Math.abs(x) < 5.551115123125783e-17) return x;
  const xx = x * x;
  const x4 = xx * xx;
  const low = Q3 + x * Q4 + xx * (Q5 + x * Q6);
  const high = Q7 + x * Q8 + xx * (Q9 + x * Q10) + x4 * (Q11 + x * Q12);
  return x - (0.5 * xx - x * xx * (low + x4 * high));
}

/** ln x for subnormal x, and for everything that has no finite logarithm. */
function logNearLimits(x: number): number {
  if (x === 0) return -Infinity;
  if (!(x > 0)) return NaN;
  if (x === Infinity) return Infinity;
  // 2^54 makes x normal; 1/128 of an octave is the same interval before and after.
  double[0] = x * 18014398509481984;
  const top = words[TOP]!;
  const e = top >> 20;
  const j = (top >> 13) & 127;
  return logOfProduct(e - 1077, j, double[0] * POWERS[2046 - e]! - POINT[j]!);
}
