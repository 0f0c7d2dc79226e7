import type { Seconds } from '../quantities.js';
import type { Piece } from './piece.js';
import type { Mark, WritableConditions } from './weather.js';

/** A piece with a name: the same conditions, and one mark more. */
export class Span implements Piece {
  readonly duration: Seconds;
  readonly marked = true;
  readonly #name: string;
  readonly #inner: Piece;

  constructor(name: string, inner: Piece) {
    this.duration = inner.duration;
    this.#name = name;
    this.#inner = inner;
  }

  write(time: Seconds, slack: Seconds, into: WritableConditions): void {
    this.#inner.write(time, slack, into);
  }

  *marks(origin: Seconds, path: readonly string[]): Iterable<Mark> {
    const own = [...path, this.#name];
    yield { path: own, start: origin, end: origin + this.duration };
    yield* this.#inner.marks(origin, own);
  }
}
