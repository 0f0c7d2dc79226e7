import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { RampPiece } from '../../src/weather/ramp-piece.js';
import { writableConditions } from '../../src/weather/weather.js';

const level = (irradiance: number[], cellTemperature: number[]) => ({
  irradiance: Float64Array.from(irradiance),
  cellTemperature: Float64Array.from(cellTemperature),
});

describe('a ramp as a piece', () => {
  it('moves every group on its own line', () => {
    const piece = new RampPiece(level([0, 800], [280, 320]), level([400, 200], [290, 320]), 4);
    const into = writableConditions(2);
    piece.write(1, 0, into);
    expect([...into.irradiance]).toEqual([100, 650]);
    expect([...into.cellTemperature]).toEqual([282.5, 320]);
  });

  it('never leaves the interval between its ends, though it is rounded', () => {
    const value = fc.double({ min: 0, max: 2000, noNaN: true });
    const fromEnd = fc.oneof(
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.integer({ min: 0, max: 20 }).map((units) => units * 1.1102230246251565e-16),
    );
    fc.assert(
      fc.property(value, value, fromEnd, fc.boolean(), (from, to, part, atEnd) => {
        const into = writableConditions(1);
        const piece = new RampPiece(level([from], [300]), level([to], [300]), 1);
        piece.write(atEnd ? 1 - part : part, 0, into);
        expect(into.irradiance[0]).toBeGreaterThanOrEqual(Math.min(from, to));
        expect(into.irradiance[0]).toBeLessThanOrEqual(Math.max(from, to));
        expect(into.cellTemperature[0]).toBe(300);
      }),
      { seed: 4001, numRuns: 5000 },
    );
  });

  it('holds its end beyond its time', () => {
    const into = writableConditions(1);
    const piece = new RampPiece(level([10], [300]), level([70], [310]), 0.7);
    for (const time of [0.7, 0.7000000000000001, 5]) {
      piece.write(time, 0, into);
      expect([into.irradiance[0], into.cellTemperature[0]]).toEqual([70, 310]);
    }
  });
});
