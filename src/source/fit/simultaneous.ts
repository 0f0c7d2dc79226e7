import { expm1, exp } from '../../numeric/exponential.js';
import { findRoot } from '../../numeric/root.js';
import type { Ohms } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import { currentAtJunction, slopeAtJunction, type SingleDiode } from '../single-diode.js';
import { IDEALITY_RANGE, idealityVoltageAtStc, type MethodOutcome } from './outcome.js';

/**
 * The simultaneous solution for I0, A and Rs from three conditions:
 *
 *     open circuit        I(Voc) = 0
 *     peak                I(Vmp) = Imp
 *     series resistance   dI/dV at open circuit is the given slope; where no slope is given,
 *                         dP/dV at Vmp is zero, so that the curve peaks at the datasheet's peak
 *
 * Short circuit fixes Iph, and the slope at short circuit Rsh (no shunt path where none is given).
 *
 * The three are not handed to a multidimensional iteration: for given A and Rs, short circuit, its
 * slope and open circuit are linear in Iph, I0 and 1/Rsh; the current at Vmp then falls strictly
 * with Rs, so the peak condition has one root or none; and the last condition is one equation in
 * A, searched over its whole range. So it is always known whether a solution exists, and no
 * starting guess is needed.
 *
 * Accuracy where solved: each condition met to 1e-9 relative.
 */
export function fitSimultaneously(datasheet: Datasheet): MethodOutcome {
  const lastCondition = conditionFor(datasheet);
  const miss = (ideality: number): number => {
    const diode = throughThePoints(datasheet, ideality);
    return diode === undefined ? NaN : lastCondition.miss(diode);
  };
  const [least, most] = IDEALITY_RANGE;
  const ideality = firstRoot(miss, least, most);
  if (ideality !== undefined) {
    return {
      solved: true,
      ideality,
      diode: throughThePoints(datasheet, ideality)!,
      account: `open circuit, peak and ${lastCondition.name} are met together at A = ${ideality.toFixed(4)}`,
    };
  }
  return nearestMiss(datasheet, lastCondition, miss);
}

interface LastCondition {
  readonly name: string;
  /** Zero where the condition is met; relative, so that misses compare. */
  miss(diode: SingleDiode): number;
  describe(miss: number): string;
}

function conditionFor(datasheet: Datasheet): LastCondition {
  const { slopeAtOpenCircuit: slope, openCircuitVoltage, peakCurrent, peakVoltage } = datasheet;
  const percent = (miss: number): string => `${(100 * miss).toFixed(2)} %`;
  if (slope !== undefined) {
    return {
      name: 'the slope at open circuit',
      miss: (diode) => slopeAtJunction(diode, openCircuitVoltage) / slope - 1,
      describe: (miss) => `the slope at open circuit is off by ${percent(miss)}`,
    };
  }
  return {
    name: 'the zero slope of power at the peak',
    // dP/dV = I + V dI/dV, over Imp.
    miss: (diode) => {
      const u = peakVoltage + peakCurrent * diode.seriesResistance;
      return 1 + (peakVoltage * slopeAtJunction(diode, u)) / peakCurrent;
    },
    describe: (miss) =>
      `power still ${miss > 0 ? 'rises' : 'falls'} at Vmp, by ${percent(Math.abs(miss))} of Imp for each volt per volt`,
  };
}

/** The curve through short circuit, open circuit and peak at one ideality factor, if there is one. */
function throughThePoints(datasheet: Datasheet, ideality: number): SingleDiode | undefined {
  const { openCircuitVoltage, peakCurrent, peakVoltage } = datasheet;
  const excess = (seriesResistance: Ohms): number => {
    const diode = throughBothEnds(datasheet, ideality, seriesResistance);
    return currentAtJunction(diode, peakVoltage + peakCurrent * seriesResistance) - peakCurrent;
  };
  // At the upper end the junction would stand at Voc, where no current is left for the peak.
  const most = (openCircuitVoltage - peakVoltage) / peakCurrent;
  if (!(excess(0) >= 0)) return undefined;
  const found = findRoot(excess, 0, most);
  if (found.status !== 'converged') return undefined;
  const diode = throughBothEnds(datasheet, ideality, found.root);
  return diode.saturationCurrent > 0 && diode.shuntConductance >= 0 ? diode : undefined;
}

