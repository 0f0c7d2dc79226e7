import type { Seconds } from '../quantities.js';
import type { Piece } from './piece.js';
import type { Mark, WritableConditions } from './weather.js';

/** Pieces one after the other. */
export class Chain implements Piece {
  readonly duration: Seconds;
  readonly marked: boolean;
  readonly #pieces: readonly Piece[];
  readonly #starts: Float64Array;

  /** @param pieces At least one. */
  constructor(pieces: readonly Piece[]) {
    const bounds = runningSums(pieces);
    this.duration = bounds[pieces.length]!;
    this.marked = pieces.some((piece) => piece.marked);
    this.#pieces = pieces;
    this.#starts = bounds.subarray(0, pieces.length);
  }

  write(time: Seconds, slack: Seconds, into: WritableConditions): void {
    const index = lastNotAbove(this.#starts, time + slack);
    this.#pieces[index]!.write(Math.max(0, time - this.#starts[index]!), slack, into);
  }

  *marks(origin: Seconds, path: readonly string[]): Iterable<Mark> {
    for (const [index, piece] of this.#pieces.entries()) {
      if (piece.marked) yield* piece.marks(origin + this.#starts[index]!, path);
    }
  }
}

// Neumaier 1974: the rounding of each sum is carried along, so that a bound is right to about one
// unit in the last place however many pieces come before it.
function runningSums(pieces: readonly Piece[]): Float64Array {
  const bounds = new Float64Array(pieces.length + 1);
  let sum = 0;
  let lost = 0;
  for (const [index, { duration }] of pieces.entries()) {
    const next = sum + duration;
    lost += sum >= duration ? sum - next + duration : duration - next + sum;
    sum = next;
    bounds[index + 1] = Math.max(bounds[index]!, sum + lost);
  }
  return bounds;
}

// Of starts that are equal the last is taken: what takes no time is passed over.
function lastNotAbove(starts: Float64Array, time: Seconds): number {
  let low = 0;
  let high = starts.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >>> 1;
    if (starts[middle]! <= time) low = middle;
    else high = middle - 1;
  }
  return low;
}
