/**
 * How sharp the peak is: d²P/dV² of the 54-cell module of Villalva and others 2009 (published
 * parameters, two independent copies) at 25 °C, Iph in proportion to irradiance, Rsh held. Trackers
 * are limited by it at low light. Values computed outside this project in double precision.
 */
import { expect, test } from 'vitest';
import { thermalVoltage } from '../../src/quantities.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';

test.each([
  [1000, -4.239476, 26.349],
  [500, -2.220736, 25.89],
  [200, -0.885621, 24.71],
  [100, -0.420139, 23.565],
  [50, -0.184772, 22.216],
  [20, -0.046193, 19.782],
  [10, -0.008543, 15.792],
])('At %d W/m² the power curve bends by %d W/V² at its peak, %d V', (irradiance, bend, voltage) => {
  const curve = new SingleDiodeCurve({
    photocurrent: (8.214 * irradiance) / 1000,
    saturationCurrent: 9.825e-8,
    idealityVoltage: 54 * 1.3 * thermalVoltage(298.15),
    seriesResistance: 0.221,
    shuntConductance: 1 / 415.405,
  });
  const peak = curve.peaks()[0]!;
  expect(Math.abs(peak.voltage - voltage)).toBeLessThan(0.001);
  // The slope of power on both sides, over twice a step h: errs by h² / 6 of d⁴P/dV⁴, 1e-7 of it.
  const h = 1e-3;
  const slopeOfPower = (v: number): number => curve.current(v) + v * curve.slope(v);
  const found = (slopeOfPower(peak.voltage + h) - slopeOfPower(peak.voltage - h)) / (2 * h);
  expect(Math.abs(found - bend)).toBeLessThanOrEqual(1e-6);
});
