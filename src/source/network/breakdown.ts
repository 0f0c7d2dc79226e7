/**
 * Reverse breakdown of a cell after Bishop 1988 (Solar Cells 25:73-89): beside the shunt flows
 *
 *     Ib(u) = u Gb (1 - u / Vbr)^-m,      Vbr < u,
 *
 * a share Gb of the shunt conductance, multiplied as the junction voltage u nears Vbr.
 */
import { exp } from '../../numeric/exponential.js';
import { log } from '../../numeric/logarithm.js';
import type { Amperes, Siemens, Volts } from '../../quantities.js';
import type { Enclosure } from './enclosure.js';

/** Of one cell. Range: conductance > 0, voltage < 0, exponent from 1 to 10; all finite. */
export interface Breakdown {
  /** Gb = share / Rsh. */
  readonly conductance: Siemens;
  /** m. */
  readonly exponent: number;
  /** Vbr: where the current has no limit. */
  readonly voltage: Volts;
}

/** The added current into the cell, of the sign of u; -Infinity at Vbr and below. */
export function breakdownCurrent({ conductance, exponent, voltage }: Breakdown, u: Volts): Amperes {
  const left = 1 - u / voltage;
  return left > 0 ? u * conductance * exp(-exponent * log(left)) : -Infinity;
}

/**
 * dIb/du = Gb (1 - x)^-(m + 1) (1 + (m - 1) x) with x = u / Vbr. Slightly negative for large
 * forward voltages: down to -0.14 Gb, which the shunt exceeds wherever the share is below 7.
 */
export function breakdownConductance(breakdown: Breakdown, u: Volts): Siemens {
  const { conductance, exponent, voltage } = breakdown;
  const x = u / voltage;
  const left = 1 - x;
  if (!(left > 0)) return Infinity;
  return conductance * exp(-(exponent + 1) * log(left)) * (1 + (exponent - 1) * x);
}

/**
 * Adds the range of `breakdownConductance` for junctions from `low` to `high`. Its derivative in x,
 * m (1 - x)^-(m + 2) (2 + (m - 1) x) times Gb, has one zero: there is the least value, and the
 * largest is at an end.
 */
export function encloseBreakdown(
  breakdown: Breakdown,
  low: Volts,
  high: Volts,
  into: Enclosure,
): void {
  const atLow = breakdownConductance(breakdown, low);
  const atHigh = breakdownConductance(breakdown, high);
  const turn = (-2 * breakdown.voltage) / (breakdown.exponent - 1);
  const turns = low < turn && turn < high;
  into.most += Math.max(atLow, atHigh);
  into.least += turns ? breakdownConductance(breakdown, turn) : Math.min(atLow, atHigh);
}
