/** Measured curves made from known parameters, with noise from a seed. */
import type { Random } from '../../../src/numeric/random.js';
import { fromCelsius, thermalVoltage } from '../../../src/quantities.js';
import type { MeasuredPoint } from '../../../src/source/measured/curve-data.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';

export const CELLS = 60;
export const TEMPERATURE = fromCelsius(40);
export const IDEALITY = 1.2;

const idealityVoltage = IDEALITY * CELLS * thermalVoltage(TEMPERATURE);

/** An invented module of 60 cells at 40 °C. */
export const TRUTH: SingleDiode = {
  photocurrent: 9,
  saturationCurrent: 9 / Math.expm1(36 / idealityVoltage),
  idealityVoltage,
  seriesResistance: 0.3,
  shuntConductance: 1 / 200,
};

/** Points from -1 V to 1 V beyond open circuit, in the order of the voltages. */
export function noisyPoints(random: Random, count: number, noise: number): MeasuredPoint[] {
  const curve = new SingleDiodeCurve(TRUTH);
  return Array.from({ length: count }, (_, index) => {
    const voltage = -1 + (38 * index) / (count - 1);
    const current = curve.current(voltage) + noise * random.normal();
    return { voltage, current, line: index + 2 };
  });
}
