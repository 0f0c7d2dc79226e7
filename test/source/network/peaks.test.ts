import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import type { ArrayCurve } from '../../../src/source/network/array-curve.js';
import { anyArray, type Diodes } from './any-array.js';

interface Point {
  readonly voltage: number;
  readonly power: number;
}

/** The curve at many points, in rising order of voltage: a string over its current, else voltage. */
function densePoints(curve: ArrayCurve, count: number): Point[] {
  const shares = Array.from({ length: count + 1 }, (_, index) => index / count);
  const [first] = curve.strings;
  if (curve.strings.length === 1) {
    const { count: side, string } = first!;
    return shares
      .map((share) => {
        const current = string.shortCircuitCurrent * (1 - share);
        const voltage = string.voltage(current);
        return { voltage, power: voltage * current * side };
      })
      .filter(({ voltage }) => voltage >= 0);
  }
  return shares.map((share) => {
    const voltage = curve.openCircuitVoltage * share;
    return { voltage, power: voltage * curve.current(voltage) };
  });
}

/** Every inner point above both neighbours must have a reported peak between them, no lower. */
function missedPeaks(curve: ArrayCurve, points: readonly Point[]): string[] {
  const noise = 1e-11 * curve.shortCircuitCurrent * curve.openCircuitVoltage;
  const peaks = curve.peaks();
  return points.flatMap((point, index) => {
    const before = points[index - 1];
    const after = points[index + 1];
    if (before === undefined || after === undefined) return [];
    if (!(point.power > before.power + noise && point.power > after.power + noise)) return [];
    const isFound = peaks.some(
      ({ voltage, power }) =>
        voltage >= before.voltage && voltage <= after.voltage && power >= point.power - noise,
    );
    return isFound ? [] : [`at ${point.voltage} V`];
  });
}

/** A reported peak must be above its surroundings, and where it says. */
function falsePeaks(curve: ArrayCurve): string[] {
  const noise = 1e-11 * curve.shortCircuitCurrent * curve.openCircuitVoltage;
  return curve.peaks().flatMap(({ voltage, current, power }) => {
    // Well inside the nearest kink, and far enough for the noise of currents not to count.
    const step = 1e-7 * curve.openCircuitVoltage;
    const around = [voltage - step, voltage + step].map((v) => v * curve.current(v));
    const isTop = around.every((beside) => beside <= power + noise);
    const isOn = Math.abs(curve.current(voltage) - current) <= 1e-11 * curve.shortCircuitCurrent;
    return isTop && isOn ? [] : [`${voltage} V ${power} W, beside ${around.join(' ')}`];
  });
}

const PLANS: readonly { diodes: Diodes; strings: number; arrays: number; points: number }[] = [
  { diodes: 'ideal', strings: 1, arrays: 2500, points: 500 },
  { diodes: 'ideal', strings: 4, arrays: 400, points: 300 },
  { diodes: 'junction', strings: 1, arrays: 150, points: 400 },
  { diodes: 'junction', strings: 3, arrays: 15, points: 200 },
  { diodes: 'breakdown', strings: 1, arrays: 250, points: 500 },
  { diodes: 'breakdown', strings: 3, arrays: 25, points: 300 },
  { diodes: 'mixed', strings: 1, arrays: 150, points: 400 },
  { diodes: 'mixed', strings: 3, arrays: 15, points: 200 },
];

describe('the peaks of strings and arrays', () => {
  test.each(PLANS)(
    'are all found, and nothing else: $arrays with $diodes diodes, up to $strings strings',
    ({ diodes, strings, arrays, points }) => {
      const random = new Random(20).split(`${diodes} ${strings}`);
      let several = 0;
      for (let index = 0; index < arrays; index++) {
        const curve = anyArray(random, diodes, strings);
        const label = `array ${index}`;
        // A string of wires alone short-circuits the others.
        if (!(curve.openCircuitVoltage > 0)) continue;
        expect([label, missedPeaks(curve, densePoints(curve, points))]).toEqual([label, []]);
        expect([label, falsePeaks(curve)]).toEqual([label, []]);
        const voltages = curve.peaks().map(({ voltage }) => voltage);
        expect([label, voltages]).toEqual([label, [...voltages].sort((a, b) => a - b)]);
        expect([label, voltages.length > 0]).toEqual([label, true]);
        if (voltages.length > 1) several++;
      }
      // The sample is worth its while: many of the curves have several peaks.
      expect(several).toBeGreaterThan(arrays / 4);
    },
  );
});
