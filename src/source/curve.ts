/** The types that carry nearly all traffic from sources to everything that uses them. */
import type { Amperes, AmperesPerVolt, Conditions, Volts, Watts } from '../quantities.js';

/** A local maximum of power over voltage. */
export interface Peak {
  readonly voltage: Volts;
  readonly current: Amperes;
  readonly power: Watts;
}

/** The I-V curve of a source at fixed conditions. Immutable. */
export interface Curve {
  readonly shortCircuitCurrent: Amperes;
  readonly openCircuitVoltage: Volts;
  /** Terminal current at a terminal voltage; never rises with voltage. Negative beyond Voc. */
  current(voltage: Volts): Amperes;
  /** dI/dV at a terminal voltage; never positive. */
  slope(voltage: Volts): AmperesPerVolt;
  /** Every local peak in rising order of voltage; at least one. In the dark: one of zero power. */
  peaks(): readonly Peak[];
}

/** Anything that has an I-V curve under given conditions: a module, a string, an array. */
export interface Source {
  readonly name: string;
  /** Shading groups: `at` takes a pair of irradiance and temperature for each, or one for all. */
  readonly groups: number;
  at(conditions: Conditions): Curve;
}

/** The highest of the peaks; of equals the one at the lowest voltage. */
export function globalPeak(peaks: readonly Peak[]): Peak {
  return peaks.reduce((best, peak) => (peak.power > best.power ? peak : best));
}
