/** Fits the single- or double-diode equation to a measured curve, from the data alone. */
import { argumentFault } from '../../fault.js';
import { exp } from '../../numeric/exponential.js';
import type { LeastSquaresResult } from '../../numeric/least-squares-problem.js';
import { thermalVoltage, type Amperes, type Kelvin, type Volts } from '../../quantities.js';
import type { Diode } from '../double-diode.js';
import { DoubleDiodeCurve } from '../double-diode-curve.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import { curveData, refusal, subset, type CurveData, type MeasuredPoint } from './curve-data.js';
import {
  IDEALITY,
  PER_DIODE,
  PHOTOCURRENT,
  REFERENCE_CURRENT,
  SERIES_RESISTANCE,
  SHUNT_CONDUCTANCE,
  type BalanceScale,
} from './diode-balance.js';
import { estimates, type Estimate } from './estimates.js';
import { findOutliers, type Outlier } from './outliers.js';
import { implicitStretch, residualsAt, type ResidualConvention } from './residuals.js';
import { CONFIRMATIONS, searchOptimum, type SearchResult } from './search.js';
import { searchBox, type SearchBox } from './search-box.js';

export type DiodeModel = 'single' | 'double';

export interface MeasuredFitOptions {
  /** Cells in series, 1 to 400: the ideality is that of one cell. */
  readonly cellsInSeries: number;
  readonly cellTemperature: Kelvin;
  /** Default single. */
  readonly model?: DiodeModel;
  /** What is minimised. Default exact. */
  readonly residual?: ResidualConvention;
  /** Junctions stacked in a cell; their idealities add. Default 1. */
  readonly junctions?: number;
  /** Leaves out what does not belong to the curve of the others, once, and says so. */
  readonly withoutOutliers?: boolean;
}

export interface FittedPoint extends MeasuredPoint {
  /** Current of the model less the measured one. */
  readonly residual: Amperes;
}

export interface MeasuredFit {
  readonly model: DiodeModel;
  readonly residual: ResidualConvention;
  readonly curve: SingleDiodeCurve | DoubleDiodeCurve;
  readonly cellsInSeries: number;
  readonly cellTemperature: Kelvin;
  readonly estimates: readonly Estimate[];
  /** Root mean square of the residuals of the points fitted, in both conventions. */
  readonly rms: Readonly<Record<ResidualConvention, Amperes>>;
  /** Standard deviation of the currents that the fit leaves unexplained; NaN with none to spare. */
  readonly noise: Amperes;
  /** Points fitted, in rising order of voltage. */
  readonly points: readonly FittedPoint[];
  /** What does not belong to the curve of the others, by line. */
  readonly outliers: readonly Outlier[];
  /** Whether there were points enough to tell outliers. */
  readonly outliersJudged: boolean;
  /** Whether the outliers were left out of the fit. */
  readonly outliersLeftOut: boolean;
  readonly search: {
    readonly isConfirmed: boolean;
    /** Starts tried, and how many of them led to this optimum. */
    readonly tried: number;
    readonly agreeing: number;
    readonly end: LeastSquaresResult['end'];
  };
}

/**
 * The global optimum of the search box (see `searchBox`) as far as searches from all over it show:
 * linear least squares on a grid of idealities and series resistances, then nonlinear searches from
 * the best places until at least three of eight or more have ended in the best one.
 *
 * Points may come in any order, be repeated, and lie beyond either end of the first quadrant; the
 * order does not change a bit of the result. Standard errors rest on equal, independent errors of
 * the currents and exact voltages; for implicit residuals they allow for their unequal weight.
 *
 * Accuracy: the parameters of a single-diode optimum to 1e-9 of themselves, its root mean square to
 * 1e-12 (held against 40-digit arithmetic on two published curves of 25 points). Two diodes make a
 * flatter valley: currents of the diodes to about 1e-6 of themselves.
 * @throws Fault `ARGUMENT`; `MEASURED_CURVE` for curves that cannot be fitted: fewer different
 * voltages than parameters, rising currents, or more than a fifth of the points to be left out.
 */
export function fitMeasuredCurve(
  measured: readonly MeasuredPoint[],
  options: MeasuredFitOptions,
): MeasuredFit {
  const { model = 'single', residual = 'exact', junctions = 1 } = options;
  checkOptions(options);
  const perIdeality = options.cellsInSeries * thermalVoltage(options.cellTemperature);
  const all = curveData(measured);
  const first = optimum(all, model, residual, perIdeality, junctions);
  const reading = findOutliers(all, first.box, first.search.best.parameters);
  const leavesOut = options.withoutOutliers === true && reading.outliers.length > 0;
  const { search, box, data } = leavesOut
    ? optimum(without(all, reading.outliers), model, residual, perIdeality, junctions)
    : first;
  const { best } = search;
  const count = data.points.length;
  const exact = residualsAt('exact', box.scale, data, best.parameters);
  const implicit = residualsAt('implicit', box.scale, data, best.parameters);
  const freedom = count - best.held.filter((isHeld) => !isHeld).length;
  const stretch =
    residual === 'implicit' ? implicitStretch(box.scale, data, best.parameters) : undefined;
  const noise = freedom > 0 ? rootMeanSquare(exact) * Math.sqrt(count / freedom) : NaN;
  return {
    model,
    residual,
    curve: curveOf(best.parameters, box.scale),
    cellsInSeries: options.cellsInSeries,
    cellTemperature: options.cellTemperature,
    estimates: estimates(best, box.scale, noise, stretch),
    rms: { exact: rootMeanSquare(exact), implicit: rootMeanSquare(implicit) },
    noise,
    points: data.points.map((point, i) => ({ ...point, residual: exact[i]! })),
    outliers: reading.outliers,
    outliersJudged: reading.isJudged,
    outliersLeftOut: leavesOut,
    search: {
      isConfirmed: best.isSolution && search.agreeing >= CONFIRMATIONS,
      tried: search.tried,
      agreeing: search.agreeing,
      end: best.end,
    },
  };
}

