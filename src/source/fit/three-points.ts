/**
 * The curves through a datasheet's three points, one for each ideality factor: what is left to
 * choose when short circuit, open circuit and peak are met.
 */
import { exp, expm1 } from '../../numeric/exponential.js';
import { findRoot } from '../../numeric/root.js';
import type { Amperes, Ohms } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import { currentAtJunction, type SingleDiode } from '../single-diode.js';
import { idealityVoltageAtStc } from './outcome.js';

/**
 * The curve of ideality factor A through short circuit (with its slope), open circuit and peak.
 * Undefined where none passes through the peak: A is then too large, the knee of its curve too
 * soft even without series resistance.
 *
 * For given A and Rs, short circuit, its slope and open circuit are linear in Iph, I0 and 1/Rsh.
 * The current at Vmp falls with Rs until at Rs = (Voc - Vmp) / Imp nothing is left of it, so Rs has
 * one value where the current without Rs reaches Imp. (Beside a shunt path it may rise by a few
 * thousandths before it falls, which changes nothing where it starts above Imp.)
 */
export function throughThreePoints(
  datasheet: Datasheet,
  ideality: number,
): SingleDiode | undefined {
  const { openCircuitVoltage, peakCurrent, peakVoltage } = datasheet;
  if (peakExcess(datasheet, ideality, 0) < -ROUNDING * peakCurrent) return undefined;
  const most = (openCircuitVoltage - peakVoltage) / peakCurrent;
  const found = findRoot((rs) => peakExcess(datasheet, ideality, rs), 0, most);
  return throughBothEnds(datasheet, ideality, found.status === 'converged' ? found.root : 0);
}

// Of the sums that make up the current at Vmp; at the largest A that fits, Rs is zero but for it.
const ROUNDING = 1e-13;

/** How far the current at Vmp is above Imp on the curve of given A and Rs through both ends. */
export function peakExcess(
  datasheet: Datasheet,
  ideality: number,
  seriesResistance: Ohms,
): Amperes {
  const { peakCurrent, peakVoltage } = datasheet;
  const diode = throughBothEnds(datasheet, ideality, seriesResistance);
  return currentAtJunction(diode, peakVoltage + peakCurrent * seriesResistance) - peakCurrent;
}

/** What of a datasheet the ends of a curve depend on. */
type DatasheetOfEnds = Pick<
  Datasheet,
  'cellsInSeries' | 'shortCircuitCurrent' | 'openCircuitVoltage' | 'slopeAtShortCircuit'
>;

/**
 * Iph, I0 and Gsh that give the short-circuit current, its slope and the open-circuit voltage, for
 * given A and Rs. With u1 = Isc Rs and s the slope's size, these are linear:
 *
 *     Iph - I0 expm1(u1/a) - Gsh u1 = Isc
 *     Iph - I0 expm1(Voc/a) - Gsh Voc = 0
 *     I0 exp(u1/a)/a + Gsh = s / (1 - s Rs)        (or Gsh = 0 where no slope is given)
 *
 * A slope flatter than the diode alone makes it gives no shunt path. Slopes up to the mean from
 * short circuit to the peak leave I0 above zero.
 */
export function throughBothEnds(
  datasheet: DatasheetOfEnds,
  ideality: number,
  seriesResistance: Ohms,
): SingleDiode {
  const { shortCircuitCurrent, openCircuitVoltage, slopeAtShortCircuit } = datasheet;
  const idealityVoltage = idealityVoltageAtStc(datasheet, ideality);
  const u1 = shortCircuitCurrent * seriesResistance;
  const atShort = expm1(u1 / idealityVoltage);
  const rise = expm1(openCircuitVoltage / idealityVoltage) - atShort;
  const complete = (saturationCurrent: Amperes, shuntConductance: number): SingleDiode => ({
    photocurrent: shortCircuitCurrent + saturationCurrent * atShort + shuntConductance * u1,
    saturationCurrent,
    idealityVoltage,
    seriesResistance,
    shuntConductance,
  });
  if (slopeAtShortCircuit !== undefined) {
    const span = openCircuitVoltage - u1;
    const steepness = -slopeAtShortCircuit / (1 + slopeAtShortCircuit * seriesResistance);
    const diodeShare = exp(u1 / idealityVoltage) / idealityVoltage;
    const saturationCurrent = (shortCircuitCurrent - steepness * span) / (rise - diodeShare * span);
    const shuntConductance = steepness - saturationCurrent * diodeShare;
    if (shuntConductance > 0) return complete(saturationCurrent, shuntConductance);
  }
  return complete(shortCircuitCurrent / rise, 0);
}
