/** Conditions over time, as everything above this room sees them. */
import type { Seconds } from '../quantities.js';

export interface Weather {
  readonly name: string;
  readonly duration: Seconds;
  /** Groups of substrings lit alike: the length of both arrays of the conditions. */
  readonly groups: number;
  /**
   * Writes the conditions at `time`, which is clamped to [0, duration], into `into`. Creates no
   * object. Times may come in any order; the cost grows with the depth of nesting times the
   * logarithm of the entries per level, never with the passes of a repeat.
   *
   * Right-continuous: at a step the new value holds, and at the seam of two passes the start of
   * the new one. A boundary counts as reached from `TIME_SLACK * time` (2.8e-14 of the time)
   * before it, so that a sample time and a sum of durations that differ by rounding alone meet.
   *
   * Accuracy: the value at a time that is off by at most `TIME_SLACK * time`. A sample in the
   * k-th pass of a repeat so differs from the same sample of the second by at most that, times
   * the steepest slope: 1e-8 W/m² for 100 W/m²/s after an hour. Values at the ends of a ramp are
   * exact, those inside lie between the ends.
   * @param into Arrays of length `groups`.
   * @throws Fault `ARGUMENT` if `time` is NaN or an array has another length.
   */
  conditionsAt(time: Seconds, into: WritableConditions): void;
  /**
   * The named spans in order of their start, an outer one before those inside it. Lazy: a span
   * inside a repeat comes once for each pass, and there can be a thousand million of them, so take
   * what is needed and stop.
   */
  marks(): Iterable<Mark>;
}

/** A `Conditions` that a loop overwrites in place. */
export interface WritableConditions {
  /** W/m². */
  readonly irradiance: Float64Array;
  /** K. */
  readonly cellTemperature: Float64Array;
}

/** A named span of time: a sequence that was given a name, a row of a trapezoid table. */
export interface Mark {
  /**
   * Names from the outermost to this span's own, which is last. A span inside a repeat has
   * `pass 1`, `pass 2`, ... at that place.
   */
  readonly path: readonly string[];
  readonly start: Seconds;
  readonly end: Seconds;
}

/** Room for the conditions of `groups` groups; zero until written. */
export const writableConditions = (groups: number): WritableConditions => ({
  irradiance: new Float64Array(groups),
  cellTemperature: new Float64Array(groups),
});
