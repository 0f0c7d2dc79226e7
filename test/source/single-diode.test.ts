import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../src/numeric/random.js';
import {
  currentAtJunction,
  junctionConductance,
  junctionVoltage,
  slopeAtJunction,
  voltageAtCurrent,
  type SingleDiode,
} from '../../src/source/single-diode.js';
import { anyDiode } from './any-diode.js';

const MODULE: SingleDiode = {
  photocurrent: 9,
  saturationCurrent: 2e-10,
  idealityVoltage: 1.6,
  seriesResistance: 0.2,
  shuntConductance: 1 / 300,
};

const diodes = fc.integer({ min: 0, max: 1e9 }).map((seed) => anyDiode(new Random(seed)));

describe('currentAtJunction', () => {
  test('is the photocurrent where the junction has no voltage', () => {
    expect(currentAtJunction(MODULE, 0)).toBe(9);
  });

  test('is the photocurrent and the saturation current in reverse without a shunt path', () => {
    expect(currentAtJunction({ ...MODULE, shuntConductance: 0 }, -1000)).toBe(9 + 2e-10);
  });
});

describe('junctionConductance', () => {
  test('is I0 / a and the shunt where the junction has no voltage', () => {
    expect(junctionConductance(MODULE, 0)).toBe(2e-10 / 1.6 + 1 / 300);
  });
});

describe('slopeAtJunction', () => {
  test('tends to -1 / Rs where the diode conducts freely', () => {
    // g = 2e-10 / 1.6 exp(60 / 1.6) = 2.4e6 S, so 1 / (Rs g) = 2e-6 is what is missing.
    expect(slopeAtJunction(MODULE, 60)).toBeCloseTo(-5, 4);
  });
});

describe('junctionVoltage', () => {
  test('is exactly zero where all photocurrent flows out', () => {
    expect(junctionVoltage(MODULE, 9)).toBe(0);
  });

  test('is minus infinity where more flows than any voltage drives', () => {
    expect(junctionVoltage({ ...MODULE, shuntConductance: 0 }, 9.1)).toBe(-Infinity);
  });

  test('is finite beyond Iph and I0 where a shunt path carries the rest', () => {
    // 0.1 A less I0 through 300 ohm.
    expect(junctionVoltage(MODULE, 9.1)).toBeCloseTo(-30, 6);
  });

  test('lies in reverse for currents between Iph and Iph + I0', () => {
    const leaky = { ...MODULE, saturationCurrent: 0.5, shuntConductance: 1e-12 };
    for (const current of [9.1, 9.3, 9.49, 9.4999999, 9.5, 9.6]) {
      const u = junctionVoltage(leaky, current);
      expect(u).toBeLessThan(0);
      expect(Math.abs(currentAtJunction(leaky, u) - current)).toBeLessThanOrEqual(4e-15 * current);
    }
  });

  test('inverts the current for any diode and any current', () => {
    fc.assert(
      fc.property(diodes, fc.double({ min: -2, max: 2, noNaN: true }), (diode, share) => {
        const current = share * diode.photocurrent;
        const u = junctionVoltage(diode, current);
        if (u === -Infinity) {
          expect(diode.shuntConductance).toBe(0);
          expect(current).toBeGreaterThanOrEqual(diode.photocurrent + diode.saturationCurrent);
          return;
        }
        // The current has the rounding of u times the conductance, and that of its own sum.
        const slack =
          4e-15 * Math.max(diode.photocurrent, Math.abs(current), diode.saturationCurrent) +
          2.3e-16 * Math.abs(u) * junctionConductance(diode, u);
        expect(Math.abs(currentAtJunction(diode, u) - current)).toBeLessThanOrEqual(slack);
      }),
      { seed: 21, numRuns: 2000 },
    );
  });
});

describe('voltageAtCurrent', () => {
  test('falls as current rises', () => {
    fc.assert(
      fc.property(diodes, fc.double({ min: -1, max: 0.99, noNaN: true }), (diode, share) => {
        const at = (current: number): number => voltageAtCurrent(diode, current);
        const current = share * diode.photocurrent;
        expect(at(current + 0.01 * diode.photocurrent)).toBeLessThan(at(current));
      }),
      { seed: 22 },
    );
  });

  test('is the junction voltage less the drop over the series resistance', () => {
    expect(voltageAtCurrent(MODULE, 5)).toBe(junctionVoltage(MODULE, 5) - 1);
  });
});
