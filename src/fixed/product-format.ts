import { Fault } from '../fault.js';
import { codeRange, type CodeFormat, type CodeRange } from './code-format.js';
import { intendedDecimal } from './intended-decimal.js';
import { qFormatOf } from './q-codes.js';
import { formatQ } from './q-format.js';

/**
 * The format of the integer product of two codes, as of voltage times current: UQ8.8 times UQ4.12
 * is UQ12.20. Steps multiply, widths add, and the product is signed if either factor is. It is
 * exact: no code of it is ever rounded or saturated by the multiplication. Rounding and overflow,
 * for encoding expected products, are those of the first factor.
 *
 * @throws Fault PRODUCT_WIDTH if it needs more than 32 bits, PRODUCT_ORIGIN if a factor has
 * an origin other than 0 (the product of such codes is not linear in the product of the values).
 */
export function productFormat(a: CodeFormat, b: CodeFormat): CodeFormat {
  for (const factor of [a, b]) {
    if (factor.origin !== 0) throw originFault(factor);
  }
  const bits = a.bits + b.bits;
  if (bits > 32) throw widthFault(a, b, bits);
  const signed = a.signed || b.signed;
  const step = intendedDecimal(a.step * b.step);
  const product = {
    bits,
    signed,
    step,
    origin: 0,
    ...codeRange(bits, signed),
    rounding: a.rounding,
    overflow: a.overflow,
    label: `${a.label} x ${b.label}`,
  };
  const q = qFormatOf(product);
  return q === undefined ? product : { ...product, label: formatQ(q) };
}

/**
 * The lowest and highest product that codes of the two formats can have, exactly, for widths of
 * up to 53 bits together. Tells which C type the multiplication needs: two unsigned 16-bit codes
 * reach 4294836225, which fits uint32_t but overflows int32_t.
 */
export function productRange(a: CodeFormat, b: CodeFormat): CodeRange {
  const corners = [a.minCode, a.maxCode].flatMap((x) => [x * b.minCode, x * b.maxCode]);
  return { minCode: Math.min(...corners) + 0, maxCode: Math.max(...corners) + 0 };
}

function originFault({ label, origin }: CodeFormat): Fault {
  return new Fault('input', {
    code: 'PRODUCT_ORIGIN',
    message: `codes of ${label} cannot be multiplied: code 0 must mean 0, found ${origin}.`,
    hint: 'Subtract the offset code first and multiply in a signed format with origin 0.',
  });
}

function widthFault(a: CodeFormat, b: CodeFormat, bits: number): Fault {
  return new Fault('input', {
    code: 'PRODUCT_WIDTH',
    message: `the product of ${a.label} and ${b.label} needs ${bits} bits, expected at most 32.`,
    hint: `Shift the factors right by ${bits - 32} bits in all before multiplying.`,
  });
}
