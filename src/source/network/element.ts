import type { Amperes } from '../../quantities.js';
import type { Enclosure } from './enclosure.js';
import type { Falling } from './inverse.js';

/** A piece of a string, between two terminals: its voltage never rises with current. */
export interface Element extends Falling {
  /** The current at which V(I) has a kink: its slope jumps towards zero as the current rises. */
  readonly kink: Amperes | undefined;
  /** Whether V(I) is concave on either side of the kink. */
  readonly concave: boolean;
  /**
   * Adds the range of -dV/dI over the currents from `low` to `high`, which lie on one side of the
   * kink. Where V(I) is concave the range is exact: that of the slopes at the ends.
   */
  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void;
}
