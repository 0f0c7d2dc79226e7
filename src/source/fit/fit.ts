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
    ? { ...fit, warnings: [noExactSolution(fit.account)] }
    : { ...fit, account: `${fit.account}; ${outcome.account}` };
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
  return {
    method,
    ...outcome,
    module,
    agreements: agreements(module, datasheet),
    practice: practiceChecks(datasheet, outcome),
    warnings: [],
    candidates: [],
  };
}

function moduleOf(datasheet: Datasheet, diode: SingleDiode): Module {
  const { name, cellsInSeries, technology, shortCircuitCoefficient } = datasheet;
  return new Module(name, cellsInSeries, diode, { technology, shortCircuitCoefficient });
}

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
