/**
 * e^x and e^x - 1 from IEEE 754 basic operations alone, so every engine gives the same bits.
 *
 * Method: P. T. P. Tang, ACM TOMS 15 (1989) 144-157 and, for expm1, 18 (1992) 211-222. With k the
 * integer nearest to x · 128/ln 2, written 128 e + j, and r = x - k ln 2/128,
 *
 *   e^x = 2^e · 2^(j/128) · e^r,   |r| <= ln 2/256,
 *
 * where 2^(j/128) comes from a table in two parts and e^r - 1 from a short polynomial. Below 1/8
 * in magnitude expm1 has a polynomial of its own. NaN results have whatever bits the engine likes.
 */
import * as table from './exponential-table.js';
import { POWERS_OF_TWO } from './powers-of-two.js';

// Engines fold a module's own constants into the code, but look imported ones up at every call.
const { STEPS_PER_UNIT, STEP_HIGH, STEP_LOW, TWO_TO_STEP, TWO_TO_STEP_REST } = table;
const [Q3, Q4, Q5, Q6, Q7, Q8, Q9, Q10] = table.EXPM1_NEAR_ZERO;
const POWERS = POWERS_OF_TWO;

/** 1.5 · 2^52: adding it to a double below 2^51 and taking it off again rounds to an integer. */
const TO_INTEGER = 6755399441055744;
const SMALLEST_NORMAL = 2.2250738585072014e-308;

/**
 * e^x. Error below 0.52 ulp by the sum of all roundings, subnormal results included; 0.509 ulp in
 * the worst of 600 000 arguments compared with 56-digit arithmetic.
 *
 *   x = -Inf  0        x = +Inf  +Inf        x = NaN  NaN        x = ±0  1
 *   x >  709.782712893384    +Inf: e^x is beyond the largest double
 *   x < -745.1332191019411   0: e^x is below half the smallest double
 */
export function exp(x: number): number {
  // The factor 1 tells the compiler that the call gives a number, so that the value returned from
  // the common path needs no box.
  if (!(Math.abs(x) < 708)) return 1 * expNearLimits(x);
  const steps = x * STEPS_PER_UNIT + TO_INTEGER - TO_INTEGER;
  const k = steps | 0;
  const j = k & 127;
  const power = TWO_TO_STEP[j]!;
  const p = expm1InStep(x - steps * STEP_HIGH - steps * STEP_LOW);
  return (power + (TWO_TO_STEP_REST[j]! + power * p)) * POWERS[(k >> 7) + 1023]!;
}

/**
 * e^x - 1 without the cancellation near 0. Error below 0.62 ulp by the sum of all roundings;
 * 0.563 ulp in the worst of 900 000 arguments compared with 56-digit arithmetic.
 *
 *   x = -Inf  -1       x = +Inf  +Inf        x = NaN  NaN        x = ±0  ±0
 *   x > 709.782712893384    +Inf: e^x - 1 is beyond the largest double
 *   |x| < 2^-54             x, subnormal numbers included
 */
export function expm1(x: number): number {
  const size = Math.abs(x);
  if (size <= 0.125) return 1 * expm1NearZero(x);
  if (!(size < 708)) return 1 * expNearLimits(x) - 1;
  const steps = x * STEPS_PER_UNIT + TO_INTEGER - TO_INTEGER;
  const k = steps | 0;
  const j = k & 127;
  const scale = POWERS[(k >> 7) + 1023]!;
  const power = TWO_TO_STEP[j]! * scale;
  const p = expm1InStep(x - steps * STEP_HIGH - steps * STEP_LOW);
  // power - 1 as a sum of two doubles, exactly: the larger of the two is taken off last.
  const high = power - 1;
  const low = k >= 0 ? power - high - 1 : power - (high + 1);
  return high + (low + (TWO_TO_STEP_REST[j]! * scale + power * p));
}

/** Taylor's series, cut where the next term is below 2^-60 for |r| <= ln 2/256. */
function expm1InStep(r: number): number {
  const rr = r * r;
  return r + rr * (0.5 + r * (1 / 6) + rr * (1 / 24 + r * (1 / 120)));
}

function expm1NearZero(x: number): number {
  // 2^-54. Also keeps the sign of -0, and subnormal numbers whole.
  if (Math.abs(x) < 5.551115123125783e-17) return x;
  const xx = x * x;
  const low = Q3 + x * Q4 + xx * (Q5 + x * Q6);
  const high = Q7 + x * Q8 + xx * (Q9 + x * Q10);
  return x + (0.5 * xx + x * xx * (low + xx * xx * high));
}

/** e^x for |x| >= 708 and NaN, where 2^e or the result leaves the normal range. */
function expNearLimits(x: number): number {
  if (!(x <= 709.782712893384)) return x > 0 ? Infinity : NaN;
  if (x < -746) return 0;
  const steps = x * STEPS_PER_UNIT + TO_INTEGER - TO_INTEGER;
  const e = steps >> 7;
  const power = TWO_TO_STEP[steps & 127]!;
  const p = expm1InStep(x - steps * STEP_HIGH - steps * STEP_LOW);
  const rest = TWO_TO_STEP_REST[steps & 127]! + power * p;
  if (e > 0) return (power + rest) * POWERS[e - 1 + 1023]! * 2;
  if (e > -1022) return (power + rest) * POWERS[e + 1023]!;
  return subnormal(power, rest, e);
}

/**
 * (power + rest) · 2^e for e <= -1022, rounded once. Adding 2^(-1022 - e) brings the last place of
 * the sum to where that of the subnormal result will be.
 */
function subnormal(power: number, rest: number, e: number): number {
  const anchor = POWERS[-1022 - e + 1023]!;
  const sum = anchor + power;
  const rounded =
    e === -1022 && power + rest >= 1
      ? power + rest
      : sum + (power - (sum - anchor) + rest) - anchor;
  return rounded * POWERS[e + 1022 + 1023]! * SMALLEST_NORMAL;
}
