import type { Seconds } from '../quantities.js';
import type { Piece } from './piece.js';
import type { Mark, WritableConditions } from './weather.js';

/** A first pass, then `times - 1` further passes that are all alike; nothing is expanded. */
export class Repetition implements Piece {
  readonly duration: Seconds;
  readonly marked: boolean;
  readonly #first: Piece;
  readonly #later: Piece;
  readonly #times: number;

  /**
   * @param later Takes some time.
   * @param times Whole, 1 or more.
   */
  constructor(first: Piece, later: Piece, times: number) {
    this.duration = first.duration + (times - 1) * later.duration;
    this.marked = first.marked;
    this.#first = first;
    this.#later = later;
    this.#times = times;
  }

  write(time: Seconds, slack: Seconds, into: WritableConditions): void {
    if (this.#times === 1 || time + slack < this.#first.duration) {
      this.#first.write(time, slack, into);
      return;
    }
    const since = time - this.#first.duration;
    const period = this.#later.duration;
    // The slack is many times the rounding of this quotient: a seam that the time has met is never
    // missed, and a pass begun too early by that rounding shows its start.
    const whole = Math.max(0, Math.floor((since + slack) / period));
    const passed = Math.min(whole, this.#times - 2);
    this.#later.write(Math.max(0, since - passed * period), slack, into);
  }

  *marks(origin: Seconds, path: readonly string[]): Iterable<Mark> {
    yield* this.#first.marks(origin, [...path, 'pass 1']);
    const start = origin + this.#first.duration;
    for (let passed = 0; passed < this.#times - 1; passed++) {
      yield* this.#later.marks(start + passed * this.#later.duration, [
        ...path,
        `pass ${passed + 2}`,
      ]);
    }
  }
}
