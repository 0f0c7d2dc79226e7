import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { CodeFormat } from '../../src/fixed/code-format.js';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { ROUNDINGS, roundTo } from '../../src/fixed/rounding.js';
import { anyCodeFormat, anyQCodes } from './any-format.js';
import { problemOf } from './faults.js';

const SEED = 83;

/** A format, and values from well below its lowest code to well above its highest. */
const formatAndValues = (format: fc.Arbitrary<CodeFormat>, count: number) =>
  format.chain((made) => {
    const { lowest, highest } = new Quantizer(made);
    const reach = (highest - lowest) / 4 + made.step;
    const value = fc.double({ min: lowest - reach, max: highest + reach, noNaN: true });
    return fc.tuple(fc.constant(made), fc.array(value, { minLength: count, maxLength: count }));
  });

const formatAndCode = (format: fc.Arbitrary<CodeFormat>) =>
  format.chain((made) =>
    fc.tuple(fc.constant(made), fc.integer({ min: made.minCode, max: made.maxCode })),
  );

// Six operations there and back, and the subtraction of the test itself: each rounds by at most
// 2^-53 of one of the three magnitudes.
const slack = (value: number, origin: number): number =>
  Math.max(Math.abs(value), Math.abs(origin), Math.abs(value - origin)) * 2 ** -50;

