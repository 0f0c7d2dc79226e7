import { argumentFault } from '../../fault.js';
import type { Datasheet } from '../datasheet.js';
import { globalPeak } from '../curve.js';
import type { SingleDiode } from '../single-diode.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import { TECHNOLOGIES } from '../technology.js';
import { closedForm } from './closed-form.js';
import { IDEALITY_RANGE, signedPercent, type MethodOutcome } from './outcome.js';

/** One row of the sweep: the closed form at one ideality factor, and what its curve misses. */
export interface SweepCandidate {
  /** A of one cell. */
  readonly ideality: number;
  readonly diode: SingleDiode;
  /** False where no positive series resistance or saturation current would do. */
  readonly feasible: boolean;
  /** (model - datasheet) / datasheet. */
  readonly openCircuitMiss: number;
  readonly peakVoltageMiss: number;
  readonly peakCurrentMiss: number;
  readonly peakPowerMiss: number;
  /** Root of the sum of the four misses squared: what the sweep minimises. */
  readonly badness: number;
}

/** Ideality factors of one junction, both ends included; a cell's is that of all its junctions. */
export interface SweepRange {
  readonly from: number;
  readonly to: number;
  readonly step: number;
}

/** Neighbours differ in peak power by less than a hundredth of a percent. */
export const DEFAULT_SWEEP: SweepRange = {
  from: IDEALITY_RANGE[0],
  to: IDEALITY_RANGE[1],
  step: 0.01,
};

/**
 * The classical sweep: a closed form at each ideality factor (see `closedForm`), of which the
 * candidate is taken whose curve best meets open circuit and peak.
 *
 * Solved where its four misses together are below 1 %.
 * @returns The best candidate as the outcome, and all of them in rising order of A.
 * @throws Fault `ARGUMENT` for a range that is empty, leaves 0.2 to 5 or has over 10,000 steps.
 */
export function sweepIdeality(
  datasheet: Datasheet,
  range: SweepRange = DEFAULT_SWEEP,
): { readonly outcome: MethodOutcome; readonly candidates: readonly SweepCandidate[] } {
  const { junctions } = TECHNOLOGIES[datasheet.technology];
  const candidates = idealities(range).map((each) => candidate(datasheet, each * junctions));
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
  // The slack keeps `to` where the division falls just short of a whole number.
  const count = Math.floor((to - from) / step + 1e-9) + 1;
  if (!(step > 0 && count <= 10_000)) {
    throw argumentFault('step', 'above 0, with at most 10,000 of them in the range', step);
  }
  return Array.from({ length: count }, (_, index) => from + index * step);
}

function candidate(datasheet: Datasheet, ideality: number): SweepCandidate {
  const { openCircuitVoltage, peakVoltage, peakCurrent } = datasheet;
  const { diode, feasible } = closedForm(datasheet, ideality);
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
  return (
    `the best candidate of the sweep, A = ${Number(best.ideality.toFixed(4))}` +
    (best.feasible ? '' : ' (which would need a negative series resistance)') +
    `, misses Voc by ${signedPercent(best.openCircuitMiss)}, ` +
    `Vmp by ${signedPercent(best.peakVoltageMiss)}, ` +
    `Imp by ${signedPercent(best.peakCurrentMiss)} and ` +
    `Pmp by ${signedPercent(best.peakPowerMiss)}`
  );
}
