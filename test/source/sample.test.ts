import { expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { sampleCurve } from '../../src/source/sample.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';

const curve = new SingleDiodeCurve({
  photocurrent: 9,
  saturationCurrent: 2e-10,
  idealityVoltage: 1.6,
  seriesResistance: 0.2,
  shuntConductance: 0,
});

test('sampleCurve runs at even steps from short circuit to exactly no current', () => {
  const points = sampleCurve(curve, 5);
  expect(points.map((point) => point.voltage / curve.openCircuitVoltage)).toEqual([
    0, 0.25, 0.5, 0.75, 1,
  ]);
  expect(points[0]!.current).toBe(curve.shortCircuitCurrent);
  expect(points[4]).toEqual({ voltage: curve.openCircuitVoltage, current: 0, power: 0 });
  expect(points[3]!.power).toBe(points[3]!.voltage * points[3]!.current);
});

test('sampleCurve refuses counts that are not whole or out of range', () => {
  for (const count of [1, 2.5, 100_001, NaN]) {
    expect(() => sampleCurve(curve, count)).toThrow(Fault);
  }
});