/**
 * Iph, I0 and Gsh that give the short-circuit current, its slope and the open-circuit voltage, for
 * given A and Rs. With u1 = Isc Rs and s the slope's size, these are linear:
 *
 *     Iph - I0 expm1(u1/a) - Gsh u1 = Isc
 *     Iph - I0 expm1(Voc/a) - Gsh Voc = 0
 *     I0 exp(u1/a)/a + Gsh = s / (1 - s Rs)        (or Gsh = 0 where no slope is given)
 */
function throughBothEnds(
  datasheet: Datasheet,
  ideality: number,
  seriesResistance: Ohms,
): SingleDiode {
  const { shortCircuitCurrent, openCircuitVoltage, slopeAtShortCircuit } = datasheet;
  const a = idealityVoltageAtStc(datasheet, ideality);
  const u1 = shortCircuitCurrent * seriesResistance;
  const span = openCircuitVoltage - u1;
  const atShort = expm1(u1 / a);
  const rise = expm1(openCircuitVoltage / a) - atShort;
  const steepness =
    slopeAtShortCircuit === undefined
      ? 0
      : -slopeAtShortCircuit / (1 + slopeAtShortCircuit * seriesResistance);
  const diodeShare = slopeAtShortCircuit === undefined ? 0 : exp(u1 / a) / a;
  const saturationCurrent = (shortCircuitCurrent - steepness * span) / (rise - diodeShare * span);
  const shuntConductance = steepness - saturationCurrent * diodeShare;
  return {
    photocurrent: shortCircuitCurrent + saturationCurrent * atShort + shuntConductance * u1,
    saturationCurrent,
    idealityVoltage: a,
    seriesResistance,
    shuntConductance,
  };
}

const SCAN_STEP = 0.02;

/** The lowest root of `miss` in a range; NaN marks values at which no curve exists. */
function firstRoot(
  miss: (ideality: number) => number,
  least: number,
  most: number,
): number | undefined {
  const steps = Math.round((most - least) / SCAN_STEP);
  let previous = miss(least);
  if (previous === 0) return least;
  for (let step = 1; step <= steps; step++) {
    const low = least + (step - 1) * SCAN_STEP;
    const high = least + step * SCAN_STEP;
    const value = miss(high);
    if (previous * value <= 0) {
      const found = findRoot(miss, low, high);
      if (found.status === 'converged') return found.root;
    }
    previous = value;
  }
  return undefined;
}

function nearestMiss(
  datasheet: Datasheet,
  condition: LastCondition,
  miss: (ideality: number) => number,
): MethodOutcome {
  const [least, most] = IDEALITY_RANGE;
  const scan = Array.from({ length: 101 }, (_, index) => least + (index * (most - least)) / 100)
    .map((ideality) => ({ ideality, miss: miss(ideality) }))
    .filter((row) => !Number.isNaN(row.miss));
  const elsewhere = firstRoot(miss, 0.4, 4);
  const outside =
    elsewhere === undefined ? '' : `; all would be met at A = ${elsewhere.toFixed(3)}`;
  if (scan.length === 0) {
    const diode = { ...throughBothEnds(datasheet, least, 0) };
    const short = currentAtJunction(diode, datasheet.peakVoltage) / datasheet.peakCurrent - 1;
    return {
      solved: false,
      ideality: least,
      diode,
      account:
        `for no A from ${least} to ${most} does a curve with Rs >= 0 pass through all three ` +
        `points; at A = ${least} and Rs = 0 it misses Imp at Vmp by ${(100 * short).toFixed(2)} %${outside}`,
    };
  }
  const best = scan.reduce((a, b) => (Math.abs(b.miss) < Math.abs(a.miss) ? b : a));
  return {
    solved: false,
    ideality: best.ideality,
    diode: throughThePoints(datasheet, best.ideality)!,
    account:
      `for no A from ${least} to ${most} are all conditions met; nearest is A = ` +
      `${best.ideality.toFixed(3)}, where ${condition.describe(best.miss)}${outside}`,
  };
}
