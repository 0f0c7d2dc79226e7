import type { Problem } from '../../fault.js';
import { exp } from '../../numeric/exponential.js';
import type { Datasheet } from '../datasheet.js';
import { Module } from '../module.js';
import type { SingleDiode } from '../single-diode.js';
import { agreements, type Agreement } from './agreement.js';
import { fitExactly, type ExactOutcome, type FifthOutcome } from './exact.js';
import type { FeasibleRange } from './feasible-range.js';
import type { FifthChoice } from './fifth-condition.js';
import type { Remedy } from './infeasible.js';
import { cellIdealityRange, type MethodOutcome } from './outcome.js';
import { fitSimultaneously } from './simultaneous.js';
import { sweepIdeality, type SweepCandidate } from './sweep.js';

/** In the order in which people should try them: see `fitDatasheet`. */
export const FIT_METHODS = ['exact', 'simultaneous', 'sweep'] as const;
export type FitMethod = (typeof FIT_METHODS)[number];

/** A fitted module and how good the fit is. */
export interface Fit extends MethodOutcome {
  readonly method: FitMethod;
  readonly module: Module;
  readonly agreements: readonly Agreement[];
  readonly practice: readonly PracticeCheck[];
  readonly warnings: readonly Problem[];
  /** All candidates of the sweep, in rising order of ideality factor; empty for other methods. */
  readonly candidates: readonly SweepCandidate[];
  /** The ideality factors that have an exact curve: of the exact method, where it finds any. */
  readonly feasible?: FeasibleRange;
  /** What settled A: of the exact method, where it finds a curve. */
  readonly fifth?: FifthOutcome;
  /** Where no curve is exact: changes of one number that would allow one, likeliest first. */
  readonly remedies?: readonly Remedy[];
}

/** A rule of thumb of the trade (common practice, no single source) held against the fit. */
export interface PracticeCheck {
  readonly says: string;
  readonly value: number;
  readonly holds: boolean;
}

/**
 * Fits the five parameters to a datasheet's numbers at STC. The result never depends on a starting
 * guess.
 * @param method
 * - `exact`: three points, a flat peak and a fifth condition (by default the coefficient of Voc);
 *   see `fitExactly`.
 * - `simultaneous`: the same points without a shunt path, or with the slopes given; see
 *   `fitSimultaneously`.
 * - `sweep`: a closed form at each A; see `sweepIdeality`.
 * @param choice What settles A in the exact method; the others know nothing of it.
 * @returns A Fit whose `solved` is false where the datasheet admits no solution.
 * @throws Fault `ARGUMENT` for a choice out of its range; never for a datasheet.
 */
export function fitDatasheet(
  datasheet: Datasheet,
  method: FitMethod = 'exact',
  choice: FifthChoice = {},
): Fit {
  switch (method) {
    case 'exact':
      return exactFit(datasheet, choice);
    case 'simultaneous':
      return complete(method, datasheet, fitSimultaneously(datasheet));
    case 'sweep':
      return sweepFit(datasheet);
  }
}

/** Every method on one datasheet, in the order of FIT_METHODS. */
export const fitByAllMethods = (datasheet: Datasheet, choice: FifthChoice = {}): Fit[] =>
  FIT_METHODS.map((method) => fitDatasheet(datasheet, method, choice));

function exactFit(datasheet: Datasheet, choice: FifthChoice): Fit {
  const outcome = fitExactly(datasheet, choice);
  const fit = complete('exact', datasheet, outcome);
  const missed = conditionWarnings(outcome);
  // A coefficient of voltage missed so far is one thing, and said once.
  return { ...fit, ...outcome, warnings: missed.length > 0 ? missed : fit.warnings };
}

/** A condition missed by more than rounding explains. */
function conditionWarnings({ fifth, feasible, ideality, account }: ExactOutcome): Problem[] {
  if (fifth === undefined || fifth.met || Math.abs(fifth.miss) <= MOST_CONDITION_MISS) return [];
  const isLeast = ideality < 1.0001 * (feasible?.least ?? 0);
  return [
    {
      code: 'CONDITION_MISSED',
      message: `${account}.`,
      hint: isLeast
        ? 'It asks for an A smaller than any junction has: are there too many cells_in_series?'
        : 'Another condition may fit better: `hillproof fit FILE --meet gamma` and the like.',
    },
  ];
}

// Coefficients have two or three digits.
const MOST_CONDITION_MISS = 0.05;

function sweepFit(datasheet: Datasheet): Fit {
  const { outcome, candidates } = sweepIdeality(datasheet);
  return { ...complete('sweep', datasheet, outcome), candidates };
}

function complete(method: FitMethod, datasheet: Datasheet, outcome: MethodOutcome): Fit {
  const module = moduleOf(datasheet, outcome.diode);
  const rows = agreements(module, datasheet);
  return {
    method,
    ...outcome,
    module,
    agreements: rows,
    practice: practiceChecks(datasheet, outcome),
    warnings: outcome.solved ? temperatureWarnings(rows) : [],
    candidates: [],
  };
}

function moduleOf(datasheet: Datasheet, diode: SingleDiode): Module {
  const { name, cellsInSeries, technology, shortCircuitCoefficient } = datasheet;
  return new Module(name, cellsInSeries, diode, { technology, shortCircuitCoefficient });
}

/** The translation takes no coefficient of voltage: it may leave the datasheet's far behind. */
function temperatureWarnings(rows: readonly Agreement[]): Problem[] {
  return rows
    .filter(({ field, miss }) => field === 'beta_voc_mV_per_K' && Math.abs(miss) > MOST_BETA_MISS)
    .map(({ datasheet, model }) => ({
      code: 'TEMPERATURE_MISS',
      message:
        `the datasheet's Voc moves by ${datasheet.toFixed(0)} mV/K, the fitted module's by ` +
        `${model.toFixed(0)} mV/K: curves far from 25 °C will be off.`,
      hint: 'The exact method, the default, meets it where any curve can.',
    }));
}

// Of itself. Over 40 K that is some 3 % of Voc.
const MOST_BETA_MISS = 0.2;

function practiceChecks(datasheet: Datasheet, outcome: MethodOutcome): PracticeCheck[] {
  const { ideality, diode } = outcome;
  const [least, most] = cellIdealityRange(datasheet);
  const checks: PracticeCheck[] = [
    {
      says: `ideality factor between ${least} and ${most}`,
      value: ideality,
      holds: ideality >= least && ideality <= most,
    },
  ];
  if (datasheet.technology.endsWith('-si')) {
    const growth = exp(datasheet.openCircuitVoltage / diode.idealityVoltage);
    checks.push({
      says: 'exp(Voc / VT) of order 1e9 for silicon (1e7 to 1e11)',
      value: growth,
      holds: growth >= 1e7 && growth <= 1e11,
    });
  }
  return checks;
}
