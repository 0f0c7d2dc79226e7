/** Bounds of the fitted parameters over a box of datasheets, by enclosing their derivatives. */
import { log } from '../../numeric/logarithm.js';
import { Interval } from '../../numeric/interval.js';
import type { IntervalGradient } from '../../numeric/interval-gradient.js';
import type { SingleDiode } from '../single-diode.js';
import { exactCurve, type ThreePoints } from './exact-curves.js';
import { encloseExactCurve, type ExactEnclosure } from './exact-enclosure.js';

/** What of a datasheet is rounded: Isc, Voc, Imp, Vmp, alpha, the fifth condition's number. */
export type DatasheetPoint = readonly number[];
/** An interval for each of them. */
export type DatasheetBox = readonly Interval[];

/** What settles the knee span of a curve: the fifth condition, or an end of the feasible range. */
export interface Branch {
  /** Zero where a curve belongs to the branch; over a box. */
  residual(curve: ExactEnclosure): IntervalGradient;
  /** The knee span of the branch's curve for one datasheet; NaN if there is none near. */
  span(point: DatasheetPoint): number;
}

/** Of I0 the logarithm, which moves evenly where I0 itself moves by factors. */
export const PARAMETERS = [
  'photocurrent',
  'logSaturationCurrent',
  'idealityVoltage',
  'seriesResistance',
  'shuntConductance',
] as const;
export type ParameterName = (typeof PARAMETERS)[number];

/** The parameters of a branch's curves over a box of datasheets, each within its interval. */
export type ParameterIntervals = Readonly<Record<ParameterName, Interval>>;

export interface BoxEnclosure {
  /** Undefined where the box is too wide. */
  readonly parameters?: ParameterIntervals;
  /** At most how large a part of any parameter's width may be due to the enclosure. */
  readonly looseness: number;
  /** The variable that moves the curve most: where to split. */
  readonly widest: number;
}

/**
 * Encloses the five parameters of a branch over a box.
 *
 * The knee span p(x) of the datasheet x solves f(p, x) = 0. Write p = p0 + l · (x - c) + r, with p0
 * that of the centre c and l roughly its gradient there. With derivatives of f enclosed over a trial
 * interval R of r and the box,
 *
 *     r(x) lies in -(f(p0, c) + grad_x f · (x - c)) / (df/dr),
 *
 * and where that lies inside R, a solution exists in R for every x of the box and only one (the
 * interval Newton argument). Then dy/dx = y_x - y_r f_x / f_r encloses each parameter's derivatives
 * over the box. By a variable whose derivative keeps its sign the parameter is extreme at an end of
 * it; what the others can add is their radius times the largest size of the derivative.
 */
export function encloseBranch(branch: Branch, box: DatasheetBox): BoxEnclosure {
  const centre = box.map(({ low, high }) => 0.5 * (low + high));
  const span = branch.span(centre);
  if (Number.isNaN(span)) return { looseness: Infinity, widest: widestOf(box, centre) };
  const { found, spanSlopes } = derivatives(branch, box, centre, span);
  const widest = widestOf(box, spanSlopes);
  const curves = new Map<string, ParameterValues | undefined>();
  const valuesAt = (point: DatasheetPoint): ParameterValues | undefined => {
    const key = point.join();
    if (!curves.has(key)) curves.set(key, parametersAt(branch, point));
    return curves.get(key);
  };
  const parameters: Partial<Record<ParameterName, Interval>> = {};
  let looseness = 0;
  for (const name of PARAMETERS) {
    const slopes = found?.[name];
    const extreme = slopes && extremes(box, centre, slopes, (point) => valuesAt(point)?.[name]);
    if (extreme === undefined) return { looseness: Infinity, widest };
    parameters[name] = extreme.interval;
    looseness = Math.max(looseness, extreme.looseness);
  }
  return { parameters: parameters as ParameterIntervals, looseness, widest };
}

/** The variable whose radius times slope is largest. */
function widestOf(box: DatasheetBox, slopes: readonly number[]): number {
  const effects = box.map(({ low, high }, i) => (high - low) * Math.abs(slopes[i]!));
  return effects.indexOf(Math.max(...effects));
}

/** What `exactCurve` needs of a point. */
export const pointsOf = ([isc, voc, imp, vmp]: DatasheetPoint): ThreePoints => ({
  shortCircuitCurrent: isc!,
  openCircuitVoltage: voc!,
  peakCurrent: imp!,
  peakVoltage: vmp!,
});

type ParameterValues = Readonly<Record<ParameterName, number>>;

