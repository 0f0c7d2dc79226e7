import { findRoot } from '../../numeric/root.js';
import { exactCurve, type ExactCurve, type ThreePoints } from './exact-curves.js';
import {
  feasibleRange,
  junctionLimits,
  limitsFor,
  type FeasibleRange,
  type FeasibleSpans,
  type Infeasibility,
} from './feasible-range.js';
import {
  fifthCondition,
  type DatasheetOfPoints,
  type FifthChoice,
  type FifthCondition,
} from './fifth-condition.js';
import { diagnose, type Remedy } from './infeasible.js';
import { idealityVoltageAtStc, signedPercent, type MethodOutcome } from './outcome.js';
import { throughBothEnds } from './three-points.js';

/** What the exact method makes of a datasheet. */
export interface ExactOutcome extends MethodOutcome {
  /** The ideality factors that have an exact curve; absent where no curve is exact. */
  readonly feasible?: FeasibleRange;
  /** What settled A; absent where no curve is exact. */
  readonly fifth?: FifthOutcome;
  /** Where no curve is exact: the changes of one number that would allow one, likeliest first. */
  readonly remedies?: readonly Remedy[];
}

/** The condition that settled A, and how well it is met. */
export interface FifthOutcome {
  readonly name: FifthCondition['name'];
  /** What the datasheet (or the caller) says, in SI units. */
  readonly wanted: number;
  /** The same of the fitted curve. */
  readonly value: number;
  /** (value - wanted) / |wanted|; the value itself where 0 is wanted. */
  readonly miss: number;
  /** False where it is met nowhere in the feasible range: A is then at the nearer end. */
  readonly met: boolean;
}

/**
 * Short circuit, open circuit, Imp at Vmp and no slope of power there, all exactly; what is then
 * left to choose, the ideality factor, by a fifth condition: see `FifthChoice`.
 *
 * For each A there is one such curve or none, in closed form, and the feasible A are an interval
 * (exact-curves.ts derives and proves both). So there is no starting guess, it is always known whether a
 * solution exists, and what ends the feasible range. A beta, gamma or slope that no A of the range
 * meets is missed by as little as possible; the outcome says by how much.
 *
 * Along the range the voltage that the curve says of open circuit at another temperature, its peak
 * power there and its slopes run one way (held by properties over random modules), so a condition is
 * met once or nowhere.
 *
 * Accuracy where solved: the three points to 1e-9 relative, the slope of power at the peak to 1e-9
 * of Imp (held at 1e-11 by tests); beta to 1e-9 of itself where it is met.
 * @throws Fault `ARGUMENT` for a choice out of its range.
 */
export function fitExactly(datasheet: DatasheetOfPoints, choice: FifthChoice = {}): ExactOutcome {
  const condition = fifthCondition(datasheet, choice);
  const range = feasibleRange(datasheet, limitsFor(datasheet, choice.ideality));
  if ('failure' in range) return infeasible(datasheet, range);
  const { curve, met } = settle(datasheet, range, condition);
  const { diode } = curve;
  const ideality = diode.idealityVoltage / idealityVoltageAtStc(datasheet, 1);
  const fifth = outcomeOf(condition, curve, met);
  const { least, leastEnd, most, mostEnd } = range;
  return {
    solved: true,
    ideality,
    diode,
    account: account(fifth, ideality, range),
    feasible: { least, leastEnd, most, mostEnd },
    fifth,
  };
}

/** The curve of the range that meets the condition, or the end that misses it less. */
function settle(
  points: ThreePoints,
  range: FeasibleSpans,
  condition: FifthCondition,
): { readonly curve: ExactCurve; readonly met: boolean } {
  const { spanAtLeast, spanAtMost } = range;
  const curveOf = (span: number): ExactCurve => withoutRounding(exactCurve(points, span), range);
  const found = findRoot((span) => condition.residual(curveOf(span)), spanAtMost, spanAtLeast);
  if (found.status === 'converged') return { curve: curveOf(found.root), met: true };
  const miss = (curve: ExactCurve): number => Math.abs(condition.value(curve) - condition.wanted);
  const [top, bottom] = [curveOf(spanAtMost), curveOf(spanAtLeast)];
  const curve = miss(top) <= miss(bottom) ? top : bottom;
  // The caller may ask for an end, or a datasheet lie on one, to within rounding.
  return { curve, met: miss(curve) <= AT_END * Math.abs(condition.wanted) };
}

