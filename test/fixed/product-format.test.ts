import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { codeRange, type CodeFormat } from '../../src/fixed/code-format.js';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { productFormat, productRange } from '../../src/fixed/product-format.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { problemOf } from './faults.js';

const SEED = 85;

const q = (text: string): CodeFormat => qCodes(parseQ(text));
const adc = (bits: number): CodeFormat =>
  converterCodes('ADC', { bits, reference: 3.3, gain: 1 }, 'V');

describe('productFormat', () => {
  test.each([
    ['UQ8.8', 'UQ4.12', 'UQ12.20'],
    ['Q0.15', 'Q0.15', 'Q1.30'],
    ['Q3.12', 'UQ8.8', 'Q11.20'],
    ['Q3.4', 'Q3.4', 'Q7.8'],
    ['UQ0.16', 'UQ0.16', 'UQ0.32'],
  ])('of %s and %s is %s', (a, b, product) => {
    expect(productFormat(q(a), q(b))).toEqual(q(product));
    expect(productFormat(q(b), q(a))).toEqual(q(product));
  });

  test('of millivolts and milliamperes counts microwatts', () => {
    const thousandths = decimalCodes({ step: 0.001, bits: 16, signed: false }, 'V');
    const milliamperes = decimalCodes({ step: 0.001, bits: 16, signed: true }, 'A');
    const product = productFormat(thousandths, milliamperes);
    expect(product).toMatchObject({ bits: 32, signed: true, step: 1e-6, origin: 0 });
    expect(product.label).toBe('uint16 of 0.001 V x int16 of 0.001 A');
  });

  test('multiplies decimal steps as decimals', () => {
    const tenths = decimalCodes({ step: 0.1, bits: 16, signed: false }, 'V');
    expect(productFormat(tenths, tenths).step).toBe(0.01);
  });

  test('keeps the handling of the first factor', () => {
    const first = qCodes(parseQ('UQ8.8'), { rounding: 'floor', overflow: 'refuse' });
    expect(productFormat(first, q('UQ4.12'))).toMatchObject({
      rounding: 'floor',
      overflow: 'refuse',
    });
  });

  test('holds every product of two codes: its code is the product, its value that of the values', () => {
    const width = fc.integer({ min: 1, max: 16 });
    const factor = fc
      .record({ bits: width, signed: fc.boolean(), fractionBits: fc.integer({ min: 0, max: 20 }) })
      .map((format) => qCodes(format))
      .chain((format) =>
        fc.tuple(fc.constant(format), fc.integer({ min: format.minCode, max: format.maxCode })),
      );
    fc.assert(
      fc.property(factor, factor, ([a, x], [b, y]) => {
        const product = new Quantizer(productFormat(a, b));
        const value = new Quantizer(a).decode(x) * new Quantizer(b).decode(y);
        expect(product.decode(x * y + 0)).toBe(value + 0);
        expect(product.encode(value)).toBe(x * y + 0);
        expect(product.saturatedLow + product.saturatedHigh).toBe(0);
        const { minCode, maxCode } = productRange(a, b);
        expect(x * y).toBeGreaterThanOrEqual(minCode);
        expect(x * y).toBeLessThanOrEqual(maxCode);
      }),
      { seed: SEED, numRuns: 3000 },
    );
  });

  test('refuses products of more than 32 bits and tells how far to shift', () => {
    expect(problemOf(() => productFormat(q('UQ16.16'), q('UQ8.8')))).toEqual({
      code: 'PRODUCT_WIDTH',
      message: 'the product of UQ16.16 and UQ8.8 needs 48 bits, expected at most 32.',
      hint: 'Shift the factors right by 16 bits in all before multiplying.',
    });
  });

  test('refuses a factor whose code 0 does not mean 0', () => {
    const biased = converterCodes(
      'ADC',
      { bits: 12, reference: 3.3, gain: 0.1, offset: 1.65 },
      'A',
    );
    const problem = problemOf(() => productFormat(q('UQ8.8'), biased));
    expect(problem.code).toBe('PRODUCT_ORIGIN');
    expect(problem.message).toContain('ADC12 -16.5..16.5 A');
    expect(problem.message).toContain('found -16.5');
  });
});

describe('productRange', () => {
  const fits = (
    { minCode, maxCode }: ReturnType<typeof productRange>,
    bits: number,
    signed: boolean,
  ) => {
    const word = codeRange(bits, signed);
    return minCode >= word.minCode && maxCode <= word.maxCode;
  };

  test('of two 12-bit codes ends at 4095^2 = 16769025 and needs 24 bits', () => {
    const range = productRange(adc(12), adc(12));
    expect(range).toEqual({ minCode: 0, maxCode: 16769025 });
    expect(fits(range, 24, false)).toBe(true);
    expect(fits(range, 23, false)).toBe(false);
    expect(productFormat(adc(12), adc(12)).bits).toBe(24);
  });

  test('of two 16-bit codes ends at 65535^2 = 4294836225: unsigned 32 bits only', () => {
    const range = productRange(q('UQ8.8'), q('UQ4.12'));
    expect(range).toEqual({ minCode: 0, maxCode: 4294836225 });
    expect(fits(range, 32, false)).toBe(true);
    expect(fits(range, 32, true)).toBe(false);
  });

  // C99 6.5p5: signed overflow is undefined; these are the last squares before it.
  test.each([
    [32, 46340],
    [16, 181],
  ])('fits a signed %d-bit product for codes up to %d and no further', (bits, largest) => {
    const upTo = (maxCode: number): CodeFormat => ({ ...q('UQ16.0'), maxCode });
    expect(fits(productRange(upTo(largest), upTo(largest)), bits, true)).toBe(true);
    expect(fits(productRange(upTo(largest + 1), upTo(largest + 1)), bits, true)).toBe(false);
    expect(181 * 181).toBe(32761);
  });

  test('of two Q15 codes reaches 2^30, by the square of -1', () => {
    expect(productRange(q('Q15'), q('Q15'))).toEqual({ minCode: -32768 * 32767, maxCode: 2 ** 30 });
  });

  test('of a signed and an unsigned 16-bit code fits 32 signed bits', () => {
    const range = productRange(q('Q15'), q('UQ16'));
    expect(range).toEqual({ minCode: -32768 * 65535, maxCode: 32767 * 65535 });
    expect(fits(range, 32, true)).toBe(true);
  });
});
