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
 * h(u) = I0 expm1(u/a) + u Gsh - (Iph - I), which rises and is convex, so that Newton's method
 * descends to the root from any upper bound without overshooting.
 *
 * Accuracy: the current at the voltage returned is within 4e-15 of the larger of Iph and `current`;
 * where the curve is steep (below 0.95 Isc) that is 4e-15 of the open-circuit voltage.
 * -Infinity where no voltage drives so large a current (only possible without a shunt path).
 */
export function junctionVoltage(d: SingleDiode, current: Amperes): Volts {
  const { saturationCurrent, idealityVoltage, shuntConductance } = d;
  const inner = d.photocurrent - current;
  if (inner === 0) return 0;
  if (shuntConductance === 0) {
    return idealityVoltage * log1p(Math.max(inner / saturationCurrent, -1));
  }
  let u = upperBound(d, inner);
  let lastStep = Infinity;
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const h = saturationCurrent * expm1(u / idealityVoltage) + u * shuntConductance - inner;
    const step = h / junctionConductance(d, u);
    // Where rounding takes over the descent turns back, or its steps stop shrinking.
    if (!(step > 0 && step < lastStep)) break;
    u -= step;
    lastStep = step;
    if (step <= SETTLED * Math.abs(u)) break;
  }
  return u;
}

/** Each bound is exact where the other path carries nothing, or the diode all it can in reverse. */
function upperBound(d: SingleDiode, inner: Amperes): Volts {
  const { saturationCurrent, idealityVoltage, shuntConductance } = d;
  if (inner < 0) return Math.min(0, (inner + saturationCurrent) / shuntConductance);
  const throughDiode = idealityVoltage * log1p(inner / saturationCurrent);
  return Math.min(inner / shuntConductance, throughDiode);
}

/** Terminal voltage at a terminal current of either sign; accuracy as of `junctionVoltage`. */
export function voltageAtCurrent(d: SingleDiode, current: Amperes): Volts {
  return junctionVoltage(d, current) - current * d.seriesResistance;
}

// A Newton step of this share of u leaves an error of its square times u / a: below rounding.
const SETTLED = 1e-9;
// Each pass gains an ideality voltage at least, or doubles the digits; u is at most a few hundred
// ideality voltages from the bound.
const MOST_PASSES = 400;
