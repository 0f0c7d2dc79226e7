import { describe, expect, test } from 'vitest';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { Quantizer } from '../../src/fixed/quantizer.js';

describe('Quantizer shows the faults of firmware in numbers:', () => {
  // Means over all sixteenths of two neighbouring codes: -15/32 of a code, which tends to -1/2
  // as the fractions get finer, against none.
  test.each([
    ['floor', -15 / 32],
    ['half-even', 0],
  ] as const)('the mean error of %s is %d of a code', (rounding, expected) => {
    const quantizer = new Quantizer(qCodes(parseQ('Q7.8'), { rounding }));
    let sum = 0;
    for (let i = -32; i < 32; i++) {
      sum += quantizer.decode(quantizer.encode(i / 4096)) * 256 - i / 16;
    }
    expect(sum / 64).toBe(expected);
  });

  // Voc rises by 0.374 % per kelvin of cold; a full scale of 1.1 Voc is reached at
  // 25 - 0.1 / 0.00374 = -1.74 degrees Celsius.
  test.each([
    [25, 0],
    [-1.7, 0],
    [-1.8, 1],
    [-10, 1],
    [-40, 1],
  ])('an ADC of 1.1 times Voc at %d degrees Celsius saturates %d times', (celsius, count) => {
    const voc = 32.9;
    const adc = new Quantizer({
      ...converterCodes('ADC', { bits: 16, reference: 1.1 * voc, gain: 1 }, 'V'),
      rounding: 'floor',
    });
    adc.encode(voc * (1 + 0.00374 * (25 - celsius)));
    expect(adc.saturatedHigh).toBe(count);
  });

  test('cloud enhancement of 1.3 flattens a current channel of 1.25 times Isc', () => {
    const isc = 8.21;
    const adc = new Quantizer(
      converterCodes('ADC', { bits: 12, reference: 1.25 * isc, gain: 1 }, 'A'),
    );
    expect(adc.encode(1.3 * isc)).toBe(adc.encode(1.5 * isc));
    expect(adc.saturatedHigh).toBe(2);
  });
});
