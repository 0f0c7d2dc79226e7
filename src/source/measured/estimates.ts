/** Physical parameters of a fit with their standard errors. */
import { determination } from '../../numeric/determination.js';
import type { LeastSquaresResult } from '../../numeric/least-squares-problem.js';
import { exp } from '../../numeric/exponential.js';
import type { Amperes } from '../../quantities.js';
import {
  IDEALITY,
  PER_DIODE,
  PHOTOCURRENT,
  REFERENCE_CURRENT,
  SERIES_RESISTANCE,
  SHUNT_CONDUCTANCE,
  type BalanceScale,
} from './diode-balance.js';

export type EstimateName =
  | 'photocurrent'
  | 'shuntConductance'
  | 'seriesResistance'
  | 'saturationCurrent'
  | 'ideality'
  | 'secondSaturationCurrent'
  | 'secondIdeality';

/** How far the data determine a parameter. */
export type Standing =
  /** Two standard errors are less than the value. */
  | 'determined'
  /** Two standard errors reach zero (for Rsh: infinity) or beyond. */
  | 'loose'
  /** A bound of the search holds it; the other standard errors take it as given. */
  | 'at-bound'
  /** No point is to spare that could show the noise. */
  | 'unknown'
  /** It can change, alone or with others, without a trace in the curve. */
  | 'undetermined';

export interface Estimate {
  readonly name: EstimateName;
  /** In SI units; NaN where it is without meaning. */
  readonly value: number;
  /** In the unit of the value; undefined where it is at a bound, undetermined, or noise unknown. */
  readonly standardError?: number;
  readonly standing: Standing;
}

/**
 * @param noise Standard deviation of the measured currents; NaN if there were no points to spare.
 * @param spread Factor from current noise to the residual of each point.
 */
export function estimates(
  optimum: LeastSquaresResult,
  scale: BalanceScale,
  noise: Amperes,
  spread?: Float64Array,
): Estimate[] {
  const { parameters, held } = optimum;
  const free = [...parameters.keys()].filter((j) => !held[j]);
  const { covariance, isDetermined } = determination(columnsOf(optimum, free), free.length, spread);
  const entry = (a: number, b: number): number => {
    const [i, j] = [free.indexOf(a), free.indexOf(b)];
    return i < 0 || j < 0 ? 0 : covariance[i * free.length + j]! * noise * noise;
  };
  const plain = (name: EstimateName, j: number): Estimate => {
    const value = parameters[j]!;
    return {
      name,
      value,
      ...standingOf(value, held[j]!, isDetermined[free.indexOf(j)], entry(j, j)),
    };
  };
  const saturation = (name: EstimateName, offset: number): Estimate => {
    const [jCurrent, jIdeality] = [REFERENCE_CURRENT + offset, IDEALITY + offset];
    const a = scale.perIdeality * parameters[jIdeality]!;
    const shrink = exp(-scale.reference / a);
    const value = parameters[jCurrent]! * shrink;
    // dI0 = shrink dJ + I0 (r / a) dn / n
    const perIdeality = (value * scale.reference) / (a * parameters[jIdeality]!);
    const variance =
      shrink * shrink * entry(jCurrent, jCurrent) +
      2 * shrink * perIdeality * entry(jCurrent, jIdeality) +
      perIdeality * perIdeality * entry(jIdeality, jIdeality);
    const known = [jCurrent, jIdeality].every(
      (j) => held[j]! || isDetermined[free.indexOf(j)] === true,
    );
    return { name, value, ...standingOf(value, held[jCurrent]!, known, variance) };
  };
  const second: Estimate[] =
    scale.diodeCount === 1
      ? []
      : [
          saturation('secondSaturationCurrent', PER_DIODE),
          // The ideality of a diode that carries nothing is anything.
          parameters[REFERENCE_CURRENT + PER_DIODE] === 0
            ? { name: 'secondIdeality', value: NaN, standing: 'undetermined' }
            : plain('secondIdeality', IDEALITY + PER_DIODE),
        ];
  return [
    plain('photocurrent', PHOTOCURRENT),
    plain('shuntConductance', SHUNT_CONDUCTANCE),
    plain('seriesResistance', SERIES_RESISTANCE),
    saturation('saturationCurrent', 0),
    plain('ideality', IDEALITY),
    ...second,
  ];
}

function columnsOf({ jacobian, parameters, residuals }: LeastSquaresResult, free: number[]) {
  const kept = new Float64Array(residuals.length * free.length);
  residuals.forEach((_, i) => {
    free.forEach((j, k) => (kept[i * free.length + k] = jacobian[i * parameters.length + j]!));
  });
  return kept;
}

function standingOf(
  value: number,
  isHeld: boolean,
  isDetermined: boolean | undefined,
  variance: number,
): { standing: Standing; standardError?: number } {
  if (isHeld) return { standing: 'at-bound' };
  if (isDetermined !== true) return { standing: 'undetermined' };
  const standardError = Math.sqrt(variance);
  if (Number.isNaN(standardError)) return { standing: 'unknown' };
  return { standing: 2 * standardError < Math.abs(value) ? 'determined' : 'loose', standardError };
}
