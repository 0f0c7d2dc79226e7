/**
 * The double-diode equation
 *
 *     I = Iph - I01 (exp(u / a1) - 1) - I02 (exp(u / a2) - 1) - u Gsh,   u = V + I Rs,
 *
 * explicit over the junction voltage u, and what follows from it. By common practice the first
 * diode stands for diffusion (ideality near 1), the second for recombination (ideality up to 2).
 */
import { exp, expm1 } from '../numeric/exponential.js';
import type { Amperes, Ohms, Siemens, Volts } from '../quantities.js';
import { junctionVoltage, type SingleDiode } from './single-diode.js';

export interface Diode {
  /** At least 0. */
  readonly saturationCurrent: Amperes;
  /** a = Ns A k T / q, above 0. */
  readonly idealityVoltage: Volts;
}

/**
 * The parameters at one irradiance and temperature. Range as of `SingleDiode`; at least one
 * saturation current is above zero.
 */
export interface DoubleDiode {
  readonly photocurrent: Amperes;
  readonly diodes: readonly [first: Diode, second: Diode];
  readonly seriesResistance: Ohms;
  readonly shuntConductance: Siemens;
}

/** Current through the terminals as a function of the junction voltage: no iteration. */
export function doubleDiodeCurrent(d: DoubleDiode, u: Volts): Amperes {
  const [first, second] = d.diodes;
  return d.photocurrent - through(first, u) - through(second, u) - u * d.shuntConductance;
}

/** -dI/du; above or equal to zero. */
export function doubleDiodeConductance(d: DoubleDiode, u: Volts): Siemens {
  const [first, second] = d.diodes;
  return conductance(first, u) + conductance(second, u) + d.shuntConductance;
}

/** d(-dI/du)/du; above or equal to zero. */
export function doubleDiodeCurvature(d: DoubleDiode, u: Volts): number {
  const [first, second] = d.diodes;
  return (
    conductance(first, u) / first.idealityVoltage + conductance(second, u) / second.idealityVoltage
  );
}

/** The same source with one of its diodes taken out; undefined if the other carries nothing. */
export function withoutOneDiode(d: DoubleDiode, kept: 0 | 1): SingleDiode | undefined {
  const { saturationCurrent, idealityVoltage } = d.diodes[kept];
  if (saturationCurrent === 0) return undefined;
  const { photocurrent, seriesResistance, shuntConductance } = d;
  return { photocurrent, saturationCurrent, idealityVoltage, seriesResistance, shuntConductance };
}

/**
 * Junction voltage where no current flows. Either diode alone lets it rise higher, so the lower of
 * both single-diode voltages is an upper bound, and from there Newton's method on a convex function
 * descends to it. Accuracy: 1e-14 of itself.
 */
export function doubleDiodeOpenCircuit(d: DoubleDiode): Volts {
  if (d.photocurrent === 0) return 0;
  let u = Infinity;
  for (const kept of [0, 1] as const) {
    const single = withoutOneDiode(d, kept);
    if (single !== undefined) u = Math.min(u, junctionVoltage(single, 0));
  }
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const step = doubleDiodeCurrent(d, u) / doubleDiodeConductance(d, u);
    u += step;
    if (Math.abs(step) <= SETTLED * u) break;
  }
  return u;
}

const through = ({ saturationCurrent, idealityVoltage }: Diode, u: Volts): Amperes =>
  saturationCurrent === 0 ? 0 : saturationCurrent * expm1(u / idealityVoltage);

const conductance = ({ saturationCurrent, idealityVoltage }: Diode, u: Volts): Siemens =>
  saturationCurrent === 0 ? 0 : (saturationCurrent / idealityVoltage) * exp(u / idealityVoltage);

// A Newton step of this share of u leaves an error of its square times u / a: below rounding.
const SETTLED = 1e-10;
// The bound is within one ideality voltage of the root, where Newton needs 4 to 6.
const MOST_PASSES = 40;
