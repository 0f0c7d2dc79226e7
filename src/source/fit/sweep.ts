import { exp } from '../../numeric/exponential.js';
import type { Ohms } from '../../quantities.js';
import { argumentFault } from '../../fault.js';
import { globalPeak } from '../curve.js';
import type { Datasheet } from '../datasheet.js';
import { junctionVoltage, type SingleDiode } from '../single-diode.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import { IDEALITY_RANGE, idealityVoltageAtStc, type MethodOutcome } from './outcome.js';

/** One row of the sweep: the closed form at one ideality factor, and what its curve misses. */
export interface SweepCandidate {
  readonly ideality: number;
  readonly diode: SingleDiode;
  /** False where the slope or the peak would need a negative series resistance. */
  readonly feasible: boolean;
  /** (model - datasheet) / datasheet. */
  readonly openCircuitMiss: number;
  readonly peakVoltageMiss: number;
  readonly peakCurrentMiss: number;
  readonly peakPowerMiss: number;
  /** Root of the sum of the four misses squared: what the sweep minimises. */
  readonly badness: number;
}

export interface SweepRange {
  readonly from: number;
  readonly to: number;
  readonly step: number;
}

/** Two hundredths of a percent of power separate neighbours: finer than any datasheet. */
export const DEFAULT_SWEEP: SweepRange = {
  from: IDEALITY_RANGE[0],
  to: IDEALITY_RANGE[1],
  step: 0.01,
};

/**
 * The classical sweep: for each ideality factor A the closed form
 *
 *     I0 = (Isc - Voc / Rsh) / exp(Voc / VT),   Iph = Isc (Rsh + Rs) / Rsh
 *
 * with Rsh from the slope at short circuit (none where no slope is given) and Rs from the slope at
 * open circuit, or from passing through the peak where no slope is given. The candidate whose
 * curve best meets open circuit and peak is taken.
 *
 * The closed form drops the -1 of the diode equation and Isc Rs / Rsh, so short and open circuit
 * are met to about 1e-5 and 1e-3, not exactly: the misses say by how much.
 * @throws Fault `ARGUMENT` for a range that is empty, leaves 0.2 to 5 or has over 10,000 steps.
 */
export function sweepIdeality(
  datasheet: Datasheet,
  range: SweepRange = DEFAULT_SWEEP,
): { readonly outcome: MethodOutcome; readonly candidates: readonly SweepCandidate[] } {
  const candidates = idealities(range).map((ideality) => candidate(datasheet, ideality));
  const better = (a: SweepCandidate, b: SweepCandidate): boolean =>
    a.feasible !== b.feasible ? a.feasible : a.badness < b.badness;
  const best = candidates.reduce((a, b) => (better(b, a) ? b : a));
  const solved = best.feasible && best.badness <= SOLVED_WITHIN;
  return {
    outcome: { solved, ideality: best.ideality, diode: best.diode, account: account(best) },
    candidates,
  };
}

// Datasheets round to three or four figures; what misses by more than 1 % is another curve.
const SOLVED_WITHIN = 0.01;

function idealities({ from, to, step }: SweepRange): number[] {
  if (!(from >= 0.2 && to <= 5 && from <= to)) {
    throw argumentFault('range', 'a rising range within 0.2 to 5', `${from} to ${to}`);
  }
  const count = Math.floor((to - from) / step + 1e-9) + 1;
  if (!(step > 0 && count <= 10_000)) throw argumentFault('step', 'at most 10,000 steps', step);
  return Array.from({ length: count }, (_, index) => from + index * step);
}

function candidate(datasheet: Datasheet, ideality: number): SweepCandidate {
  const { slopeAtShortCircuit, shortCircuitCurrent, openCircuitVoltage } = datasheet;
  const idealityVoltage = idealityVoltageAtStc(datasheet, ideality);
  const closedForm = (seriesResistance: Ohms): SingleDiode => {
    // The slope at short circuit shows Rs + Rsh.
    const shuntConductance =
      slopeAtShortCircuit === undefined
        ? 0
        : -slopeAtShortCircuit / (1 + slopeAtShortCircuit * seriesResistance);
    return {
      photocurrent: shortCircuitCurrent * (1 + seriesResistance * shuntConductance),
      saturationCurrent:
        (shortCircuitCurrent - openCircuitVoltage * shuntConductance) /
        exp(openCircuitVoltage / idealityVoltage),
      idealityVoltage,
      seriesResistance,
      shuntConductance,
    };
  };
  let diode = closedForm(0);
  // Rs moves the other parameters only through Rs / Rsh, so each pass gains about three digits.
  for (let pass = 0; pass < 6; pass++) {
    diode = closedForm(Math.max(seriesResistanceFor(datasheet, diode), 0));
  }
  return judge(datasheet, ideality, diode, seriesResistanceFor(datasheet, diode) >= 0);
}

function seriesResistanceFor(datasheet: Datasheet, diode: SingleDiode): Ohms {
  const { slopeAtOpenCircuit, openCircuitVoltage, peakCurrent, peakVoltage } = datasheet;
  if (slopeAtOpenCircuit === undefined) {
    return (junctionVoltage(diode, peakCurrent) - peakVoltage) / peakCurrent;
  }
  const { saturationCurrent, idealityVoltage } = diode;
  const diodeConductance =
    (saturationCurrent / idealityVoltage) * exp(openCircuitVoltage / idealityVoltage);
  return -1 / slopeAtOpenCircuit - 1 / (diodeConductance + diode.shuntConductance);
}

function judge(
  datasheet: Datasheet,
  ideality: number,
  diode: SingleDiode,
  feasible: boolean,
): SweepCandidate {
  const { openCircuitVoltage, peakVoltage, peakCurrent } = datasheet;
  const curve = new SingleDiodeCurve(diode);
  const peak = globalPeak(curve.peaks());
  const misses = {
    openCircuitMiss: curve.openCircuitVoltage / openCircuitVoltage - 1,
    peakVoltageMiss: peak.voltage / peakVoltage - 1,
    peakCurrentMiss: peak.current / peakCurrent - 1,
    peakPowerMiss: peak.power / (peakVoltage * peakCurrent) - 1,
  };
  const squares = Object.values(misses).reduce((sum, miss) => sum + miss * miss, 0);
  return { ideality, diode, feasible, ...misses, badness: Math.sqrt(squares) };
}

function account(best: SweepCandidate): string {
  const percent = (miss: number): string => `${(100 * miss).toFixed(3)} %`;
  return (
    `the best candidate has A = ${best.ideality.toFixed(3)}` +
    (best.feasible ? '' : ' but would need a negative series resistance') +
    ` and misses Voc by ${percent(best.openCircuitMiss)}, Vmp by ${percent(best.peakVoltageMiss)}, ` +
    `Imp by ${percent(best.peakCurrentMiss)} and Pmp by ${percent(best.peakPowerMiss)}`
  );
}
