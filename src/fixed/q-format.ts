import { Fault } from '../fault.js';
import { storageBits } from './code-format.js';

/** A binary fixed-point format: value = code / 2^fractionBits, two's complement if signed. */
export interface QFormat {
  /** Width of the word, sign included: 1 to 32. */
  readonly bits: number;
  readonly signed: boolean;
  /** 0 to 63. More than the width is fine: UQ-4.20 is 16 bits wide and ends at 1/16. */
  readonly fractionBits: number;
}

/**
 * Reads the name of a Q-format: `UQ8.8`, `Q3.12`, `Q15`, `Q15/32`. Case does not matter.
 *
 * UQm.n is unsigned and m + n bits wide. Signed names follow one of two conventions: m excludes
 * the sign (m + n + 1 bits) or counts it (m + n bits). A width, given as `bits` or by a
 * suffix as in `Q4.12/17`, tells which. Without one, a name whose m + n is 8, 16 or 32 counts the
 * sign (Q4.12 is 16 bits wide, Q16.16 is 32), and every other name excludes it (Q3.12, 16 bits).
 * m may be negative.
 *
 * Qn and UQn give the fraction bits alone; without a width they take the narrowest of 8, 16 and
 * 32 bits that holds these and the sign: Q7, Q15, Q31, UQ8, UQ16.
 *
 * @param bits Width of the word if it is known from elsewhere.
 * @throws Fault FORMAT if the text is no such name, contradicts the width, or needs a word outside
 * 1 to 32 bits.
 */
export function parseQ(text: string, bits?: number): QFormat {
  const name = readName(text);
  if (bits !== undefined && name.width !== undefined && bits !== name.width) {
    throw formatFault(`${text} says ${name.width} bits, expected ${bits}`);
  }
  const width = name.width ?? bits;
  const q = {
    bits: width ?? impliedWidth(name),
    signed: name.signed,
    fractionBits: name.fractionBits,
  };
  if (!(Number.isInteger(q.bits) && q.bits >= 1 && q.bits <= 32)) {
    const hint = width === undefined ? narrower(name) : undefined;
    throw formatFault(`${text} is ${q.bits} bits wide, expected 1 to 32`, hint);
  }
  if (q.fractionBits > MOST_FRACTION_BITS) {
    throw formatFault(`${text} has more than ${MOST_FRACTION_BITS} fraction bits`);
  }
  if (width !== undefined && !fills(name, width)) {
    throw formatFault(`${text} does not fill ${width} bits`, sameFractionBits(q));
  }
  return q;
}

/**
 * The one name used in output: m excludes the sign. Signed words of 9 and 17 bits carry their
 * width (`Q4.12/17`), because the bare name means one bit less. parseQ(formatQ(q)) equals q.
 */
export function formatQ(q: QFormat): string {
  const name = { signed: q.signed, integerBits: integerBitsOf(q), fractionBits: q.fractionBits };
  const suffix = impliedWidth(name) === q.bits ? '' : `/${q.bits}`;
  return `${q.signed ? 'Q' : 'UQ'}${name.integerBits}.${q.fractionBits}${suffix}`;
}

/** Bits left of the binary point, the sign not counted; negative for small fractions. */
export function integerBitsOf(q: QFormat): number {
  return q.bits - q.fractionBits - (q.signed ? 1 : 0);
}

// Shifts by the fraction bits then fit 64-bit arithmetic in C.
const MOST_FRACTION_BITS = 63;

/** What a text says before the conventions are settled. */
interface QName {
  readonly signed: boolean;
  /** Absent from Qn. */
  readonly integerBits: number | undefined;
  readonly fractionBits: number;
  readonly width?: number | undefined;
}

function readName(text: string): QName {
  const match = /^(u?)q(?:(-?\d{1,3})\.)?(\d{1,3})(?:\/(\d{1,3}))?$/i.exec(text.trim());
  if (match === null) throw unreadable(text);
  const [, unsigned, integerBits, fractionBits, width] = match;
  return {
    signed: unsigned === '',
    integerBits: integerBits === undefined ? undefined : Number(integerBits),
    fractionBits: Number(fractionBits),
    width: width === undefined ? undefined : Number(width),
  };
}

function impliedWidth({ signed, integerBits, fractionBits }: QName): number {
  const sign = signed ? 1 : 0;
  if (integerBits === undefined) {
    const needed = fractionBits + sign;
    return needed <= 32 ? storageBits(needed) : needed;
  }
  const sum = integerBits + fractionBits;
  return signed && (sum === 8 || sum === 16 || sum === 32) ? sum : sum + sign;
}

function fills({ signed, integerBits, fractionBits }: QName, width: number): boolean {
  if (integerBits === undefined) return true;
  const sum = integerBits + fractionBits;
  return signed ? sum === width || sum + 1 === width : sum === width;
}

function unreadable(whole: string): Fault {
  const text = whole.slice(0, 40);
  const [, unsigned, integerBits, fractionBits] =
    /^(u?).*?(\d{1,2})\D+(\d{1,2})$/i.exec(text) ?? [];
  const guess = `${unsigned === '' ? 'Q' : 'UQ'}${integerBits ?? ''}.${fractionBits ?? ''}`;
  const forms = 'expected UQm.n, Qm.n, UQn or Qn';
  const examples = 'Examples: UQ8.8 (unsigned), Q3.12 (signed), Q15 (fraction bits only).';
  return formatFault(
    `"${text}" is not the name of a Q-format, ${forms}`,
    integerBits === undefined ? examples : `Did you mean ${guess}? ${examples}`,
  );
}

// Range matters more than resolution: the nearest legal name keeps the integer bits.
function narrower({ signed, integerBits, fractionBits }: QName): string {
  if (integerBits === undefined) return `Name the width too, as in Q${fractionBits}/32.`;
  const room = 32 - (signed ? 1 : 0) - integerBits;
  if (room < 0 || room >= fractionBits) return 'Add up the bits: m + n, and 1 for the sign.';
  return `Did you mean ${formatQ({ bits: 32, signed, fractionBits: room })}?`;
}

function sameFractionBits(q: QFormat): string {
  return `${formatQ(q)} is the ${q.bits}-bit name with ${q.fractionBits} fraction bits.`;
}

function formatFault(what: string, hint?: string): Fault {
  const problem = { code: 'FORMAT', message: `${what}.` };
  return new Fault('input', hint === undefined ? problem : { ...problem, hint });
}
