import { findRootWithSlope } from '../../numeric/root.js';
import type { Amperes, Ohms, Volts } from '../../quantities.js';

/** Something whose voltage falls as its current rises. */
export interface Falling {
  voltage(current: Amperes): Volts;
  /** -dV/dI. */
  resistance(current: Amperes): Ohms;
}

/**
 * The current at which the voltage falls through `voltage`, to 2^-50 of the larger end of the final
 * bracket. Starts from `low` and `high` and moves them outwards, doubling the step, where the
 * answer is not between them. ±Infinity where no current up to 10^300 A gives the voltage.
 * @param scale The first step outwards; above zero.
 */
export function currentAtVoltage(
  element: Falling,
  voltage: Volts,
  low: Amperes,
  high: Amperes,
  scale: Amperes,
): Amperes {
  let least = low;
  let most = high;
  for (let step = scale; element.voltage(most) > voltage; step *= 2) {
    if (!(most < BEYOND)) return Infinity;
    least = most;
    most += step;
  }
  for (let step = scale; element.voltage(least) < voltage; step *= 2) {
    if (!(least > -BEYOND)) return -Infinity;
    most = least;
    least -= step;
  }
  const result = findRootWithSlope(
    (current) => element.voltage(current) - voltage,
    (current) => -element.resistance(current),
    least,
    most,
    { tolerance: CLOSE * Math.max(Math.abs(least), Math.abs(most)) },
  );
  if (result.status === 'converged') return result.root;
  // Both ends on one side: rounding. The one nearer to the voltage is the answer.
  if (result.status !== 'no-sign-change') return NaN;
  const { valueAtLow, valueAtHigh } = result;
  return Math.abs(valueAtLow) <= Math.abs(valueAtHigh) ? least : most;
}

const BEYOND = 1e300;
/** 2^-50. */
const CLOSE = 8.881784197001252e-16;
