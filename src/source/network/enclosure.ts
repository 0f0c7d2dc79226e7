import type { Volts } from '../../quantities.js';
import type { Curve } from '../curve.js';

/** A range that is known to hold every value of something over an interval. Adds up in place. */
export interface Enclosure {
  least: number;
  most: number;
}

/** A curve that can say within what limits its slope stays. */
export interface EnclosedCurve extends Curve {
  /** Voltages between 0 and open circuit at which the curve has a kink; they rise. */
  readonly kinks: readonly Volts[];
  /** Whether I(V) is concave between one kink and the next. */
  readonly concave: boolean;
  /**
   * Sets `into` to a range that holds dI/dV from `from` to `to`, between which there is no kink.
   * Where the curve is concave: exactly the slopes at the two ends, taken from inside.
   */
  encloseSlope(from: Volts, to: Volts, into: Enclosure): void;
}
