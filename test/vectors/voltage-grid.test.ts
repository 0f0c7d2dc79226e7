import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { Quantizer } from '../../src/fixed/quantizer.js';
import { VoltageGrid } from '../../src/vectors/voltage-grid.js';

const peakAt = (voltage: number) => ({ voltage, current: 1, power: voltage });
const codesOf = (grid: VoltageGrid, count: number): number[] =>
  Array.from({ length: count }, (_, index) => grid.code(index));

describe('the voltage grid', () => {
  test('runs evenly from 0 V to the last code not above Voc', () => {
    const quantizer = new Quantizer(qCodes(parseQ('UQ6.2')));
    // 10.1 V lies between codes 40 (10 V) and 41.
    expect(codesOf(new VoltageGrid(10.1, 5, quantizer), 5)).toEqual([0, 10, 20, 30, 40]);
  });

  test('has a point on the code of each peak', () => {
    const quantizer = new Quantizer(qCodes(parseQ('UQ6.2')));
    const grid = new VoltageGrid(10.1, 5, quantizer, [peakAt(3.2), peakAt(8.1)]);
    expect(codesOf(grid, 5)).toEqual([0, 13, 20, 32, 40]);
  });

  test('rises strictly from the same first to the same last code, wherever the peaks are', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1, max: 63, noNaN: true }),
        fc.integer({ min: 2, max: 200 }),
        fc.array(fc.double({ min: 0, max: 70, noNaN: true }), { maxLength: 12 }),
        (voc, count, voltages) => {
          const quantizer = new Quantizer(qCodes(parseQ('UQ6.10')));
          const plain = codesOf(new VoltageGrid(voc, count, quantizer), count);
          const codes = codesOf(
            new VoltageGrid(voc, count, quantizer, voltages.map(peakAt)),
            count,
          );
          expect(codes.every((code, index) => index === 0 || code > codes[index - 1]!)).toBe(true);
          expect([codes[0], codes.at(-1)]).toEqual([plain[0], plain.at(-1)]);
        },
      ),
      { seed: 5, numRuns: 500 },
    );
  });

  test('counts no value as saturated, whatever lies beyond the format', () => {
    const quantizer = new Quantizer(qCodes(parseQ('UQ3.4')));
    const grid = new VoltageGrid(38, 16, quantizer, [peakAt(31)]);
    expect(grid.code(15)).toBe(127);
    expect([quantizer.saturatedLow, quantizer.saturatedHigh]).toEqual([0, 0]);
  });

  test('refuses more points than there are codes, with both numbers', () => {
    const quantizer = new Quantizer(qCodes(parseQ('UQ6.0')));
    expect(() => new VoltageGrid(10.5, 12, quantizer)).toThrow(
      /12 points need 12 different voltage codes, but UQ6\.0 has 11 from 0 V to Voc/,
    );
  });
});
