/**
 * The Wright omega function for real arguments: the one w > 0 with w + ln w = x, in other words
 * Lambert's W of e^x without forming e^x, which would overflow.
 *
 * Between -6 and 40 a table of Taylor series answers without a transcendental function: omega has
 * its nearest singularities at -1 ± iπ, so around a knot the series converges at least as fast as
 * powers of (1/32)/π, and nine terms reach double precision. A knot is worked out when it is first
 * needed: loading this module costs nothing, and one curve touches a few dozen.
 * Above 40 and for the knots: the iteration of Fritsch, Shafer and Crowley 1973 (CACM 16,
 * algorithm 443), which is of fourth order. Below -6: the Lagrange series of W in t = e^x.
 */
import { exp } from './exponential.js';
import { log } from './logarithm.js';

const TABLE_FROM = -6;
const TABLE_TO = 40;
const KNOTS_PER_UNIT = 16;
const TERMS = 9;

/** TERMS coefficients a knot; 0, which omega never is, where a knot has not been needed yet. */
const table = new Float64Array(((TABLE_TO - TABLE_FROM) * KNOTS_PER_UNIT + 1) * TERMS);

/**
 * The w > 0 with w + ln w = x. Error at most 3 ulp, for subnormal results too.
 *
 *   x = -Inf  0        x = +Inf  +Inf        x = NaN  NaN
 *   x = 1     1        x < -745.1332191019411  0: omega is below half the smallest double
 */
export function wrightOmega(x: number): number {
  if (x >= TABLE_FROM && x < TABLE_TO) {
    const knot = ((x - TABLE_FROM) * KNOTS_PER_UNIT + 0.5) | 0;
    // Exact: the knot and x are multiples of the last place of one of them, and close.
    const d = x - (knot * (1 / KNOTS_PER_UNIT) + TABLE_FROM);
    const k = knot * TERMS;
    const atKnot = table[k]!;
    if (atKnot === 0) return 1 * afterFilling(knot, x);
    // Estrin's scheme: short dependency chains keep the processor busy.
    const d2 = d * d;
    const low = table[k + 1]! + d * table[k + 2]! + d2 * (table[k + 3]! + d * table[k + 4]!);
    const high = table[k + 5]! + d * table[k + 6]! + d2 * (table[k + 7]! + d * table[k + 8]!);
    return atKnot + d * (low + d2 * d2 * high);
  }
  return x < TABLE_FROM ? belowTable(x) : aboveTable(x);
}

// W(t) = t - t² + 3/2 t³ - 8/3 t⁴ + 125/24 t⁵ - 54/5 t⁶ + 16807/720 t⁷ - 16384/315 t⁸ + ...,
// t < e^-6: the first term left out, 531441/4480 t⁹, is below 2e-19 of the result.
function belowTable(x: number): number {
  const t = exp(x);
  const tail = 125 / 24 - t * (54 / 5 - t * (16807 / 720 - t * (16384 / 315)));
  return t - t * t * (1 - t * (1.5 - t * (8 / 3 - t * tail)));
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

function afterFilling(knot: number, x: number): number {
  const place = knot * (1 / KNOTS_PER_UNIT) + TABLE_FROM;
  let w = place < 1 ? exp(place) / (1 + exp(place)) : place - log(place) + 0.3;
  for (let pass = 0; pass < 3; pass++) w = refine(w, place);
  // The residual above is a difference of numbers as large as x, this one of e^x: w + ln w - x
  // to the last place even where x is large beside omega.
  const power = w * exp(w);
  w += (w * (exp(place) - power)) / (power * (1 + w));
  fillSeries(table.subarray(knot * TERMS, (knot + 1) * TERMS), w);
  return wrightOmega(x);
}

// omega' = omega / (1 + omega): (1 + omega) omega' = omega, compared power by power.
function fillSeries(a: Float64Array, w: number): void {
  a[0] = w;
  for (let n = 0; n + 1 < a.length; n++) {
    let known = a[n]!;
    for (let k = 1; k <= n; k++) known -= a[k]! * (n - k + 1) * a[n - k + 1]!;
    a[n + 1] = known / ((n + 1) * (1 + w));
  }
}
