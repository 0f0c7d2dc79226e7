import type { Problem } from '../../fault.js';
import type { Datasheet } from '../datasheet.js';
import { Module } from '../module.js';
import type { SingleDiode } from '../single-diode.js';
import { agreements, type Agreement } from './agreement.js';
import type { MethodOutcome } from './outcome.js';
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
 * Fits the five parameters to a datasheet's numbers at STC.
 *
 * Without a method the simultaneous solution is taken, and where the datasheet admits none, the
 * best candidate of the sweep; a warning says so. The result never depends on a starting guess.
 */
export function fitDatasheet(datasheet: Datasheet, method?: FitMethod): Fit {
  if (method === 'sweep') return sweepFit(datasheet, []);
  const outcome = fitSimultaneously(datasheet);
  if (outcome.solved || method === 'simultaneous') {
    return complete('simultaneous', datasheet, outcome, [], []);
  }
  return sweepFit(datasheet, [
    {
      code: 'NO_EXACT_SOLUTION',
      message: `the simultaneous conditions have no solution: ${outcome.account}`,
      hint: 'The sweep meets them as well as it can; see which numbers it misses.',
    },
  ]);
}

function sweepFit(datasheet: Datasheet, warnings: readonly Problem[]): Fit {
  const { outcome, candidates } = sweepIdeality(datasheet);
  return complete('sweep', datasheet, outcome, candidates, warnings);
}

function complete(
  method: FitMethod,
  datasheet: Datasheet,
  outcome: MethodOutcome,
  candidates: readonly SweepCandidate[],
  warnings: readonly Problem[],
): Fit {
  const module = moduleOf(datasheet, outcome.diode);
  return {
    method,
    ...outcome,
    module,
    agreements: agreements(module, datasheet),
    practice: practiceChecks(datasheet, outcome),
    warnings,
    candidates,
  };
}

/** The module that a datasheet and five parameters at STC make together. */
export function moduleOf(datasheet: Datasheet, diode: SingleDiode): Module {
  const { name, cellsInSeries, technology, shortCircuitCoefficient } = datasheet;
  return new Module(name, cellsInSeries, diode, { technology, shortCircuitCoefficient });
}

function practiceChecks(datasheet: Datasheet, outcome: MethodOutcome): PracticeCheck[] {
  const { ideality, diode } = outcome;
  const checks: PracticeCheck[] = [
    {
      says: 'ideality factor between 1 and 2',
      value: ideality,
      holds: ideality >= 1 && ideality <= 2,
    },
  ];
  if (datasheet.technology.endsWith('-si')) {
    const growth = datasheet.shortCircuitCurrent / diode.saturationCurrent;
    checks.push({
      says: 'exp(Voc / VT) of order 1e9 for silicon (1e7 to 1e11)',
      value: growth,
      holds: growth > 1e7 && growth < 1e11,
    });
  }
  return checks;
}
