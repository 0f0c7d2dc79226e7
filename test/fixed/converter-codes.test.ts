import { describe, expect, test } from 'vitest';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { problemOf } from './faults.js';

describe('converterCodes', () => {
  // Arithmetic: 3.3 V over 2^N codes, in millivolts to the five decimals of the table.
  test.each([
    [10, 1024, '3.22266'],
    [12, 4096, '0.80566'],
    [14, 16384, '0.20142'],
    [16, 65536, '0.05035'],
  ])('gives %d bits %d codes; at 3.3 V one of them is %s mV', (bits, codes, millivolts) => {
    const { step, minCode, maxCode } = converterCodes(
      'ADC',
      { bits, reference: 3.3, gain: 1 },
      'V',
    );
    expect(maxCode - minCode + 1).toBe(codes);
    expect((step * 1000).toFixed(5)).toBe(millivolts);
  });

  test('behind a divider of 100 kohm over 10 kohm reaches 36.3 V in steps of 8.8623 mV', () => {
    const format = converterCodes('ADC', { bits: 12, reference: 3.3, dividerRatio: 11 }, 'V');
    expect(format.label).toBe('ADC12 0..36.3 V');
    expect(format.step * 4096).toBe(36.3);
    expect((format.step * 1000).toFixed(4)).toBe('8.8623');
    expect(format).toMatchObject({ origin: 0, minCode: 0, maxCode: 4095, signed: false });
  });

  test('of an ADC give floor(x / LSB + 1/2), clipped to 0 and 2^N - 1', () => {
    const scaling = { bits: 10, reference: 2, gain: 1 };
    const adc = new Quantizer(converterCodes('ADC', scaling, 'V'));
    const lsb = 2 / 1024;
    // Quarters of an LSB: the textbook formula is exact on them.
    for (let quarter = -8; quarter <= 4 * 1024 + 8; quarter++) {
      const x = (quarter / 4) * lsb;
      const code = Math.min(1023, Math.max(0, Math.floor(x / lsb + 0.5)));
      expect(adc.encode(x)).toBe(code);
    }
  });

  test('put the reference one past the last code, or on it', () => {
    const scaling = { bits: 12, reference: 4.095, gain: 1 };
    const past = new Quantizer(converterCodes('ADC', scaling, 'V'));
    const on = new Quantizer(converterCodes('ADC', { ...scaling, fullScale: '2^N-1' }, 'V'));
    expect(past.decode(4096)).toBe(4.095);
    expect(on.decode(4095)).toBe(4.095);
    expect(on.format.step).toBe(0.001);
  });

  test('of a current channel are scaled by shunt and amplifier', () => {
    // 10 mohm times 20 is 0.2 V/A: 3.3 V make 16.5 A.
    const format = converterCodes('ADC', { bits: 12, reference: 3.3, gain: 0.01 * 20 }, 'A');
    expect(format.label).toBe('ADC12 0..16.5 A');
    expect(format.step).toBe(16.5 / 4096);
  });

  test('start at -offset / gain: a sensor that idles at half the reference measures both ways', () => {
    const scaling = { bits: 12, reference: 3.3, gain: 0.1, offset: 1.65 };
    const format = converterCodes('ADC', scaling, 'A');
    expect(format.origin).toBe(-16.5);
    expect(format.label).toBe('ADC12 -16.5..16.5 A');
    const adc = new Quantizer(format);
    expect(adc.encode(0)).toBe(2048);
    expect(adc.encode(-16.5)).toBe(0);
  });

  test('of a bipolar converter span twice the reference in two-complement codes', () => {
    const scaling = { bits: 16, reference: 2.5, gain: 1, signed: true };
    const format = converterCodes('ADC', scaling, 'V');
    expect(format).toMatchObject({ minCode: -32768, maxCode: 32767, origin: 0 });
    expect(format.label).toBe('ADC16 -2.5..2.5 V');
    expect(new Quantizer(format).encode(-2.5)).toBe(-32768);
    const symmetric = converterCodes('ADC', { ...scaling, fullScale: '2^N-1' }, 'V');
    expect(new Quantizer(symmetric).encode(2.5)).toBe(32767);
    expect(new Quantizer(symmetric).encode(-2.5)).toBe(-32767);
  });

  test('round half up for an ADC, half to even for a DAC, unless told otherwise', () => {
    const scaling = { bits: 12, reference: 3.3, gain: 1 };
    expect(converterCodes('ADC', scaling, 'V').rounding).toBe('half-up');
    expect(converterCodes('DAC', scaling, 'V').rounding).toBe('half-even');
    expect(converterCodes('DAC', { ...scaling, rounding: 'floor' }, 'V').rounding).toBe('floor');
    expect(converterCodes('DAC', scaling, 'V').overflow).toBe('saturate');
    expect(converterCodes('DAC', { ...scaling, overflow: 'refuse' }, 'V').overflow).toBe('refuse');
  });

  const good = { bits: 12, reference: 3.3 };
  test.each([
    ['bits', { ...good, bits: 0, gain: 1 }],
    ['bits', { bits: 1, reference: 3.3, gain: 1, signed: true, fullScale: '2^N-1' as const }],
    ['reference', { ...good, reference: 0, gain: 1 }],
    ['reference', { ...good, reference: Infinity, gain: 1 }],
    ['gain', { ...good, gain: -0.1 }],
    ['gain', { ...good, gain: NaN }],
    ['gain', { ...good } as { bits: number; reference: number; gain: number }],
    ['dividerRatio', { ...good, dividerRatio: 0 }],
    ['offset', { ...good, gain: 1, offset: NaN }],
    ['origin', { ...good, gain: 1, offset: 1e15 }],
  ])('refuse %s out of range', (field, scaling) => {
    const problem = problemOf(() => converterCodes('ADC', scaling, 'V'));
    expect(problem).toMatchObject({ code: 'ARGUMENT', field });
  });
});
