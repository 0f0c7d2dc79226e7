import { describe, expect, test } from 'vitest';
import { codeRange } from '../../src/fixed/code-format.js';
import { qCodes, qFormatOf } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';

describe('qCodes', () => {
  test('spans -2^m to 2^m - 2^-n in steps of 2^-n, m without the sign', () => {
    const { step, origin, minCode, maxCode } = qCodes(parseQ('Q3.12'));
    expect(origin).toBe(0);
    expect(step).toBe(2 ** -12);
    expect(minCode * step).toBe(-8);
    expect(maxCode * step).toBe(8 - 2 ** -12);
  });

  // 32767/32768, the value printed in manuals of signal processors.
  test('ends at 0.999969482421875 for Q15', () => {
    const { step, maxCode } = qCodes(parseQ('Q15'));
    expect(maxCode * step).toBe(0.999969482421875);
  });

  test('rounds half to even and saturates unless told otherwise', () => {
    const q = parseQ('UQ8.8');
    expect(qCodes(q)).toEqual({
      bits: 16,
      signed: false,
      step: 1 / 256,
      origin: 0,
      ...codeRange(16, false),
      rounding: 'half-even',
      overflow: 'saturate',
      label: 'UQ8.8',
    });
    expect(qCodes(q, { rounding: 'floor', overflow: 'refuse' })).toMatchObject({
      rounding: 'floor',
      overflow: 'refuse',
    });
  });
});

describe('qFormatOf', () => {
  test.each(['UQ8.8', 'Q15', 'Q7.0', 'Q4.12/17', 'UQ-4.20', 'Q-48.63'])(
    'knows %s again',
    (text) => {
      expect(qFormatOf(qCodes(parseQ(text)))).toEqual(parseQ(text));
    },
  );

  test('finds none where the step is no power of two, above 1, or the origin is not 0', () => {
    const format = qCodes(parseQ('UQ8.8'));
    expect(qFormatOf({ ...format, step: 0.001 })).toBeUndefined();
    expect(qFormatOf({ ...format, step: 2 })).toBeUndefined();
    expect(qFormatOf({ ...format, origin: 1 })).toBeUndefined();
  });
});
