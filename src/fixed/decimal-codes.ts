import {
  checkBits,
  checkedCodeFormat,
  codeRange,
  type CodeFormat,
  type HandlingChoice,
} from './code-format.js';

/** Whole multiples of a round step: millivolts, tenths of a watt, milliseconds. */
export interface DecimalScaling extends HandlingChoice {
  /** Value of one code, in the unit of the quantity. */
  readonly step: number;
  readonly bits: number;
  readonly signed: boolean;
  /** Value of code 0, in the unit of the quantity. Default 0. */
  readonly origin?: number | undefined;
}

/**
 * Codes that count decimal steps. Rounds half to even and saturates unless told otherwise.
 * @param unit For the label only, plain ASCII.
 * @throws Fault ARGUMENT naming the field that is out of range.
 */
export function decimalCodes(scaling: DecimalScaling, unit: string): CodeFormat {
  const { step, bits, signed, origin = 0, rounding, overflow } = scaling;
  checkBits(bits);
  const from = origin === 0 ? '' : ` from ${origin} ${unit}`;
  return checkedCodeFormat({
    bits,
    signed,
    step,
    origin,
    ...codeRange(bits, signed),
    rounding: rounding ?? 'half-even',
    overflow: overflow ?? 'saturate',
    label: `${signed ? 'int' : 'uint'}${bits} of ${step} ${unit}${from}`,
  });
}
