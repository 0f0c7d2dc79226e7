import { exp } from './exponential.js';

/**
 * All numbers from `low` to `high`. Results of operations enclose every result of the operation on
 * numbers of its arguments: ends are moved outward by at least the rounding of the operation. What
 * cannot be bounded (a quotient by an interval around zero) is the whole line.
 */
export class Interval {
  constructor(
    readonly low: number,
    readonly high: number,
  ) {}

  static point(x: number): Interval {
    return new Interval(x, x);
  }

  static around(centre: number, radius: number): Interval {
    return outward(centre - radius, centre + radius);
  }

  /** Larger of the sizes of the ends. */
  get magnitude(): number {
    return Math.max(Math.abs(this.low), Math.abs(this.high));
  }

  /** False where both signs occur, or zero. */
  get hasSign(): boolean {
    return this.low > 0 || this.high < 0;
  }

  plus(other: Interval): Interval {
    return outward(this.low + other.low, this.high + other.high);
  }

  minus(other: Interval): Interval {
    return outward(this.low - other.high, this.high - other.low);
  }

  times(other: Interval): Interval {
    const a = this.low * other.low;
    const b = this.low * other.high;
    const c = this.high * other.low;
    const d = this.high * other.high;
    return outward(Math.min(a, b, c, d), Math.max(a, b, c, d));
  }

  over(other: Interval): Interval {
    if (!other.hasSign) return WHOLE;
    const a = this.low / other.low;
    const b = this.low / other.high;
    const c = this.high / other.low;
    const d = this.high / other.high;
    return outward(Math.min(a, b, c, d), Math.max(a, b, c, d));
  }

  /** e to the power of each. `exp` errs by 0.52 ulp at most; `outward` allows for twice that. */
  exp(): Interval {
    return outward(exp(this.low), exp(this.high));
  }

  hull(other: Interval): Interval {
    return new Interval(Math.min(this.low, other.low), Math.max(this.high, other.high));
  }

  /** What is in both; they enclose the same thing, so they meet. */
  intersection(other: Interval): Interval {
    return new Interval(Math.max(this.low, other.low), Math.min(this.high, other.high));
  }

  includes(other: Interval): boolean {
    return this.low <= other.low && this.high >= other.high;
  }
}

const WHOLE = new Interval(-Infinity, Infinity);

/** 2^-52: of a normal number at least one unit in its last place. */
const ULP = 2.220446049250313e-16;
/** The least positive double, for numbers near zero. */
const TINY = 5e-324;

/** The ends of a rounded result moved outward. NaN, from 0 · Infinity and the like, is everything. */
function outward(low: number, high: number): Interval {
  const down = low - Math.abs(low) * ULP - TINY;
  const up = high + Math.abs(high) * ULP + TINY;
  return new Interval(down >= -Infinity ? down : -Infinity, up <= Infinity ? up : Infinity);
}