function checkOptions({ cellsInSeries, cellTemperature, junctions = 1 }: MeasuredFitOptions): void {
  if (!(Number.isInteger(cellsInSeries) && cellsInSeries >= 1 && cellsInSeries <= 400)) {
    throw argumentFault('cellsInSeries', 'a whole number from 1 to 400', cellsInSeries);
  }
  if (!(cellTemperature >= 173.15 && cellTemperature <= 473.15)) {
    throw argumentFault('cellTemperature', 'from 173.15 to 473.15 K', cellTemperature);
  }
  if (!(Number.isInteger(junctions) && junctions >= 1 && junctions <= 6)) {
    throw argumentFault('junctions', 'a whole number from 1 to 6', junctions);
  }
}

interface Optimum {
  readonly data: CurveData;
  readonly box: SearchBox;
  readonly search: SearchResult;
}

function optimum(
  data: CurveData,
  model: DiodeModel,
  residual: ResidualConvention,
  perIdeality: Volts,
  junctions: number,
): Optimum {
  const single = searchBox(data, 1, perIdeality, junctions);
  const box = model === 'single' ? single : searchBox(data, 2, perIdeality, junctions);
  const needed = box.lower.length;
  const different = new Set(data.voltages).size;
  if (different < needed) {
    throw refusal(
      `has ${different} different voltages; the ${needed} parameters of the ${model}-diode ` +
        'equation need at least as many.',
    );
  }
  if (model === 'single') return { data, box, search: searchOptimum(residual, data, box) };
  const alone = searchOptimum(residual, data, single).best.parameters;
  const known = box.ideality.map((idle) => Float64Array.of(...alone, 0, idle));
  const search = searchOptimum(residual, data, box, known);
  return { data, box, search: { ...search, best: inOrder(search.best) } };
}

/** The diode of smaller ideality first; one that carries nothing last. */
function inOrder(best: LeastSquaresResult): LeastSquaresResult {
  const { parameters, jacobian, held } = best;
  const [n1, n2] = [parameters[IDEALITY]!, parameters[IDEALITY + PER_DIODE]!];
  const [j1, j2] = [parameters[REFERENCE_CURRENT]!, parameters[REFERENCE_CURRENT + PER_DIODE]!];
  if (j1 > 0 && (j2 === 0 || n1 <= n2)) return best;
  const from = [...parameters.keys()].map((j) =>
    j < REFERENCE_CURRENT ? j : j < REFERENCE_CURRENT + PER_DIODE ? j + PER_DIODE : j - PER_DIODE,
  );
  const width = parameters.length;
  return {
    ...best,
    parameters: Float64Array.from(from, (j) => parameters[j]!),
    held: from.map((j) => held[j]!),
    jacobian: jacobian.map((_, at) => jacobian[at - (at % width) + from[at % width]!]!),
  };
}

function without(data: CurveData, outliers: readonly Outlier[]): CurveData {
  if (outliers.length > data.points.length / 5) {
    throw refusal(
      `would lose ${outliers.length} of its ${data.points.length} points as outliers; at most a ` +
        'fifth may be left out.',
      undefined,
      'So many points off the curve mean that it is not the curve of one evenly lit source.',
    );
  }
  const key = ({ voltage, current, line }: MeasuredPoint): string =>
    `${voltage} ${current} ${line ?? ''}`;
  const out = new Set(outliers.map(key));
  return subset(data, (index) => !out.has(key(data.points[index]!)));
}

function curveOf(
  parameters: Float64Array,
  scale: BalanceScale,
): SingleDiodeCurve | DoubleDiodeCurve {
  const diode = (offset: number): Diode => {
    const idealityVoltage = scale.perIdeality * parameters[IDEALITY + offset]!;
    const carried = parameters[REFERENCE_CURRENT + offset]!;
    return {
      saturationCurrent: carried * exp(-scale.reference / idealityVoltage),
      idealityVoltage,
    };
  };
  const circuit = {
    photocurrent: parameters[PHOTOCURRENT]!,
    seriesResistance: parameters[SERIES_RESISTANCE]!,
    shuntConductance: parameters[SHUNT_CONDUCTANCE]!,
  };
  return scale.diodeCount === 1
    ? new SingleDiodeCurve({ ...circuit, ...diode(0) })
    : new DoubleDiodeCurve({ ...circuit, diodes: [diode(0), diode(PER_DIODE)] });
}

function rootMeanSquare(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return Math.sqrt(sum / values.length);
}
