import { describe, expect, test } from 'vitest';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { problemOf } from './faults.js';

describe('decimalCodes', () => {
  test('counts whole steps from zero', () => {
    expect(decimalCodes({ step: 0.001, bits: 16, signed: false }, 'V')).toEqual({
      bits: 16,
      signed: false,
      step: 0.001,
      origin: 0,
      minCode: 0,
      maxCode: 65535,
      rounding: 'half-even',
      overflow: 'saturate',
      label: 'uint16 of 0.001 V',
    });
  });

  test.each([
    [0.001, 16, false, 37.482, 37482],
    [0.1, 16, false, 199.84, 1998],
    [0.001, 32, false, 4294967.295, 4294967295],
    [0.01, 16, true, -12.34, -1234],
  ])('in steps of %d, %d bits, signed %s, %d is %d', (step, bits, signed, value, code) => {
    expect(new Quantizer(decimalCodes({ step, bits, signed }, 'V')).encode(value)).toBe(code);
  });

  test('starts at the origin where one is given', () => {
    const format = decimalCodes({ step: 0.5, bits: 8, signed: false, origin: -40 }, 'degC');
    const quantizer = new Quantizer(format);
    expect(format.label).toBe('uint8 of 0.5 degC from -40 degC');
    expect([quantizer.lowest, quantizer.highest]).toEqual([-40, 87.5]);
    expect(quantizer.encode(25)).toBe(130);
  });

  test('takes the handling it is given', () => {
    const scaling = {
      step: 1,
      bits: 8,
      signed: true,
      rounding: 'floor',
      overflow: 'refuse',
    } as const;
    expect(decimalCodes(scaling, 'W')).toMatchObject({ rounding: 'floor', overflow: 'refuse' });
  });

  test.each([
    ['bits', { step: 1, bits: 40, signed: false }],
    ['step', { step: 0, bits: 8, signed: false }],
    ['origin', { step: 1, bits: 8, signed: false, origin: NaN }],
  ])('refuses %s out of range', (field, scaling) => {
    expect(problemOf(() => decimalCodes(scaling, 'V'))).toMatchObject({ code: 'ARGUMENT', field });
  });
});
