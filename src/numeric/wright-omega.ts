/**
 * The Wright omega function for real arguments: the one w > 0 with w + ln w = x, in other words
 * Lambert's W of e^x without forming e^x, which would overflow.
 *
 * Between -32 and 16, where the curves of PV sources lie, a table of Taylor series answers without
 * a transcendental function: omega has its nearest singularities at -1 ± iπ, so around a knot the
 * series converges at least as fast as powers of (1/32)/π, and eight terms leave out less than
 * 3e-17 of the result. Below -32 omega is t - t² in t = e^x. Above 16: the iteration of Fritsch,
 * Shafer and Crowley 1973 (CACM 16, algorithm 443), which is of fourth order.
 */
import { exp } from './exponential.js';
import { log } from './logarithm.js';

const TABLE_FROM = -32;
const TABLE_TO = 16;
const KNOTS_PER_UNIT = 16;
const TERMS = 8;
/** 1.5 · 2^52: adding it to a double below 2^51 and taking it off again rounds to an integer. */
const TO_INTEGER = 6755399441055744;

/**
 * TERMS coefficients a knot, of the powers of the distance from it in steps; 0, which omega never
 * is, until the table is needed: loading this module costs nothing.
 */
const table = new Float64Array(((TABLE_TO - TABLE_FROM) * KNOTS_PER_UNIT + 1) * TERMS);

/**
 * The w > 0 with w + ln w = x. Error at most 3 ulp, for subnormal results too.
 *
 *   x = -Inf  0        x = +Inf  +Inf        x = NaN  NaN
 *   x = 1     1        x < -745.1332191019411  0: omega is below half the smallest double
 */
export function wrightOmega(x: number): number {
  if (x >= TABLE_FROM && x < TABLE_TO) {
    const position = x * KNOTS_PER_UNIT;
    const nearest = position + TO_INTEGER - TO_INTEGER;
    // In steps of the table, and exact: both are multiples of the last place of the smaller one.
    const d = position - nearest;
    const knot = (nearest - TABLE_FROM * KNOTS_PER_UNIT) | 0;
    const k = knot * TERMS;
    const atKnot = table[k]!;
    if (atKnot === 0) return 1 * afterFilling(x);
    // Estrin's scheme: short dependency chains keep the processor busy.
    const d2 = d * d;
    const low = table[k + 1]! + d * table[k + 2]! + d2 * (table[k + 3]! + d * table[k + 4]!);
    const high = table[k + 5]! + d * table[k + 6]! + d2 * table[k + 7]!;
    return atKnot + d * (low + d2 * d2 * high);
  }
  // The factor 1 tells the compiler that the call gives a number, so that the value returned from
  // the common path needs no box.
  return 1 * (x < TABLE_FROM ? belowTable(x) : aboveTable(x));
}

// W(t) = t - t² + 3/2 t³ - ..., t < e^-32: the third term is below 3e-28 of the result.
function belowTable(x: number): number {
  const t = exp(x);
  return t - t * t;
}

function aboveTable(x: number): number {
  // Here ln(omega) is ln x to within half its last place; NaN and Infinity answer themselves.
  if (!(x < FAR_ABOVE)) return x < Infinity ? x - log(x) : x;
  return refine(refine(x - log(x), x), x);
}

const FAR_ABOVE = 1e18;

function refine(w: number, x: number): number {
  const residual = x - w - log(w);
  const one = 1 + w;
  const q = 2 * one * (one + (2 / 3) * residual);
  return w * (1 + ((residual / one) * (q - residual)) / (q - 2 * residual));
}

// All knots at once, so that this stays rare: engines unfold what is called often into its callers.
function afterFilling(x: number): number {
  let w = exp(TABLE_FROM);
  for (let k = 0; k < table.length; k += TERMS) {
    const place = k / TERMS / KNOTS_PER_UNIT + TABLE_FROM;
    w = place < 0 ? refineSmall(w, place) : refine(w, place);
    const coefficients = table.subarray(k, k + TERMS);
    fillSeries(coefficients, w);
    // At the next knot, one step away.
    w = coefficients.reduceRight((sum, coefficient) => sum + coefficient);
  }
  return wrightOmega(x);
}

/** A Newton step on w e^w = e^x: where |x| is large beside w, the residual above loses places. */
function refineSmall(w: number, x: number): number {
  const power = w * exp(w);
  return w + (w * (exp(x) - power)) / (power * (1 + w));
}

// omega' = omega / (1 + omega). With y = omega - w that is (1 + w) y' + (y² / 2)' = w + y, compared
// power by power, for powers of x in steps of the table.
function fillSeries(a: Float64Array, w: number): void {
  a[0] = w;
  for (let n = 1; n < a.length; n++) {
    let square = 0;
    for (let k = 1; k < n; k++) square += a[k]! * a[n - k]!;
    a[n] = (a[n - 1]! / (n * KNOTS_PER_UNIT) - 0.5 * square) / (1 + w);
  }
}
