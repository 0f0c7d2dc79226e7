import { codeRange, type CodeFormat, type HandlingChoice } from './code-format.js';
import { exponentOfTwo, powerOfTwo } from './power-of-two.js';
import { formatQ, type QFormat } from './q-format.js';

/**
 * The codes of a Q-format: step 2^-n, origin 0, the whole word. Rounds half to even and saturates
 * unless told otherwise.
 */
export function qCodes(q: QFormat, handling: HandlingChoice = {}): CodeFormat {
  return {
    bits: q.bits,
    signed: q.signed,
    step: powerOfTwo(-q.fractionBits),
    origin: 0,
    ...codeRange(q.bits, q.signed),
    rounding: handling.rounding ?? 'half-even',
    overflow: handling.overflow ?? 'saturate',
    label: formatQ(q),
  };
}

/** The Q-format that codes belong to: origin 0, step 1 or a negative power of two. */
export function qFormatOf(format: CodeFormat): QFormat | undefined {
  if (format.origin !== 0) return undefined;
  const exponent = exponentOfTwo(format.step);
  if (exponent === undefined || exponent > 0) return undefined;
  // Subtracting from 0 keeps -0 out.
  return { bits: format.bits, signed: format.signed, fractionBits: 0 - exponent };
}
