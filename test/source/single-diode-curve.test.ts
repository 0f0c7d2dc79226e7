import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { exp } from '../../src/numeric/exponential.js';
import { Random } from '../../src/numeric/random.js';
import { globalPeak, type Peak } from '../../src/source/curve.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import { voltageAtCurrent, type SingleDiode } from '../../src/source/single-diode.js';
import { anyDiode } from './any-diode.js';
import { fixed, over, size, toDouble } from './fixed-point.js';
import { ExactDiode } from './reference.js';

const MODULE: SingleDiode = {
  photocurrent: 9,
  saturationCurrent: 2e-10,
  idealityVoltage: 1.6,
  seriesResistance: 0.2,
  shuntConductance: 1 / 300,
};
const DARK: SingleDiode = { ...MODULE, photocurrent: 0, shuntConductance: 0 };

const curves = fc
  .integer({ min: 0, max: 1e9 })
  .map((seed) => new SingleDiodeCurve(anyDiode(new Random(seed))));
const share = fc.double({ min: -0.2, max: 1.1, noNaN: true });
/** Of Isc; twice the error bound of the current. */
const ROUNDING = 2e-13;

describe('SingleDiodeCurve', () => {
  test('has a current that never rises with voltage', () => {
    fc.assert(
      fc.property(curves, share, share, (curve, a, b) => {
        const [low, high] = [Math.min(a, b), Math.max(a, b)].map(
          (x) => x * curve.openCircuitVoltage,
        );
        const slack =
          ROUNDING * Math.max(curve.shortCircuitCurrent, Math.abs(curve.current(high!)));
        expect(curve.current(high!)).toBeLessThanOrEqual(curve.current(low!) + slack);
      }),
      { seed: 31 },
    );
  });

  test('bends downward only: its slope never rises with voltage', () => {
    fc.assert(
      fc.property(curves, share, share, (curve, a, b) => {
        const [low, high] = [Math.min(a, b), Math.max(a, b)].map(
          (x) => x * curve.openCircuitVoltage,
        );
        const [flat, steep] = [curve.slope(low!), curve.slope(high!)];
        expect(steep).toBeLessThanOrEqual(flat + ROUNDING * Math.abs(flat));
        expect(flat).toBeLessThanOrEqual(0);
      }),
      { seed: 32 },
    );
  });

  test('gives back a voltage from its current where the curve is steep', () => {
    fc.assert(
      fc.property(curves, fc.double({ min: -0.5, max: 0.9, noNaN: true }), (curve, of) => {
        const current = of * curve.shortCircuitCurrent;
        const voltage = voltageAtCurrent(curve.diode, current);
        const slack = ROUNDING * curve.shortCircuitCurrent;
        expect(Math.abs(curve.current(voltage) - current)).toBeLessThanOrEqual(slack);
      }),
      { seed: 33 },
    );
  });

  test('has no point of more power than its peak', () => {
    fc.assert(
      fc.property(curves, fc.double({ min: 0, max: 1, noNaN: true }), (curve, of) => {
        const voltage = of * curve.openCircuitVoltage;
        const slack = ROUNDING * curve.shortCircuitCurrent * voltage;
        const { power } = globalPeak(curve.peaks());
        expect(voltage * curve.current(voltage)).toBeLessThanOrEqual(power + slack);
      }),
      { seed: 34 },
    );
  });

  test('has one peak, between short circuit and open circuit, and asks for it once', () => {
    fc.assert(
      fc.property(curves, (curve) => {
        const peaks = curve.peaks();
        expect(peaks).toHaveLength(1);
        const { voltage, current, power } = peaks[0]!;
        expect(voltage).toBeGreaterThan(0);
        expect(voltage).toBeLessThan(curve.openCircuitVoltage);
        expect(current).toBeGreaterThan(0);
        expect(current).toBeLessThan(curve.shortCircuitCurrent);
        expect(power).toBe(voltage * current);
        expect(curve.peaks()).toBe(peaks);
      }),
      { seed: 35 },
    );
  });

  test('without series resistance is the equation itself', () => {
    const curve = new SingleDiodeCurve({ ...MODULE, seriesResistance: 0 });
    expect(curve.shortCircuitCurrent).toBe(9);
    expect(curve.current(-3)).toBeCloseTo(9 + 3 / 300, 9);
    expect(curve.slope(0)).toBe(-(2e-10 / 1.6 + 1 / 300));
  });

  test('tends to the curve without series resistance as that vanishes', () => {
    const none = new SingleDiodeCurve({ ...MODULE, seriesResistance: 0 });
    for (const seriesResistance of [1e-300, 1e-26, 1e-25, 1e-20, 1e-15]) {
      const some = new SingleDiodeCurve({ ...MODULE, seriesResistance });
      for (const voltage of [-5, 0, 20, 38, 39, 45]) {
        // 1e-15 ohm at 300 A moves u by 3e-13 V, and the current by 2e-13 of itself.
        const slack = 1e-12 * Math.max(9, Math.abs(none.current(voltage)));
        expect(Math.abs(some.current(voltage) - none.current(voltage))).toBeLessThanOrEqual(slack);
      }
    }
  });

  test('is ruled by the series resistance far beyond open circuit', () => {
    const curve = new SingleDiodeCurve(MODULE);
    // The junction stays near 50 V; the rest of 1000 V drops over 0.2 ohm.
    expect(curve.current(1000)).toBeGreaterThan(-5000);
    expect(curve.current(1000)).toBeLessThan(-4700);
    expect(curve.current(1e6)).toBeGreaterThan(-5e6);
  });

  test('is ruled by the shunt path far below short circuit', () => {
    const curve = new SingleDiodeCurve(MODULE);
    const expected = (9 + 2e-10 + 1000 / 300) / (1 + 0.2 / 300);
    expect(curve.current(-1000)).toBeCloseTo(expected, 12);
  });

  test('takes leaky cells at dawn, whose I0 is far above Iph', () => {
    for (const photocurrent of [1e-2, 1e-4, 1e-6, 1e-9]) {
      const diode = { ...MODULE, saturationCurrent: 5, photocurrent };
      const curve = new SingleDiodeCurve(diode);
      for (const of of [-1, 0, 0.5, 0.9]) {
        const voltage = of * curve.openCircuitVoltage;
        const exact = new ExactDiode(diode).at(voltage, curve.current(voltage)).current;
        const error = size(over(fixed(curve.current(voltage)) - exact, fixed(photocurrent)));
        expect(toDouble(error)).toBeLessThanOrEqual(1e-13);
      }
    }
  });

  describe('in the dark', () => {
    const curve = new SingleDiodeCurve(DARK);
    const nothing: Peak = { voltage: 0, current: 0, power: 0 };

    test('starts and ends at zero, with one peak of no power', () => {
      expect(curve.shortCircuitCurrent).toBe(0);
      expect(curve.openCircuitVoltage).toBe(0);
      expect(curve.peaks()).toEqual([nothing]);
    });

    test('is the curve of a diode', () => {
      // u = 20 V: the drop over Rs is below 1e-5 V, a hundred thousandth of the current.
      expect(curve.current(20) / -(2e-10 * exp(20 / 1.6))).toBeCloseTo(1, 4);
      expect(curve.current(-200) / 2e-10).toBeCloseTo(1, 14);
    });

    test('keeps the series resistance in forward direction, however small I0 is', () => {
      // -40 °C: without Rs it would be 300 kA.
      const cold = new SingleDiodeCurve({
        ...DARK,
        saturationCurrent: 1e-19,
        idealityVoltage: 1.1,
      });
      expect(cold.current(62)).toBeGreaterThan(-62 / 0.2);
      const exact = new ExactDiode(cold.diode).at(62, cold.current(62)).current;
      expect(cold.current(62)).toBeCloseTo(toDouble(exact), 10);
    });
  });
});
