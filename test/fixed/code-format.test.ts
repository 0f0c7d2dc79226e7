import { describe, expect, test } from 'vitest';
import { checkedCodeFormat, codeRange, storageBits } from '../../src/fixed/code-format.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { problemOf } from './faults.js';

const INT16 = qCodes(parseQ('Q15'));

describe('codeRange', () => {
  // Limits of the types of C99 <stdint.h>.
  test.each([
    [8, false, 0, 255],
    [8, true, -128, 127],
    [16, false, 0, 65535],
    [16, true, -32768, 32767],
    [32, false, 0, 4294967295],
    [32, true, -2147483648, 2147483647],
    [12, false, 0, 4095],
    [1, false, 0, 1],
  ])('of %d bits, signed %s, is %d to %d', (bits, signed, minCode, maxCode) => {
    expect(codeRange(bits, signed)).toEqual({ minCode, maxCode });
  });
});

describe('storageBits', () => {
  test('is the narrowest of 8, 16 and 32 that holds the code', () => {
    expect([1, 8, 9, 12, 16, 17, 24, 32].map(storageBits)).toEqual([8, 8, 16, 16, 16, 32, 32, 32]);
  });
});

describe('checkedCodeFormat', () => {
  test('gives a good format back unchanged', () => {
    expect(checkedCodeFormat(INT16)).toBe(INT16);
  });

  test.each([
    ['bits', { bits: 0 }],
    ['bits', { bits: 33 }],
    ['bits', { bits: 12.5 }],
    ['step', { step: 0 }],
    ['step', { step: -1 }],
    ['step', { step: NaN }],
    ['step', { step: 1e31 }],
    ['step', { step: 1e-31 }],
    ['origin', { origin: Infinity }],
    ['origin', { origin: NaN }],
    ['origin', { origin: 1e15 }],
    ['minCode', { minCode: -32769 }],
    ['minCode', { minCode: 0.5 }],
    ['minCode', { minCode: 10, maxCode: 9 }],
    ['maxCode', { maxCode: 32768 }],
    ['maxCode', { minCode: -32768, maxCode: -32769 }],
    ['maxCode', { maxCode: NaN }],
    ['rounding', { rounding: 'up' as 'floor' }],
    ['overflow', { overflow: 'wrap' as 'refuse' }],
  ])('refuses a format whose %s is out of range: %o', (field, change) => {
    const problem = problemOf(() => checkedCodeFormat({ ...INT16, ...change }));
    expect(problem).toMatchObject({ code: 'ARGUMENT', field });
  });
});
