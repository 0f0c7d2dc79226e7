import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { formatQ, integerBitsOf, parseQ, type QFormat } from '../../src/fixed/q-format.js';
import { problemOf } from './faults.js';

const SEED = 82;

const anyQ = (): fc.Arbitrary<QFormat> =>
  fc.record({
    bits: fc.integer({ min: 1, max: 32 }),
    signed: fc.boolean(),
    fractionBits: fc.integer({ min: 0, max: 63 }),
  });

describe('parseQ', () => {
  // Both conventions as their inventors' manuals describe them: the same 16-bit word is Q0.15 and
  // Q3.12 with the sign excluded, Q1.15 and Q4.12 with the sign counted.
  test.each([
    ['Q0.15', 16, 15, 'Q0.15'],
    ['Q1.15', 16, 15, 'Q0.15'],
    ['Q15', 16, 15, 'Q0.15'],
    ['Q3.12', 16, 12, 'Q3.12'],
    ['Q4.12', 16, 12, 'Q3.12'],
    ['Q8.8', 16, 8, 'Q7.8'],
    ['Q7', 8, 7, 'Q0.7'],
    ['Q1.7', 8, 7, 'Q0.7'],
    ['Q4.4', 8, 4, 'Q3.4'],
    ['Q31', 32, 31, 'Q0.31'],
    ['Q1.31', 32, 31, 'Q0.31'],
    ['Q16.16', 32, 16, 'Q15.16'],
    ['Q15.16', 32, 16, 'Q15.16'],
    ['Q20', 32, 20, 'Q11.20'],
    ['Q0', 8, 0, 'Q7.0'],
    ['Q-2.17', 16, 17, 'Q-2.17'],
    ['Q5.6', 12, 6, 'Q5.6'],
  ])(
    'reads the signed name %s as %d bits, %d of them fraction',
    (text, bits, fractionBits, name) => {
      expect(parseQ(text)).toEqual({ bits, signed: true, fractionBits });
      expect(formatQ(parseQ(text))).toBe(name);
    },
  );

  test.each([
    ['UQ8.8', 16, 8, 'UQ8.8'],
    ['UQ4.12', 16, 12, 'UQ4.12'],
    ['UQ12.20', 32, 20, 'UQ12.20'],
    ['UQ0.16', 16, 16, 'UQ0.16'],
    ['UQ16', 16, 16, 'UQ0.16'],
    ['UQ8', 8, 8, 'UQ0.8'],
    ['UQ9', 16, 9, 'UQ7.9'],
    ['UQ32', 32, 32, 'UQ0.32'],
    ['UQ-4.20', 16, 20, 'UQ-4.20'],
    ['UQ12.0', 12, 0, 'UQ12.0'],
  ])('reads the unsigned name %s as %d bits, %d of them fraction', (text, bits, fraction, name) => {
    expect(parseQ(text)).toEqual({ bits, signed: false, fractionBits: fraction });
    expect(formatQ(parseQ(text))).toBe(name);
  });

  test.each([
    ['Q4.12', 16, 'Q3.12'],
    ['Q4.12', 17, 'Q4.12/17'],
    ['Q15', 32, 'Q16.15'],
    ['Q15', 12, 'Q-4.15'],
    ['UQ8', 16, 'UQ8.8'],
    ['UQ8.8', 16, 'UQ8.8'],
  ])('settles %s by a width of %d bits, given apart or as a suffix', (text, bits, name) => {
    expect(formatQ(parseQ(text, bits))).toBe(name);
    expect(parseQ(`${text}/${bits}`)).toEqual(parseQ(text, bits));
    expect(parseQ(`${text}/${bits}`, bits)).toEqual(parseQ(text, bits));
  });

  test('ignores case and outer spaces', () => {
    expect(parseQ(' uq8.8 ')).toEqual(parseQ('UQ8.8'));
  });

  test('reads back every name that formatQ writes', () => {
    fc.assert(
      fc.property(anyQ(), (q) => {
        expect(parseQ(formatQ(q))).toEqual(q);
        expect(parseQ(formatQ(q), q.bits)).toEqual(q);
      }),
      { seed: SEED, numRuns: 5000 },
    );
  });

  test('is refused or leads to a name that means the same, for any numbers', () => {
    const part = fc.integer({ min: -70, max: 70 });
    fc.assert(
      fc.property(part, part, fc.constantFrom('Q', 'UQ'), (m, n, sign) => {
        let q: QFormat;
        try {
          q = parseQ(`${sign}${m}.${n}`);
        } catch (error) {
          expect(error).toMatchObject({ problems: [{ code: 'FORMAT' }] });
          return;
        }
        expect(q.fractionBits).toBe(n);
        expect([m, m - 1]).toContain(integerBitsOf(q));
        expect(parseQ(formatQ(q))).toEqual(q);
      }),
      { seed: SEED, numRuns: 2000 },
    );
  });

  test.each([
    ['U8.8', '"U8.8" is not the name of a Q-format', 'Did you mean UQ8.8?'],
    ['Q8,8', '"Q8,8" is not the name of a Q-format', 'Did you mean Q8.8?'],
    ['uint16', '"uint16" is not the name of a Q-format', 'Examples: UQ8.8'],
    ['', '"" is not the name of a Q-format', 'Examples: UQ8.8'],
    ['Q16.61', 'Q16.61 is 78 bits wide, expected 1 to 32.', 'Did you mean Q16.15?'],
    ['UQ16.61', 'UQ16.61 is 77 bits wide, expected 1 to 32.', 'Did you mean UQ16.16?'],
    ['Q40', 'Q40 is 41 bits wide, expected 1 to 32.', 'Q40/32'],
    ['UQ-9.8', 'UQ-9.8 is -1 bits wide, expected 1 to 32.', 'Add up the bits'],
    ['Q33.2', 'Q33.2 is 36 bits wide, expected 1 to 32.', 'Add up the bits'],
  ])('refuses %s and tells how to mend it', (text, message, hint) => {
    const problem = problemOf(() => parseQ(text));
    expect(problem.code).toBe('FORMAT');
    expect(problem.message).toContain(message);
    expect(problem.hint).toContain(hint);
  });

  test.each(['Q3.-2', 'Q-3', 'Q3.12.1', 'Q', 'UQ.8', 'Q1e1', 'Q3.12 V', 'Q1234.8'])(
    'refuses %s',
    (text) => {
      expect(problemOf(() => parseQ(text)).code).toBe('FORMAT');
    },
  );

  test('refuses a name that does not fill the width, and names the format that does', () => {
    expect(problemOf(() => parseQ('Q4.12', 32))).toEqual({
      code: 'FORMAT',
      message: 'Q4.12 does not fill 32 bits.',
      hint: 'Q19.12 is the 32-bit name with 12 fraction bits.',
    });
    expect(problemOf(() => parseQ('UQ8.8/17')).message).toBe('UQ8.8/17 does not fill 17 bits.');
  });

  test.each([0, 33, 12.5, NaN])('refuses a width of %d bits', (bits) => {
    expect(problemOf(() => parseQ('Q15', bits)).message).toContain('expected 1 to 32');
  });

  test('refuses a suffix that contradicts the width given apart', () => {
    expect(problemOf(() => parseQ('Q15/16', 32)).message).toBe('Q15/16 says 16 bits, expected 32.');
  });

  test('refuses more fraction bits than a 64-bit shift takes', () => {
    expect(parseQ('Q-48.63').fractionBits).toBe(63);
    expect(problemOf(() => parseQ('Q-49.64')).message).toContain('more than 63 fraction bits');
  });
});