describe('Quantizer', () => {
  // Codes of the Q15 word worked out by arithmetic: round(x * 32768), clipped.
  test.each([
    [1, 0x7fff],
    [0.99999, 0x7fff],
    [0.5, 0x4000],
    [-1, -0x8000],
    [-1.1, -0x8000],
    [1 / 3, 10923],
    [-1 / 3, -10923],
    [0.1, 3277],
    [0, 0],
    [-0, 0],
  ])('encodes %d in Q15 as %d in both nearest modes', (value, code) => {
    for (const rounding of ['half-even', 'half-up'] as const) {
      expect(new Quantizer(qCodes(parseQ('Q15'), { rounding })).encode(value)).toBe(code);
    }
  });

  test('gives Q15 codes whose 16-bit words are the printed ones', () => {
    const q15 = new Quantizer(qCodes(parseQ('Q15')));
    const word = (value: number): string => (q15.encode(value) & 0xffff).toString(16);
    expect([1, -1, -1.1, 1 / 3, -1 / 3, 0.1].map(word)).toEqual([
      '7fff',
      '8000',
      '8000',
      '2aab',
      'd555',
      'ccd',
    ]);
  });

  test('clips the square of -1 in Q15, 32768 before saturation, to 0x7FFF', () => {
    const q15 = new Quantizer(qCodes(parseQ('Q15')));
    const minusOne = q15.decode(-0x8000);
    expect(q15.encode(minusOne * minusOne)).toBe(0x7fff);
    expect(q15.saturatedHigh).toBe(1);
  });

  test('rounds the halves of a Q-format exactly as roundTo does', () => {
    for (const rounding of ROUNDINGS) {
      const quantizer = new Quantizer(qCodes(parseQ('Q7.8'), { rounding }));
      for (const x of [0.5, 1.5, 2.5, -0.5, -1.5, -2.5, -0.3]) {
        expect(quantizer.encode(x / 256), `${x} ${rounding}`).toBe(roundTo(x, rounding));
      }
    }
  });

  test('keeps every value in range within the error bound after a round trip', () => {
    fc.assert(
      fc.property(formatAndValues(anyCodeFormat(), 4), ([format, values]) => {
        const quantizer = new Quantizer(format);
        for (const value of values) {
          if (value < quantizer.lowest || value > quantizer.highest) continue;
          const error = Math.abs(quantizer.decode(quantizer.encode(value)) - value);
          expect(error).toBeLessThanOrEqual(quantizer.errorBound + slack(value, format.origin));
        }
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });

  test('keeps the bound without any slack for Q-formats', () => {
    fc.assert(
      fc.property(formatAndValues(anyQCodes(), 4), ([format, values]) => {
        const quantizer = new Quantizer(format);
        for (const value of values) {
          if (value < quantizer.lowest || value > quantizer.highest) continue;
          const error = Math.abs(quantizer.decode(quantizer.encode(value)) - value);
          expect(error).toBeLessThanOrEqual(quantizer.errorBound);
        }
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });

  test('never decodes above the value under floor, nor further from code 0 under toward-zero', () => {
    fc.assert(
      fc.property(formatAndValues(anyCodeFormat(), 4), ([format, values]) => {
        const floor = new Quantizer({ ...format, rounding: 'floor' });
        const towardZero = new Quantizer({ ...format, rounding: 'toward-zero' });
        for (const value of values) {
          if (value < floor.lowest || value > floor.highest) continue;
          expect(floor.decode(floor.encode(value))).toBeLessThanOrEqual(value);
          const cut = towardZero.decode(towardZero.encode(value));
          if (value >= format.origin) expect(cut).toBeLessThanOrEqual(value);
          if (value <= format.origin) expect(cut).toBeGreaterThanOrEqual(value);
        }
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });

  const smallFormats = [
    qCodes(parseQ('UQ8.8')),
    qCodes(parseQ('Q3.12')),
    decimalCodes({ step: 0.001, bits: 16, signed: false }, 'V'),
    decimalCodes({ step: 0.3, bits: 16, signed: true }, 'W'),
    decimalCodes({ step: 0.01, bits: 16, signed: false, origin: -40 }, 'degC'),
    converterCodes('ADC', { bits: 12, reference: 3.3, dividerRatio: 11 }, 'V'),
    converterCodes('ADC', { bits: 16, reference: 3.3, gain: 0.2, offset: 1.65 }, 'A'),
    converterCodes('DAC', { bits: 10, reference: 5, gain: 1 / 12, fullScale: '2^N-1' }, 'V'),
    converterCodes('ADC', { bits: 14, reference: 2.5, gain: 3, signed: true }, 'V'),
  ];
  test.each(smallFormats.map((format) => [format.label, format] as const))(
    'gives back every code of %s in every mode',
    (_, format) => {
      for (const rounding of ROUNDINGS) {
        const quantizer = new Quantizer({ ...format, rounding });
        let wrong = 0;
        for (let code = format.minCode; code <= format.maxCode; code++) {
          if (quantizer.encode(quantizer.decode(code)) !== code) wrong++;
        }
        expect(wrong).toBe(0);
        expect(quantizer.saturatedLow + quantizer.saturatedHigh).toBe(0);
      }
    },
  );

  test('gives back any code of any format of up to 32 bits in every mode', () => {
    fc.assert(
      fc.property(formatAndCode(anyCodeFormat()), ([format, code]) => {
        for (const rounding of ROUNDINGS) {
          const quantizer = new Quantizer({ ...format, rounding });
          expect(quantizer.encode(quantizer.decode(code))).toBe(code);
        }
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });

  test('gives back any 32-bit code even where the origin is as far away as allowed', () => {
    const code = fc.integer({ min: 0, max: 2 ** 32 - 1 });
    const origin = -(2 ** 44) * 0.1;
    const format = decimalCodes({ step: 0.1, bits: 32, signed: false, origin }, 's');
    fc.assert(
      fc.property(code, fc.constantFrom(...ROUNDINGS), (sent, rounding) => {
        const quantizer = new Quantizer({ ...format, rounding });
        expect(quantizer.encode(quantizer.decode(sent))).toBe(sent);
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });

  test('never falls as the value rises, saturation included', () => {
    fc.assert(
      fc.property(formatAndValues(anyCodeFormat(), 2), fc.nat(3), ([format, pair], ulps) => {
        const quantizer = new Quantizer(format);
        const [low, high] = pair.toSorted((a, b) => a - b) as [number, number];
        expect(quantizer.encode(low)).toBeLessThanOrEqual(quantizer.encode(high));
        // Right beside the value of a code, where rounding errors would show.
        const onCode = quantizer.decode(quantizer.encode(high));
        const beside = onCode + ulps * Math.abs(onCode) * 2 ** -52;
        expect(quantizer.encode(onCode)).toBeLessThanOrEqual(quantizer.encode(beside));
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });

  test('counts exactly the values whose rounded code lies outside', () => {
    fc.assert(
      fc.property(formatAndValues(anyQCodes(), 40), ([format, values]) => {
        const quantizer = new Quantizer(format);
        // Exact, for the step is a power of two.
        const ideal = values.map((value) => roundTo(value / format.step, format.rounding));
        values.forEach((value) => quantizer.encode(value));
        expect(quantizer.saturatedLow).toBe(ideal.filter((code) => code < format.minCode).length);
        expect(quantizer.saturatedHigh).toBe(ideal.filter((code) => code > format.maxCode).length);
      }),
      { seed: SEED, numRuns: 500 },
    );
  });

  test.each(ROUNDINGS)('saturates infinities and huge values by %s', (rounding) => {
    for (const format of smallFormats) {
      const quantizer = new Quantizer({ ...format, rounding });
      expect(quantizer.encode(Infinity)).toBe(format.maxCode);
      expect(quantizer.encode(1e308)).toBe(format.maxCode);
      expect(quantizer.encode(-Infinity)).toBe(format.minCode);
      expect(quantizer.encode(-1e308)).toBe(format.minCode);
      expect([quantizer.saturatedLow, quantizer.saturatedHigh]).toEqual([2, 2]);
    }
  });

  test('bounds the error by half a step in the nearest modes and by a step in the others', () => {
    const bounds = ROUNDINGS.map(
      (rounding) => new Quantizer(qCodes(parseQ('UQ8.8'), { rounding })).errorBound,
    );
    expect(bounds).toEqual([1 / 512, 1 / 512, 1 / 256, 1 / 256]);
  });

  test('decodes millivolts to the double nearest to the decimal value, for every 16-bit code', () => {
    const millivolts = new Quantizer(decimalCodes({ step: 0.001, bits: 16, signed: false }, 'V'));
    const wrong = [];
    for (let code = 0; code <= 65535; code++) {
      if (millivolts.decode(code) !== Number(`${code}e-3`)) wrong.push(code);
    }
    expect(wrong).toEqual([]);
  });

  test('decodes a 12-bit ADC of 3.3 V to the double nearest to the exact voltage', () => {
    const adc = new Quantizer(converterCodes('ADC', { bits: 12, reference: 3.3, gain: 1 }, 'V'));
    for (let code = 0; code <= 4095; code++) {
      expect(adc.decode(code)).toBe(new Decimal('3.3').times(code).div(4096).toNumber());
    }
  });

  describe('that refuses overflow', () => {
    const strict = (): Quantizer => new Quantizer(qCodes(parseQ('UQ8.8'), { overflow: 'refuse' }));

    test('names the value, the range and the nearest format that holds it', () => {
      expect(problemOf(() => strict().encode(300))).toEqual({
        code: 'VALUE_OUT_OF_RANGE',
        message: 'the value must fit its format: UQ8.8 holds 0 to 255.99609375, found 300.',
        hint: 'The nearest format that holds it is UQ9.7.',
      });
    });

    test('still encodes everything that rounds to a code', () => {
      expect(strict().encode(255.99609375 + 1 / 513)).toBe(65535);
      expect(strict().encode(-1 / 513)).toBe(0);
    });

    test('counts nothing', () => {
      const quantizer = strict();
      expect(() => quantizer.encode(-1)).toThrow();
      expect([quantizer.saturatedLow, quantizer.saturatedHigh]).toEqual([0, 0]);
    });
  });

  test.each(ROUNDINGS)('refuses NaN by %s, whatever the overflow', (rounding) => {
    for (const format of smallFormats) {
      const quantizer = new Quantizer({ ...format, rounding });
      expect(problemOf(() => quantizer.encode(NaN)).code).toBe('NOT_A_NUMBER');
      expect([quantizer.saturatedLow, quantizer.saturatedHigh]).toEqual([0, 0]);
    }
  });

  test('refuses an unusable format', () => {
    expect(problemOf(() => new Quantizer({ ...qCodes(parseQ('Q15')), step: 0 })).field).toBe(
      'step',
    );
  });
});
