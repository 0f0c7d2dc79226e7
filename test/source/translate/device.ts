/** A module to measure: the 54 cells of Villalva and others 2009, fitted after De Soto and others. */
import { fromCelsius, uniformConditions } from '../../../src/quantities.js';
import { Module } from '../../../src/source/module.js';
import type { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import type { CurvePoints, OperatingPoint } from '../../../src/source/translate/curve-points.js';

export const DEVICE = new Module(
  '54 cells',
  54,
  {
    photocurrent: 8.22714044,
    saturationCurrent: 4.37222464e-10,
    idealityVoltage: 1.39213371,
    seriesResistance: 0.33510053,
    shuntConductance: 1 / 160.507916,
  },
  { technology: 'poly-si', shortCircuitCoefficient: 0.0032 },
);

export const at = (irradiance: number, celsius: number): OperatingPoint => ({
  irradiance,
  cellTemperature: fromCelsius(celsius),
});

export const curveAt = ({ irradiance, cellTemperature }: OperatingPoint): SingleDiodeCurve =>
  DEVICE.at(uniformConditions(irradiance, cellTemperature));

/** 401 points from short circuit to 8 % beyond open circuit. */
export function measured(point: OperatingPoint): CurvePoints {
  const curve = curveAt(point);
  const voltage = Float64Array.from(
    { length: 401 },
    (_, index) => (1.08 * curve.openCircuitVoltage * index) / 400,
  );
  return { voltage, current: voltage.map((v) => curve.current(v)) };
}

/** How far points lie from the model's curve, in its first quadrant. */
export function errorOf(
  { voltage, current }: CurvePoints,
  point: OperatingPoint,
): { ofPower: number; ofCurrent: number } {
  const curve = curveAt(point);
  let power = 0;
  let miss = 0;
  for (let index = 0; index < voltage.length; index++) {
    const [v, i] = [voltage[index]!, current[index]!];
    if (v < 0 || i < 0) continue;
    power = Math.max(power, v * i);
    miss = Math.max(miss, Math.abs(i - curve.current(v)));
  }
  return {
    ofPower: power / curve.peaks()[0]!.power - 1,
    ofCurrent: miss / curve.shortCircuitCurrent,
  };
}
