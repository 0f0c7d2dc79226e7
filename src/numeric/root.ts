/**
 * Roots of a continuous function between two points where its signs differ. Both searches say how
 * they ended; both need at most 124 values of the function inside the bracket, however wild it is:
 * after 60 clever steps they halve the number of doubles left, and 64 halvings exhaust it.
 */
import { argumentFault } from '../fault.js';
import { middleDouble, nextDown, nextUp } from './neighbours.js';

export type RootResult =
  /** The sign changes within `tolerance` of `root`, or between it and a neighbouring double. */
  | {
      readonly status: 'converged';
      readonly root: number;
      /** The function there: large if the sign changes by a jump or a pole. */
      readonly residual: number;
      /** Values taken inside the bracket. */
      readonly iterations: number;
    }
  | {
      readonly status: 'no-sign-change';
      readonly low: number;
      readonly high: number;
      readonly valueAtLow: number;
      readonly valueAtHigh: number;
    }
  /** The sign changes between `low` and `high`; `best` is the one with the smaller residual. */
  | {
      readonly status: 'iteration-limit';
      readonly best: number;
      readonly residual: number;
      readonly low: number;
      readonly high: number;
      readonly iterations: number;
    }
  /** The function gave NaN at `at`. */
  | { readonly status: 'not-a-number'; readonly at: number; readonly iterations: number };

export interface RootOptions {
  /**
   * Width of the final bracket, in the unit of the argument, at least 0. Default 0: the search
   * ends at a zero of the function or between neighbouring doubles.
   */
  readonly tolerance?: number;
  /** Values to take inside the bracket at most. Default 124, which always suffices. */
  readonly iterationLimit?: number;
}

const CLEVER_STEPS = 60;
const ALWAYS_ENOUGH = CLEVER_STEPS + 64;
/** 2^-20: twenty bisections by value and the ends would still differ in size. */
const FAR_APART = 9.5367431640625e-7;
const DEFAULTS: RootOptions = {};

/**
 * A root from values alone, by the method of T. R. Chandrupatla, Advances in Engineering Software
 * 28 (1997) 145-149: inverse quadratic interpolation where the last three points make it safe,
 * else bisection.
 * @param f Continuous; may be ±Infinity, which counts by its sign.
 * @param low Finite, at most `high`.
 * @throws Fault ARGUMENT for ends or options out of range.
 * @example findRoot((x) => x * x - 4, 0, 3) // { status: 'converged', root: 2, residual: 0, … }
 */
export function findRoot(
  f: (x: number) => number,
  low: number,
  high: number,
  options: RootOptions = DEFAULTS,
): RootResult {
  const { tolerance = 0, iterationLimit = ALWAYS_ENOUGH } = options;
  checkArguments(low, high, tolerance, iterationLimit);
  // The latest point is a; b is the nearest one on the other side of the root.
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  const early = resultAtEnds(a, fa, b, fb);
  if (early !== undefined) return early;
  let share = NaN;
  let reach = 0.5 * tolerance;
  for (let iterations = 0; ; iterations += 1) {
    if (isClosed(a, b, tolerance)) return converged(a, fa, b, fb, iterations);
    if (iterations >= iterationLimit) return stopped(a, fa, b, fb, iterations);
    const x = nextPoint(a + share * (b - a), a, b, reach, iterations);
    const fx = f(x);
    if (!(Math.abs(fx) > 0)) return zeroOrNaN(x, fx, iterations + 1);
    const sameSide = fx > 0 === fa > 0;
    reach = nextReach(reach, tolerance, sameSide, x, Math.abs(x - a));
    const c = sameSide ? a : b;
    const fc = sameSide ? fa : fb;
    if (!sameSide) {
      b = a;
      fb = fa;
    }
    a = x;
    fa = fx;
    share = interpolatedShare(a, fa, b, fb, c, fc);
  }
}

/**
 * A root from values and slopes: Newton's method inside a shrinking bracket, with bisection where
 * a step would leave it or is not down to half the step before the last.
 * @param f As for `findRoot`.
 * @param slope The derivative of f. Asked only at the point at which f was asked last, so the two
 * can share work. Any value is survived, NaN and 0 included.
 * @param options As for `findRoot`. `start` is the first point tried; the mean of the ends unless
 * it lies between them.
 * @throws Fault ARGUMENT for ends or options out of range.
 */
export function findRootWithSlope(
  f: (x: number) => number,
  slope: (x: number) => number,
  low: number,
  high: number,
  options: RootOptions & { readonly start?: number } = DEFAULTS,
): RootResult {
  const { tolerance = 0, iterationLimit = ALWAYS_ENOUGH, start = NaN } = options;
  checkArguments(low, high, tolerance, iterationLimit);
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  const early = resultAtEnds(a, fa, b, fb);
  if (early !== undefined) return early;
  let proposal = start;
  let reach = 0.5 * tolerance;
  let x = NaN;
  let step = NaN;
  for (let iterations = 0; ; iterations += 1) {
    if (isClosed(a, b, tolerance)) return converged(a, fa, b, fb, iterations);
    if (iterations >= iterationLimit) return stopped(a, fa, b, fb, iterations);
    const last = x;
    x = nextPoint(proposal, a, b, reach, iterations);
    const fx = f(x);
    if (!(Math.abs(fx) > 0)) return zeroOrNaN(x, fx, iterations + 1);
    const onSideOfA = fx > 0 === fa > 0;
    const sameSide = onSideOfA ? last === a : last === b;
    const stepBefore = step;
    step = Math.abs(x - last);
    reach = nextReach(reach, tolerance, sameSide, x, step);
    if (onSideOfA) {
      a = x;
      fa = fx;
    } else {
      b = x;
      fb = fx;
    }
    const change = fx / slope(x);
    // At first there is no step before the last: NaN, which bars nothing.
    proposal = Math.abs(change) > Math.max(0.5 * stepBefore, reach) ? NaN : x - change;
  }
}

