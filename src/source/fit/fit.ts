import type { Problem } from '../../fault.js';
import { exp } from '../../numeric/exponential.js';
import type { Datasheet } from '../datasheet.js';
import { Module } from '../module.js';
import type { SingleDiode } from '../single-diode.js';
import { agreements, type Agreement } from './agreement.js';
import { cellIdealityRange, type MethodOutcome } from './outcome.js';
import { fitSimultaneously } from './simultaneous.js';
import { sweepIdeality, type SweepCandidate } from './sweep.js';

export const FIT_METHODS = ['simultaneous', 'sweep'] as const;
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
 * @param method By default the simultaneous solution; where the datasheet admits none, the sweep,
 * with a warning `NO_EXACT_SOLUTION`.
 * @returns A Fit whose `solved` is false where the datasheet admits no solution; never a Fault.
 */
export function fitDatasheet(datasheet: Datasheet, method?: FitMethod): Fit {
  if (method === 'sweep') return sweepFit(datasheet);
  const outcome = fitSimultaneously(datasheet);
  if (outcome.solved || method === 'simultaneous') {
    return complete('simultaneous', datasheet, outcome);
  }
  const fit = sweepFit(datasheet);
  return fit.solved
    ? { ...fit, warnings: [noExactSolution(fit.account), ...fit.warnings] }
    : { ...fit, ...(outcome.advice === undefined ? {} : { advice: outcome.advice }) };
}

function noExactSolution(account: string): Problem {
  return {
    code: 'NO_EXACT_SOLUTION',
    message: `no curve meets this datasheet exactly; ${account}.`,
    hint: 'It is used. `hillproof fit FILE --method simultaneous` says why none is exact.',
  };
}

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
      hint: 'Ideality factors near 1 agree best; a slope at short circuit brings A down.',
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