const AT_END = 1e-9;

/** At the end where Rs or 1/Rsh is zero, it is zero. */
function withoutRounding(
  curve: ExactCurve,
  { spanAtMost, mostEnd }: Pick<FeasibleSpans, 'spanAtMost' | 'mostEnd'>,
): ExactCurve {
  const { diode } = curve;
  const isAtEnd = curve.kneeSpan <= spanAtMost;
  const seriesResistance =
    isAtEnd && mostEnd === 'series-resistance' ? 0 : Math.max(diode.seriesResistance, 0);
  const shuntConductance =
    isAtEnd && mostEnd === 'shunt-path' ? 0 : Math.max(diode.shuntConductance, 0);
  return { ...curve, diode: { ...diode, seriesResistance, shuntConductance } };
}

function outcomeOf(condition: FifthCondition, curve: ExactCurve, met: boolean): FifthOutcome {
  const { name, wanted } = condition;
  const value = condition.value(curve);
  return { name, wanted, value, met, miss: relative(value, wanted) };
}

const relative = (value: number, wanted: number): number =>
  wanted === 0 ? value : (value - wanted) / Math.abs(wanted);

function account(fifth: FifthOutcome, ideality: number, range: FeasibleRange): string {
  const [least, most] = [range.least.toFixed(3), range.most.toFixed(3)];
  const settled = fifth.met
    ? `${SETTLES[fifth.name]} A = ${ideality.toFixed(4)}`
    : `A = ${ideality.toFixed(4)} comes nearest to ${WANTS[fifth.name]}, ` +
      `which it misses by ${signedPercent(fifth.miss)}`;
  return (
    `short circuit, open circuit and the peak are met exactly for A from ${least} to ${most} ` +
    `(${END_TITLES[range.mostEnd]}); ${settled}`
  );
}

const WANTS = {
  beta: 'the coefficient of Voc',
  gamma: 'the coefficient of peak power',
  'slope-at-isc': 'the slope at short circuit',
  'slope-at-voc': 'the slope at open circuit',
  typical: "the technology's typical A",
  ideality: 'the A asked for',
} as const;

const SETTLES = {
  beta: 'the coefficient of Voc settles',
  gamma: 'the coefficient of peak power settles',
  'slope-at-isc': 'the slope at short circuit settles',
  'slope-at-voc': 'the slope at open circuit settles',
  typical: 'the technology is taken to have',
  ideality: 'the caller asks for',
} as const;

const END_TITLES = {
  'series-resistance': 'there no series resistance is left',
  'shunt-path': 'there no shunt path is left',
  junction: 'the most of a junction',
  'saturation-current': 'the least that double numbers carry',
} as const;

/** The nearest curve: exact but with an A too small, or without resistances. */
function infeasible(datasheet: DatasheetOfPoints, why: Infeasibility): ExactOutcome {
  const diagnosis = diagnose(datasheet, why);
  if (why.failure === 'knee' && why.most >= LEAST_WORTH_SHOWING) {
    const end = { spanAtMost: why.span, mostEnd: why.mostEnd };
    const { diode } = withoutRounding(exactCurve(datasheet, why.span), end);
    return { solved: false, ideality: why.most, diode, ...diagnosis };
  }
  const [ideality] = junctionLimits(datasheet);
  const diode = throughBothEnds(datasheet, ideality, 0);
  return { solved: false, ideality, diode, ...diagnosis };
}

/** Of A: model files hold none below, and none below is near a module. */
const LEAST_WORTH_SHOWING = 0.1;
