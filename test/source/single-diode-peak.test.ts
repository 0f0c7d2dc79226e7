import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../src/numeric/random.js';
import {
  currentAtJunction,
  junctionVoltage,
  type SingleDiode,
} from '../../src/source/single-diode.js';
import { singleDiodePeak } from '../../src/source/single-diode-peak.js';
import { anyDiode } from './any-diode.js';

const diodes = fc.integer({ min: 0, max: 1e9 }).map((seed) => anyDiode(new Random(seed)));
const peakOf = (diode: SingleDiode) => singleDiodePeak(diode, junctionVoltage(diode, 0));

describe('singleDiodePeak', () => {
  test('lies on the curve', () => {
    fc.assert(
      fc.property(diodes, (diode) => {
        const { voltage, current } = peakOf(diode);
        const u = voltage + current * diode.seriesResistance;
        // u is put together again with the rounding of one sum, where the conductance is Imp / Vmp
        // or, beside a large Rs, more.
        expect(currentAtJunction(diode, u) / current).toBeCloseTo(1, 12);
      }),
      { seed: 41 },
    );
  });

  test('has the static resistance of the source equal to its dynamic one', () => {
    // dP/dV = 0 in its form of the textbooks: dI/dV = -I/V, here over two points 1e-4 Vmp apart.
    fc.assert(
      fc.property(diodes, (diode) => {
        const { voltage, current } = peakOf(diode);
        const u = voltage + current * diode.seriesResistance;
        const [left, right] = [u * (1 - 5e-5), u * (1 + 5e-5)];
        const currents = [left, right].map((at) => currentAtJunction(diode, at));
        const rise = right - left - diode.seriesResistance * (currents[1]! - currents[0]!);
        const slope = (currents[1]! - currents[0]!) / rise;
        // The mean over so short a piece differs by (u / a)² 1e-9 / 24, u / a below 120.
        expect(slope / (-current / voltage)).toBeCloseTo(1, 5);
      }),
      { seed: 42 },
    );
  });

  test('is half of both ends for a source that is all resistance', () => {
    // A diode that never conducts leaves Iph and Rsh: a straight line, whose peak is its middle.
    const line: SingleDiode = {
      photocurrent: 1,
      saturationCurrent: 1e-300,
      idealityVoltage: 1,
      seriesResistance: 0,
      shuntConductance: 0.1,
    };
    const peak = peakOf(line);
    expect(peak.voltage).toBeCloseTo(5, 13);
    expect(peak.current).toBeCloseTo(0.5, 14);
  });

  test('is at zero where there is no open-circuit voltage', () => {
    for (const voltage of [0, -1, NaN]) {
      expect(singleDiodePeak({ ...anyDiode(new Random(1)) }, voltage).power).toBe(0);
    }
  });
});
