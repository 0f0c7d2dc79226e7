import type { Seconds } from '../quantities.js';
import type { Level } from './level.js';
import type { Piece } from './piece.js';
import type { Mark, WritableConditions } from './weather.js';

/** A straight line between two conditions: a ramp; a hold if they are equal, a step if it takes no time. */
export class RampPiece implements Piece {
  readonly duration: Seconds;
  readonly marked = false;
  readonly #from: Level;
  readonly #to: Level;

  /** @param duration Finite, 0 or more. */
  constructor(from: Level, to: Level, duration: Seconds) {
    this.duration = duration;
    this.#from = from;
    this.#to = to;
  }

  write(time: Seconds, _slack: Seconds, into: WritableConditions): void {
    const part = time >= this.duration ? 1 : time / this.duration;
    const from = this.#from;
    const to = this.#to;
    for (let group = 0; group < from.irradiance.length; group++) {
      into.irradiance[group] = between(from.irradiance[group]!, to.irradiance[group]!, part);
      into.cellTemperature[group] = between(
        from.cellTemperature[group]!,
        to.cellTemperature[group]!,
        part,
      );
    }
  }

  marks(): Iterable<Mark> {
    return [];
  }
}

// Reckoned from the nearer end, so that both ends are exact and no rounding leaves the interval.
const between = (from: number, to: number, part: number): number =>
  part < 0.5 ? from + (to - from) * part : to - (to - from) * (1 - part);