function parametersAt(branch: Branch, point: DatasheetPoint): ParameterValues | undefined {
  const span = branch.span(point);
  return Number.isNaN(span) ? undefined : parametersOf(exactCurve(pointsOf(point), span).diode);
}

export const parametersOf = (diode: SingleDiode): ParameterValues => ({
  photocurrent: diode.photocurrent,
  logSaturationCurrent: log(diode.saturationCurrent),
  idealityVoltage: diode.idealityVoltage,
  seriesResistance: diode.seriesResistance,
  shuntConductance: diode.shuntConductance,
});

type Derivatives = Readonly<Record<ParameterName, readonly Interval[]>>;

function derivatives(
  branch: Branch,
  box: DatasheetBox,
  centre: DatasheetPoint,
  span: number,
): { readonly found?: Derivatives; readonly spanSlopes: readonly number[] } {
  const offsets = box.map((each, i) => each.minus(Interval.point(centre[i]!)));
  const enclosed = (
    spanOffset: Interval,
    of: readonly Interval[],
    spanSlopes: readonly number[],
  ) => {
    const around = { centre: [span, ...centre], offsets: [spanOffset, ...of] };
    const curve = encloseExactCurve(around, spanSlopes);
    const [bySpan, ...byPoint] = branch.residual(curve).slopes as [Interval, ...Interval[]];
    return { curve, residual: branch.residual(curve).atCentre, bySpan, byPoint };
  };
  // How the span moves with the datasheet near the centre: no need for it to be sound.
  const still = enclosed(
    NONE,
    box.map(() => NONE),
    box.map(() => 0),
  );
  const spanSlopes = still.byPoint.map((slope) => -slope.low / still.bySpan.low);
  let trial = Interval.around(0, FIRST_TRIAL * span);
  for (let pass = 0; pass < MOST_TRIALS; pass += 1) {
    const { curve, residual, bySpan, byPoint } = enclosed(trial, offsets, spanSlopes);
    if (!bySpan.hasSign) break;
    const moved = byPoint.reduce((sum, slope, i) => sum.plus(slope.times(offsets[i]!)), residual);
    const rest = NONE.minus(moved.over(bySpan));
    if (trial.includes(rest)) {
      return { found: totalDerivatives(curve, bySpan, byPoint), spanSlopes };
    }
    if (!(WIDER * rest.magnitude < span)) break;
    trial = Interval.around(0, WIDER * rest.magnitude);
  }
  return { spanSlopes };
}

const NONE = Interval.point(0);
const FIRST_TRIAL = 1e-9;
const WIDER = 1.2;
// The first trial tells the width, the second and third settle it; wider boxes are split instead.
const MOST_TRIALS = 6;

function totalDerivatives(
  curve: ExactEnclosure,
  bySpan: Interval,
  byPoint: readonly Interval[],
): Derivatives {
  const spanBy = byPoint.map((slope) => slope.over(bySpan));
  const of = (name: ParameterName): Interval[] => {
    const [first, ...rest] = curve[name].slopes as [Interval, ...Interval[]];
    return rest.map((slope, i) => slope.minus(first.times(spanBy[i]!)));
  };
  return {
    photocurrent: of('photocurrent'),
    logSaturationCurrent: of('logSaturationCurrent'),
    idealityVoltage: of('idealityVoltage'),
    seriesResistance: of('seriesResistance'),
    shuntConductance: of('shuntConductance'),
  };
}

function extremes(
  box: DatasheetBox,
  centre: DatasheetPoint,
  slopes: readonly Interval[],
  valueAt: (point: DatasheetPoint) => number | undefined,
): { readonly interval: Interval; readonly looseness: number } | undefined {
  let slack = 0;
  const lowest = [...centre];
  const highest = [...centre];
  for (const [i, slope] of slopes.entries()) {
    const { low, high } = box[i]!;
    if (slope.hasSign) {
      lowest[i] = slope.low > 0 ? low : high;
      highest[i] = slope.low > 0 ? high : low;
    } else if (high > low) {
      slack += slope.magnitude * 0.5 * (high - low);
    }
  }
  const [least, most] = [valueAt(lowest), valueAt(highest)];
  if (least === undefined || most === undefined || !(slack < Infinity)) return undefined;
  const size = Math.max(Math.abs(least), Math.abs(most));
  const rounding = SOLVER_ERROR * size;
  return {
    interval: new Interval(least - slack - rounding, most + slack + rounding),
    looseness: slack / (most - least + NO_MATTER * size),
  };
}

// Of the curve of one datasheet: a thousand times what tests find.
const SOLVER_ERROR = 1e-9;
/** Of itself: a parameter that moves less is bounded well enough. */
const NO_MATTER = 1e-3;
