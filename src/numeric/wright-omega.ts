/**
 * The Wright omega function for real arguments: the one w > 0 with w + ln w = x, in other words
 * Lambert's W of e^x without forming e^x, which would overflow.
 *
 *   x = -Inf  0        x = +Inf  +Inf        x = NaN  NaN
 *   x = 1     1
 *
 * Relative error at most 4 ulp for x >= -6 (2e-16 of x more below, where omega is e^x and so
 * inherits the conditioning of the exponential). Held against arbitrary precision in the tests.
 *
 * Between -6 and 40 a table of Taylor series answers without a transcendental function: omega has
 * its nearest singularities at -1 ± iπ, so around a knot the series converges at least as fast as
 * powers of (1/32)/π, and nine terms reach double precision.
 * Above 40 and in building the table: the iteration of Fritsch, Shafer and Crowley 1973 (CACM 16,
 * algorithm 443), which is of fourth order. Below -6: the Lagrange series of W in t = e^x.
 */
import { exp } from './exponential.js';
import { log } from './logarithm.js';

const TABLE_FROM = -6;
const TABLE_TO = 40;
const KNOTS_PER_UNIT = 16;
const TERMS = 9;

const table = buildTable();

export function wrightOmega(x: number): number {
  if (x >= TABLE_FROM && x < TABLE_TO) {
    const position = (x - TABLE_FROM) * KNOTS_PER_UNIT;
    const knot = (position + 0.5) | 0;
    const d = (position - knot) * (1 / KNOTS_PER_UNIT);
    const k = knot * TERMS;
    // Estrin's scheme: short dependency chains keep the processor busy.
    const d2 = d * d;
    const d4 = d2 * d2;
    const low = table[k + 1]! + d * table[k + 2]! + d2 * (table[k + 3]! + d * table[k + 4]!);
    const high = table[k + 5]! + d * table[k + 6]! + d2 * (table[k + 7]! + d * table[k + 8]!);
    return table[k]! + d * (low + d4 * high);
  }
  return x < TABLE_FROM ? belowTable(x) : aboveTable(x);
}

// W(t) = t - t² + 3/2 t³ - 8/3 t⁴ + 125/24 t⁵ - 54/5 t⁶ + 16807/720 t⁷ - ..., t < e^-6: the first
// term left out is 16384/315 t⁸, below 1e-16 of the result.
function belowTable(x: number): number {
  const t = exp(x);
  const tail = 125 / 24 - t * (54 / 5 - t * (16807 / 720 - t * (16384 / 315)));
  return t - t * t * (1 - t * (1.5 - t * (8 / 3 - t * tail)));
}

function aboveTable(x: number): number {
  if (!(x < Infinity)) return x;
  return refine(refine(x - log(x), x), x);
}

function refine(w: number, x: number): number {
  const residual = x - w - log(w);
  const one = 1 + w;
  const q = 2 * one * (one + (2 / 3) * residual);
  return w * (1 + ((residual / one) * (q - residual)) / (q - 2 * residual));
}

function buildTable(): Float64Array {
  const knots = (TABLE_TO - TABLE_FROM) * KNOTS_PER_UNIT + 1;
  const terms = new Float64Array(knots * TERMS);
  for (let knot = 0; knot < knots; knot++) {
    const x = TABLE_FROM + knot / KNOTS_PER_UNIT;
    let w = x < 1 ? exp(x) / (1 + exp(x)) : x - log(x) + 0.3;
    for (let pass = 0; pass < 4; pass++) w = refine(w, x);
    fillSeries(terms.subarray(knot * TERMS, (knot + 1) * TERMS), w);
  }
  return terms;
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
