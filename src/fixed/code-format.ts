import { argumentFault } from '../fault.js';
import { powerOfTwo } from './power-of-two.js';
import { ROUNDINGS, type Rounding } from './rounding.js';

/** What happens to a value that no code can express. */
export const OVERFLOWS = ['saturate', 'refuse'] as const;
export type Overflow = (typeof OVERFLOWS)[number];

/** The choices that are free once the codes themselves are fixed. */
interface CodeHandling {
  readonly rounding: Rounding;
  /** `saturate`: the nearest code, counted. `refuse`: a Fault. */
  readonly overflow: Overflow;
}

/** A choice of handling; what is left out takes the usual value of the kind of codes. */
export interface HandlingChoice {
  readonly rounding?: Rounding | undefined;
  readonly overflow?: Overflow | undefined;
}

/**
 * What an integer in a file means: value = origin + code * step. Q-formats, ADC and DAC codes and
 * decimal steps are all of this shape. The unit is the owner's: a format works on whatever number
 * it is given (SI units throughout, except temperatures, which are coded in degrees Celsius).
 */
export interface CodeFormat extends CodeHandling {
  /** Width of a code, 1 to 32. */
  readonly bits: number;
  /** Two's complement if true. */
  readonly signed: boolean;
  /** Physical value of one code, 1e-30 to 1e30. */
  readonly step: number;
  /** Physical value of code 0; at most 2^44 steps from zero. */
  readonly origin: number;
  /** Lowest and highest code in use; both within the word. */
  readonly minCode: number;
  readonly maxCode: number;
  /** For people, plain ASCII: `UQ8.8`, `ADC12 0..36.3 V`. */
  readonly label: string;
}

export interface CodeRange {
  readonly minCode: number;
  readonly maxCode: number;
}

/** All codes of a word: 0 to 2^bits - 1, or -2^(bits - 1) to 2^(bits - 1) - 1 if signed. */
export function codeRange(bits: number, signed: boolean): CodeRange {
  const half = powerOfTwo(bits - 1);
  return signed
    ? { minCode: -half, maxCode: half - 1 }
    : { minCode: 0, maxCode: powerOfTwo(bits) - 1 };
}

/** The narrowest C integer, 8, 16 or 32 bits, that holds `bits` bits (1 to 32). */
export function storageBits(bits: number): 8 | 16 | 32 {
  if (bits <= 8) return 8;
  return bits <= 16 ? 16 : 32;
}

/**
 * Gives the format back if it can be used.
 * @throws Fault ARGUMENT naming the first field that is out of range.
 */
export function checkedCodeFormat(format: CodeFormat): CodeFormat {
  const { bits, signed, step, origin, minCode, maxCode, rounding, overflow } = format;
  checkBits(bits);
  const word = codeRange(bits, signed);
  if (!(step >= SMALLEST_STEP && step <= LARGEST_STEP)) {
    throw argumentFault('step', `from ${SMALLEST_STEP} to ${LARGEST_STEP}`, step);
  }
  if (!(Math.abs(origin) <= FURTHEST_ORIGIN * step)) {
    throw argumentFault('origin', `within ${FURTHEST_ORIGIN} steps of zero`, origin);
  }
  if (!(Number.isInteger(maxCode) && maxCode >= word.minCode && maxCode <= word.maxCode)) {
    throw argumentFault(
      'maxCode',
      `a whole number from ${word.minCode} to ${word.maxCode}`,
      maxCode,
    );
  }
  if (!(Number.isInteger(minCode) && minCode >= word.minCode && minCode <= maxCode)) {
    throw argumentFault('minCode', `a whole number from ${word.minCode} to ${maxCode}`, minCode);
  }
  if (!ROUNDINGS.includes(rounding)) {
    throw argumentFault('rounding', `one of ${ROUNDINGS.join(', ')}`, rounding);
  }
  if (!OVERFLOWS.includes(overflow)) {
    throw argumentFault('overflow', `one of ${OVERFLOWS.join(', ')}`, overflow);
  }
  return format;
}

/** @throws Fault ARGUMENT if `bits` is not a whole number from 1 to 32. */
export function checkBits(bits: number): void {
  if (!(Number.isInteger(bits) && bits >= 1 && bits <= 32)) {
    throw argumentFault('bits', 'a whole number from 1 to 32', bits);
  }
}

// Wide enough for anything a converter measures, and no intermediate product overflows or loses
// bits to underflow.
const SMALLEST_STEP = 1e-30;
const LARGEST_STEP = 1e30;

// A double then resolves every value of the format to 1/256 of a step or better, so that
// neighbouring codes can never be mistaken for each other.
const FURTHEST_ORIGIN = powerOfTwo(44);
