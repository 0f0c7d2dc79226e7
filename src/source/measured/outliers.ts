/** Points that do not belong to the curve of the others. */
import { determination } from '../../numeric/determination.js';
import { leastSquares } from '../../numeric/least-squares.js';
import type { Amperes } from '../../quantities.js';
import type { CurveData, MeasuredPoint } from './curve-data.js';
import { residualProblem, residualsAt } from './residuals.js';
import type { SearchBox } from './search-box.js';

export interface Outlier extends MeasuredPoint {
  /** Current of the robust curve less the measured one. */
  readonly residual: Amperes;
  /** The residual over its standard deviation, as the other points show it. */
  readonly studentised: number;
}

export interface OutlierReading {
  readonly outliers: readonly Outlier[];
  /** Standard deviation of the currents by their median residual. */
  readonly noise: Amperes;
  /** What a studentised residual must exceed. */
  readonly limit: number;
  /** False where there are fewer than two points for each parameter: nothing can be told apart. */
  readonly isJudged: boolean;
}

/**
 * A robust curve first: exact residuals, each point weighted down by its own residual until the
 * weights rest, with P. J. Huber's weights to come near and then J. W. Tukey's bisquare, which give
 * a far point no weight at all. The scale is 1.4826 times the median absolute residual (what a
 * normal distribution makes of it), larger by the parameters fitted, and at least a millionth of the
 * span of currents, below which no instrument measures. Each residual is then divided by its own
 * standard deviation, which the fit makes smaller at the ends of the curve.
 *
 * The limit is 4 and grows where points are few, because the scale is then uncertain itself:
 * 4 (1 + 6 / (m - n)) for m points and n parameters. So one curve in thirty to seventy of normal
 * noise shows a point wrongly, by simulation of 20 to 500 points.
 * @param start Parameters of the least-squares optimum.
 */
export function findOutliers(data: CurveData, box: SearchBox, start: Float64Array): OutlierReading {
  const points = data.voltages.length;
  const count = start.length;
  if (points < 2 * count) return { outliers: [], noise: NaN, limit: NaN, isJudged: false };
  const limit = LIMIT * (1 + FEW / (points - count));
  let parameters = start;
  let weights: Float64Array = new Float64Array(points).fill(1);
  for (let pass = 0; pass < HUBER_PASSES + BISQUARE_PASSES; pass++) {
    const residuals = residualsAt('exact', box.scale, data, parameters);
    const noise = noiseOf(residuals, data, count);
    const weigh = pass < HUBER_PASSES ? huber : bisquare;
    const next = residuals.map((residual) => weigh(Math.abs(residual) / noise));
    const change = Math.max(...next.map((weight, i) => Math.abs(weight - weights[i]!)));
    weights = next;
    if (change < SETTLED && pass > HUBER_PASSES) break;
    const problem = residualProblem('exact', box.scale, data, weights.map(Math.sqrt));
    parameters = leastSquares(problem, parameters, { ...box, iterationLimit: 60 }).parameters;
  }
  return { ...judge(data, box, parameters, weights, limit), limit, isJudged: true };
}

const LIMIT = 4;
const FEW = 6;
const HUBER_PASSES = 15;
const BISQUARE_PASSES = 15;
const SETTLED = 1e-3;
/** Ratio of standard deviation to median absolute deviation of a normal distribution. */
const NORMAL_MEDIAN = 1.4826;
const FINEST = 1e-6;
/** Tuning constants for 95 % efficiency with normal noise (common practice). */
const HUBER = 1.345;
const BISQUARE = 4.685;

const huber = (size: number): number => (size <= HUBER ? 1 : HUBER / size);

function bisquare(size: number): number {
  if (size >= BISQUARE) return 0;
  const share = 1 - (size / BISQUARE) * (size / BISQUARE);
  return share * share;
}

function noiseOf(residuals: Float64Array, data: CurveData, count: number): Amperes {
  const sizes = residuals.map(Math.abs).sort();
  const half = sizes.length >> 1;
  const median = sizes.length % 2 === 1 ? sizes[half]! : 0.5 * (sizes[half - 1]! + sizes[half]!);
  const freedom = Math.sqrt(sizes.length / (sizes.length - count));
  return Math.max(NORMAL_MEDIAN * median * freedom, FINEST * data.currentSpan);
}

function judge(
  data: CurveData,
  box: SearchBox,
  parameters: Float64Array,
  weights: Float64Array,
  limit: number,
): { outliers: Outlier[]; noise: Amperes } {
  const count = parameters.length;
  const residuals = residualsAt('exact', box.scale, data, parameters);
  const noise = noiseOf(residuals, data, count);
  const jacobian = new Float64Array(residuals.length * count);
  residualProblem('exact', box.scale, data, weights.map(Math.sqrt)).jacobian(parameters, jacobian);
  const { leverage } = determination(jacobian, count);
  const outliers = data.points.flatMap((point, i) => {
    const own = noise * Math.sqrt(Math.max(1 - leverage[i]!, LEAST_FREEDOM));
    const studentised = residuals[i]! / own;
    return Math.abs(studentised) > limit
      ? [{ ...point, residual: residuals[i]!, studentised }]
      : [];
  });
  return { outliers: outliers.sort((a, b) => (a.line ?? 0) - (b.line ?? 0)), noise };
}

/** A point that alone holds a parameter has no residual; nothing can be said about it. */
const LEAST_FREEDOM = 0.04;
