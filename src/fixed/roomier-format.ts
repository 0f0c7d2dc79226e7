import { codeRange, type CodeFormat } from './code-format.js';
import { powerOfTwo } from './power-of-two.js';
import { qFormatOf } from './q-codes.js';
import { formatQ, type QFormat } from './q-format.js';

/**
 * Advice, in one sentence, on the nearest format that holds a value the given one does not.
 * For Q-formats it is a name: the same width with fewer fraction bits, else 32 bits. For other
 * formats, the width that holds the value at the same step and the step that holds it at the
 * same width.
 */
export function roomierFormat(value: number, format: CodeFormat): string {
  if (!Number.isFinite(value)) return 'No format holds an infinity: look for a division by zero.';
  const q = qFormatOf(format);
  return q === undefined ? roomierLinear(value, format) : roomierQ(value, q);
}

function roomierQ(value: number, q: QFormat): string {
  const signed = q.signed || value < 0;
  for (const bits of q.bits === 32 ? [32] : [q.bits, 32]) {
    for (let fractionBits = q.fractionBits; fractionBits >= 0; fractionBits--) {
      const { minCode, maxCode } = codeRange(bits, signed);
      const position = value * powerOfTwo(fractionBits);
      if (position < minCode || position > maxCode) continue;
      return `The nearest format that holds it is ${formatQ({ bits, signed, fractionBits })}.`;
    }
  }
  return 'No Q-format of 32 bits holds it: check its unit.';
}

function roomierLinear(value: number, format: CodeFormat): string {
  const { step, origin, bits } = format;
  const code = (value - origin) / step;
  const signed = format.signed || code < 0;
  const kind = signed ? 'signed' : 'unsigned';
  const { minCode, maxCode } = codeRange(bits, signed);
  const coarser = Math.max(step, (value - origin) / (code < 0 ? minCode : maxCode));
  const sameWidth = `${bits} ${kind} bits with a step of ${ceilToThreeDigits(coarser)}`;
  for (let wider = bits; wider <= 32; wider++) {
    const range = codeRange(wider, signed);
    if (code < range.minCode || code > range.maxCode) continue;
    // A signed word of 1 bit has no code above 0 to be stretched.
    const or = wider === bits || !Number.isFinite(coarser) ? '' : `, or ${sameWidth}`;
    return `${wider} ${kind} bits hold it at this step${or}.`;
  }
  return `The nearest that holds it is ${sameWidth}.`;
}

// Three digits are enough for advice, but the last one must err on the side that holds the value.
function ceilToThreeDigits(x: number): number {
  const rounded = Number(x.toPrecision(3));
  return rounded >= x ? rounded : Number((x * 1.005).toPrecision(3));
}
