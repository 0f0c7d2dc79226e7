import { Fault } from '../fault.js';
import { checkedCodeFormat, type CodeFormat } from './code-format.js';
import { roomierFormat } from './roomier-format.js';
import { roundTo, type Rounding } from './rounding.js';
import { stepRatio } from './step-ratio.js';

/**
 * Turns physical values into the codes of one format and back, and counts what did not fit.
 *
 * For every value between `lowest` and `highest`, decode(encode(value)) is within `errorBound` of
 * the value. The bound is exact for Q-formats; for other steps double arithmetic adds at most
 * 2^-50 of the largest of |value|, |origin| and |value - origin|. encode(decode(code)) is the code,
 * for every code and mode, and encode never falls as the value rises.
 *
 * @throws Fault ARGUMENT if the format is unusable.
 */
export class Quantizer {
  readonly format: CodeFormat;
  /** Half a step when rounding to the nearest, one step (never reached) otherwise. */
  readonly errorBound: number;
  /** Physical values of the lowest and the highest code. */
  readonly lowest: number;
  readonly highest: number;
  /** Values below the lowest and above the highest code so far. The owner may set them to 0. */
  saturatedLow = 0;
  saturatedHigh = 0;

  readonly #origin: number;
  readonly #numerator: number;
  readonly #denominator: number;
  readonly #minCode: number;
  readonly #maxCode: number;
  readonly #rounding: Rounding;
  readonly #nearest: boolean;

  constructor(format: CodeFormat) {
    this.format = checkedCodeFormat(format);
    const { step, origin, minCode, maxCode, rounding } = format;
    const { numerator, denominator } = stepRatio(step, Math.max(-minCode, maxCode));
    this.#origin = origin;
    this.#numerator = numerator;
    this.#denominator = denominator;
    this.#minCode = minCode;
    this.#maxCode = maxCode;
    this.#rounding = rounding;
    this.#nearest = rounding === 'half-even' || rounding === 'half-up';
    this.errorBound = this.#nearest ? step / 2 : step;
    this.lowest = this.decode(minCode);
    this.highest = this.decode(maxCode);
  }

  /**
   * The code of a value: an integer from minCode to maxCode, never -0. Infinities saturate.
   * `toward-zero` means towards code 0, as C does it, wherever the origin lies.
   * @throws Fault NOT_A_NUMBER for NaN; VALUE_OUT_OF_RANGE if the format refuses overflow.
   */
  encode(value: number): number {
    const position = ((value - this.#origin) * this.#denominator) / this.#numerator;
    const code = this.#nearest ? roundTo(position, this.#rounding) : this.#cut(value, position);
    if (code >= this.#minCode && code <= this.#maxCode) return code;
    return this.#outside(value, code);
  }

  /** The physical value of a code. Linear for every number: the range is not checked. */
  decode(code: number): number {
    return this.#origin + (code * this.#numerator) / this.#denominator;
  }

  // Cutting the position itself would drop a whole code where division left it 1e-13 short of an
  // integer, and a value of -5e-324 has position 0. Comparing values cannot go wrong that way.
  #cut(value: number, position: number): number {
    const nearest = Math.round(position) + 0;
    if (this.#rounding === 'floor' || value >= this.#origin) {
      return this.decode(nearest) <= value ? nearest : nearest - 1;
    }
    return this.decode(nearest) >= value ? nearest : nearest + 1;
  }

  #outside(value: number, code: number): number {
    if (Number.isNaN(code) || this.format.overflow === 'refuse') throw this.#refusal(value);
    if (code < this.#minCode) {
      this.saturatedLow++;
      return this.#minCode;
    }
    this.saturatedHigh++;
    return this.#maxCode;
  }

  #refusal(value: number): Fault {
    const holds = `${this.format.label} holds ${this.lowest} to ${this.highest}`;
    if (Number.isNaN(value)) {
      return new Fault('input', {
        code: 'NOT_A_NUMBER',
        message: `NaN has no code, expected a number: ${holds}.`,
      });
    }
    return new Fault('input', {
      code: 'VALUE_OUT_OF_RANGE',
      message: `the value must fit its format: ${holds}, found ${value}.`,
      hint: roomierFormat(value, this.format),
    });
  }
}
