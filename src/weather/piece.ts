import type { Seconds } from '../quantities.js';
import type { Mark, WritableConditions } from './weather.js';

/**
 * What a block becomes when it is compiled: conditions over its own time, which starts at 0. Pieces
 * are immutable, know nothing of what stands around them, and are shared wherever the same blocks
 * start from the same conditions.
 */
export interface Piece {
  /** 0 for a piece that takes no time; such a piece shows its end at every time. */
  readonly duration: Seconds;
  /** Whether `marks` gives any, so that a repeat of unmarked blocks costs nothing. */
  readonly marked: boolean;
  /**
   * Writes the conditions at `time`, 0 or more. From `duration` on the end holds: rounding may
   * bring a time there that belongs just before.
   * @param slack A boundary inside counts as reached this much earlier.
   */
  write(time: Seconds, slack: Seconds, into: WritableConditions): void;
  /** The named spans inside, on a clock by which the piece starts at `origin`, under `path`. */
  marks(origin: Seconds, path: readonly string[]): Iterable<Mark>;
}
