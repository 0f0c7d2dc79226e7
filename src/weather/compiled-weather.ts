import { argumentFault } from '../fault.js';
import type { Seconds } from '../quantities.js';
import type { Piece } from './piece.js';
import { TIME_SLACK } from './time-slack.js';
import type { Mark, Weather, WritableConditions } from './weather.js';

/** A piece as a weather: times are clamped, arguments checked. */
export class CompiledWeather implements Weather {
  readonly name: string;
  readonly duration: Seconds;
  readonly groups: number;
  readonly #piece: Piece;

  constructor(name: string, groups: number, piece: Piece) {
    this.name = name;
    this.duration = piece.duration;
    this.groups = groups;
    this.#piece = piece;
  }

  conditionsAt(time: Seconds, into: WritableConditions): void {
    if (Number.isNaN(time)) throw argumentFault('time', 'a number', time);
    const { irradiance, cellTemperature } = into;
    if (irradiance.length !== this.groups || cellTemperature.length !== this.groups) {
      const lengths = `${irradiance.length} and ${cellTemperature.length}`;
      throw argumentFault('into', `two arrays of length ${this.groups}`, lengths);
    }
    const inside = Math.min(Math.max(0, time), this.duration);
    this.#piece.write(inside, inside * TIME_SLACK, into);
  }

  marks(): Iterable<Mark> {
    return this.#piece.marks(0, []);
  }
}
