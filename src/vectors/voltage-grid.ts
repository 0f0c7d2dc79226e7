import { Fault } from '../fault.js';
import type { Quantizer } from '../fixed/quantizer.js';
import type { Volts } from '../quantities.js';
import type { Peak } from '../source/curve.js';

/**
 * The voltage codes of the points of one curve, as even as the code grid allows: the first is the
 * lowest code at or above 0 V, the last the highest code not above the open-circuit voltage, and
 * they rise strictly. For each peak the inner point nearest to it moves onto the code nearest to
 * its voltage, so that a look-up finds the peak where it is.
 *
 * If the format ends below the open-circuit voltage, the table ends where the format ends. Takes
 * memory for the peaks alone, however many points there are.
 */
export class VoltageGrid {
  readonly #first: number;
  readonly #span: number;
  readonly #steps: number;
  readonly #moved = new Map<number, number>();

  /**
   * @param count Number of points, at least 2.
   * @throws Fault `TOO_FEW_CODES` if that many different codes do not exist in the range.
   */
  constructor(
    openCircuitVoltage: Volts,
    count: number,
    quantizer: Quantizer,
    peaks: readonly Peak[] = [],
  ) {
    this.#first = lowestCodeFrom(0, quantizer);
    this.#span = highestCodeTo(openCircuitVoltage, quantizer) - this.#first;
    this.#steps = count - 1;
    if (this.#span < count - 1) {
      throw new Fault('input', {
        code: 'TOO_FEW_CODES',
        message:
          `${count} points need ${count} different voltage codes, but ${quantizer.format.label} ` +
          `has ${Math.max(this.#span + 1, 0)} from 0 V to Voc ` +
          `(${openCircuitVoltage.toPrecision(4)} V).`,
        hint: 'Ask for fewer points, or give the voltage a finer format.',
      });
    }
    for (const { voltage } of peaks) this.#moveNearest(voltage, quantizer);
  }

  /** The code of point `index`, from 0 to count - 1. */
  code(index: number): number {
    return this.#moved.get(index) ?? this.#even(index);
  }

  #even(index: number): number {
    return this.#first + Math.floor((this.#span * index) / this.#steps + 0.5);
  }

  // The ends stay, a point moves once, and none moves past its neighbours.
  #moveNearest(voltage: Volts, quantizer: Quantizer): void {
    if (voltage < quantizer.lowest || voltage > quantizer.highest) return;
    const code = quantizer.encode(voltage);
    const share = ((code - this.#first) * this.#steps) / this.#span;
    const index = Math.min(Math.max(Math.floor(share + 0.5), 1), this.#steps - 1);
    if (this.#steps < 2 || this.#moved.has(index)) return;
    if (code > this.code(index - 1) && code < this.code(index + 1)) this.#moved.set(index, code);
  }
}

// Division may be off by one code in the last bit; decoding is what counts, so it decides.
function lowestCodeFrom(voltage: Volts, quantizer: Quantizer): number {
  const { origin, step, minCode, maxCode } = quantizer.format;
  let code = Math.ceil((voltage - origin) / step);
  if (quantizer.decode(code) < voltage) code++;
  else if (quantizer.decode(code - 1) >= voltage) code--;
  return Math.min(Math.max(code, minCode), maxCode) + 0;
}

function highestCodeTo(voltage: Volts, quantizer: Quantizer): number {
  const { origin, step, minCode, maxCode } = quantizer.format;
  let code = Math.floor((voltage - origin) / step);
  if (quantizer.decode(code) > voltage) code--;
  else if (quantizer.decode(code + 1) <= voltage) code++;
  return Math.min(Math.max(code, minCode), maxCode) + 0;
}
