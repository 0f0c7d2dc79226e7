import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { roomierFormat } from '../../src/fixed/roomier-format.js';
import { anyCodeFormat } from './any-format.js';

const SEED = 84;

describe('roomierFormat', () => {
  test.each([
    ['UQ8.8', 300, 'UQ9.7'],
    ['UQ8.8', -1, 'Q7.8'],
    ['UQ8.8', -200, 'Q8.7'],
    ['Q15', 1, 'Q1.14'],
    ['Q15', -1.1, 'Q1.14'],
    ['UQ0.16', 70000, 'UQ17.15'],
    ['UQ12.20', 5000, 'UQ13.19'],
  ])('of %s for %d is %s', (from, value, to) => {
    const advice = `The nearest format that holds it is ${to}.`;
    expect(roomierFormat(value, qCodes(parseQ(from)))).toBe(advice);
  });

  test('says so where no Q-format of 32 bits is left', () => {
    expect(roomierFormat(1e12, qCodes(parseQ('Q15')))).toContain('No Q-format of 32 bits');
  });

  test('says so for an infinity', () => {
    expect(roomierFormat(Infinity, qCodes(parseQ('Q15')))).toContain('infinity');
  });

  test('names width and step for other formats', () => {
    const adc = converterCodes('ADC', { bits: 12, reference: 3.3, dividerRatio: 11 }, 'V');
    expect(roomierFormat(40, adc)).toBe(
      '13 unsigned bits hold it at this step, or 12 unsigned bits with a step of 0.00977.',
    );
    const millivolts = decimalCodes({ step: 0.001, bits: 16, signed: false }, 'V');
    expect(roomierFormat(-1, millivolts)).toBe('16 signed bits hold it at this step.');
    const microvolts = decimalCodes({ step: 1e-6, bits: 32, signed: false }, 'V');
    expect(roomierFormat(10000, microvolts)).toBe(
      'The nearest that holds it is 32 unsigned bits with a step of 0.00000233.',
    );
  });

  test('advises formats that do hold the value', () => {
    const pair = anyCodeFormat().chain((format) => {
      const { lowest, highest } = new Quantizer(format);
      const span = highest - lowest + format.step;
      const beyond = fc
        .double({ min: 1, max: 1e4, noNaN: true })
        .map((times) => highest + times * span);
      return fc.tuple(
        fc.constant(format),
        fc.oneof(
          beyond,
          beyond.map((value) => -value),
        ),
      );
    });
    fc.assert(
      fc.property(pair, ([format, value]) => {
        const advice = roomierFormat(value, format);
        const name = /is (U?Q[-\d./]+)\.$/.exec(advice)?.[1];
        if (name !== undefined) {
          const advised = new Quantizer(qCodes(parseQ(name), { overflow: 'refuse' }));
          expect(() => advised.encode(value)).not.toThrow();
        }
        const stretched = /(\d+) (un)?signed bits with a step of ([-+.e\d]+)\.$/.exec(advice);
        if (stretched !== null) {
          const [, bits, unsigned, step] = stretched;
          const { origin } = format;
          const scaling = { bits: Number(bits), signed: unsigned === undefined, origin };
          const advised = new Quantizer(decimalCodes({ ...scaling, step: Number(step) }, 'V'));
          advised.encode(value);
          expect([advised.saturatedLow, advised.saturatedHigh]).toEqual([0, 0]);
        }
        expect(advice).toMatch(/Q-format|nearest|hold it at this step/);
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });
});