function checkArguments(low: number, high: number, tolerance: number, limit: number): void {
  if (!Number.isFinite(low)) throw argumentFault('low', 'finite', low);
  if (!(high >= low && high < Infinity)) {
    throw argumentFault('high', `finite and at least ${low}`, high);
  }
  if (!(tolerance >= 0 && tolerance < Infinity)) {
    throw argumentFault('tolerance', 'finite and at least 0', tolerance);
  }
  if (!(Number.isSafeInteger(limit) && limit >= 1)) {
    throw argumentFault('iterationLimit', 'an integer of at least 1', limit);
  }
}

function resultAtEnds(low: number, fLow: number, high: number, fHigh: number) {
  if (!(Math.abs(fLow) > 0)) return zeroOrNaN(low, fLow, 0);
  if (!(Math.abs(fHigh) > 0)) return zeroOrNaN(high, fHigh, 0);
  if (fLow > 0 !== fHigh > 0) return undefined;
  const values = { valueAtLow: fLow, valueAtHigh: fHigh };
  return { status: 'no-sign-change', low, high, ...values } as const;
}

function zeroOrNaN(x: number, value: number, iterations: number): RootResult {
  return value === 0
    ? { status: 'converged', root: x, residual: 0, iterations }
    : { status: 'not-a-number', at: x, iterations };
}

function isClosed(a: number, b: number, tolerance: number): boolean {
  const between = mean(a, b);
  return Math.abs(a - b) <= tolerance || between === a || between === b;
}

/** Rounded once, hence strictly between its arguments unless they are equal or neighbours. */
function mean(a: number, b: number): number {
  const sum = a + b;
  return Math.abs(sum) < Infinity ? 0.5 * sum : 0.5 * a + 0.5 * b;
}

function converged(a: number, fa: number, b: number, fb: number, iterations: number): RootResult {
  return Math.abs(fa) <= Math.abs(fb)
    ? { status: 'converged', root: a, residual: fa, iterations }
    : { status: 'converged', root: b, residual: fb, iterations };
}

function stopped(a: number, fa: number, b: number, fb: number, iterations: number): RootResult {
  const isA = Math.abs(fa) <= Math.abs(fb);
  return {
    status: 'iteration-limit',
    best: isA ? a : b,
    residual: isA ? fa : fb,
    low: Math.min(a, b),
    high: Math.max(a, b),
    iterations,
  };
}

/** The proposal if it is inside the bracket, kept `reach` away from the ends so that they close. */
function nextPoint(
  proposal: number,
  a: number,
  b: number,
  reach: number,
  iterations: number,
): number {
  const low = Math.min(a, b);
  const high = Math.max(a, b);
  if (iterations >= CLEVER_STEPS) return middleDouble(low, high);
  const least = low + reach;
  const most = high - reach;
  if (!(proposal >= low && proposal <= high && least < most)) return half(low, high);
  const x = Math.min(Math.max(proposal, least), most);
  if (x <= low) return nextUp(low);
  return x >= high ? nextDown(high) : x;
}

/** Half way by value; by the number of doubles if the ends are of one sign and far apart in size. */
function half(low: number, high: number): number {
  const isFarApart = low > 0 ? high * FAR_APART > low : high < 0 && low * FAR_APART < high;
  return isFarApart ? middleDouble(low, high) : mean(low, high);
}

/**
 * How far the next point has to stay from the ends. A step of this least size that did not get
 * past the root is followed by one of twice the size, so that rounding noise cannot make it crawl.
 */
function nextReach(reach: number, tolerance: number, sameSide: boolean, x: number, step: number) {
  const isSmall = step <= 1.5 * reach || step <= 4 * Number.EPSILON * Math.abs(x);
  return sameSide && isSmall ? 2 * step : 0.5 * tolerance;
}

/** Where to go from a (0) towards b (1); NaN, as infinite values give too, asks for bisection. */
function interpolatedShare(
  a: number,
  fa: number,
  b: number,
  fb: number,
  c: number,
  fc: number,
): number {
  const xi = (a - b) / (c - b);
  const phi = (fa - fb) / (fc - fb);
  const isSafe = phi * phi < xi && (1 - phi) * (1 - phi) < 1 - xi;
  if (!isSafe) return NaN;
  return (
    (fa / (fb - fa)) * (fc / (fb - fc)) + ((c - a) / (b - a)) * (fa / (fc - fa)) * (fb / (fc - fb))
  );
}
