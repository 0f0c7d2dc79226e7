/**
 * The single-diode equation
 *
 *     I = Iph - I0 (exp((V + I Rs) / a) - 1) - (V + I Rs) Gsh
 *
 * in its explicit form over the junction voltage u = V + I Rs, and what follows from it.
 */
import { exp, expm1 } from '../numeric/exponential.js';
import { log1p } from '../numeric/logarithm.js';
import type { Amperes, Ohms, Siemens, Volts } from '../quantities.js';

/**
 * The five parameters at one irradiance and temperature.
 * Range: photocurrent >= 0, saturation current > 0, ideality voltage > 0, series resistance >= 0,
 * shunt conductance >= 0; all finite.
 */
export interface SingleDiode {
  readonly photocurrent: Amperes;
  readonly saturationCurrent: Amperes;
  /** a = Ns A k T / q: how much voltage multiplies the diode current by e. */
  readonly idealityVoltage: Volts;
  readonly seriesResistance: Ohms;
  /** Zero where there is no shunt path (an infinite shunt resistance). */
  readonly shuntConductance: Siemens;
}

/** Current through the terminals as a function of the junction voltage: no iteration. */
export function currentAtJunction(d: SingleDiode, u: Volts): Amperes {
  return (
    d.photocurrent - d.saturationCurrent * expm1(u / d.idealityVoltage) - u * d.shuntConductance
  );
}

/** Conductance of diode and shunt at a junction voltage, -dI/du; above or equal to zero. */
export function junctionConductance(d: SingleDiode, u: Volts): Siemens {
  return (
    (d.saturationCurrent / d.idealityVoltage) * exp(u / d.idealityVoltage) + d.shuntConductance
  );
}

/** dI/dV at the terminals, from the junction conductance. */
export function slopeAtJunction(d: SingleDiode, u: Volts): Siemens {
  const g = junctionConductance(d, u);
  return -g / (1 + d.seriesResistance * g);
}

/**
 * Junction voltage at which the terminal current is `current`: the root of
 * h(u) = I0 expm1(u/a) + u Gsh - (Iph - I), which rises and is convex.
 *
 * Newton from any upper bound of the root descends to it without overshooting. Both bounds used
 * are exact when the other path carries nothing: all current through the diode, or all through
 * the shunt. Accuracy: a few ulp of u, measured as current within 1e-13 of Iph.
 * -Infinity where no voltage drives so large a current (only possible without a shunt path).
 */
export function junctionVoltage(d: SingleDiode, current: Amperes): Volts {
  const { saturationCurrent, idealityVoltage, shuntConductance } = d;
  const inner = d.photocurrent - current;
  if (inner === 0) return 0;
  const ratio = inner / saturationCurrent;
  if (shuntConductance === 0) return idealityVoltage * log1p(Math.max(ratio, -1));
  const throughShunt = inner / shuntConductance;
  let u = inner > 0 ? Math.min(throughShunt, idealityVoltage * log1p(ratio)) : throughShunt;
  let lastStep = Infinity;
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const h = saturationCurrent * expm1(u / idealityVoltage) + u * shuntConductance - inner;
    const step = h / junctionConductance(d, u);
    // Monotone descent ends where rounding takes over: the step stops shrinking.
    if (Math.abs(step) >= lastStep && pass > 1) break;
    u -= step;
    lastStep = Math.abs(step);
    if (lastStep <= SETTLED * Math.abs(u)) break;
  }
  return u;
}

/** Terminal voltage at a terminal current; the inverse of the current. See `junctionVoltage`. */
export function voltageAtCurrent(d: SingleDiode, current: Amperes): Volts {
  return junctionVoltage(d, current) - current * d.seriesResistance;
}

// Far below the rounding of any quantity that follows, and above that of the step itself.
const SETTLED = 1e-16;
// A start one ideality voltage too high costs one pass; u never exceeds a few hundred of them.
const MOST_PASSES = 400;
