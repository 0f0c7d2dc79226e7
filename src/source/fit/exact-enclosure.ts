/** The family of exact-curves.ts over a whole box of datasheets, with derivatives, soundly enclosed. */
import { expm1 } from '../../numeric/exponential.js';
import { log } from '../../numeric/logarithm.js';
import { Interval } from '../../numeric/interval.js';
import { IntervalGradient, type Surroundings } from '../../numeric/interval-gradient.js';
import { STC_TEMPERATURE, type Kelvin } from '../../quantities.js';
import type { TechnologyName } from '../technology.js';
import { saturationRatio } from '../translation.js';
import { inversePhiLeft, phi } from './curvature.js';
import type { FifthName } from './fifth-condition.js';

export interface ExactEnclosure {
  readonly photocurrent: IntervalGradient;
  readonly saturationCurrent: IntervalGradient;
  readonly logSaturationCurrent: IntervalGradient;
  readonly idealityVoltage: IntervalGradient;
  readonly seriesResistance: IntervalGradient;
  readonly shuntConductance: IntervalGradient;
  /** X = I0 e^(Voc/a). */
  readonly diodeCurrent: IntervalGradient;
  /** As given: see `encloseExactCurve`. */
  readonly variables: readonly IntervalGradient[];
}

/**
 * @param around A box of these variables, in this order: knee span, Isc, Voc, Imp, Vmp, alpha, and the
 * number of the fifth condition. The knee span is taken relative to a function of the others: its
 * interval is of what is left beside `spanSlopes` · (x - centre).
 * @param spanSlopes Roughly the derivatives of the knee span by the other variables.
 */
export function encloseExactCurve(
  around: Surroundings,
  spanSlopes: readonly number[],
): ExactEnclosure {
  const variables = IntervalGradient.variables(around);
  const [rest, isc, voc, imp, vmp] = variables as [P, P, P, P, P];
  const p = spanSlopes.reduce(
    (sum, slope, i) => sum.plus(variables[i + 1]!.shifted(-around.centre[i + 1]!).scaled(slope)),
    rest,
  );
  const rise = isc.minus(imp);
  const drop = voc.minus(vmp);
  const rho = imp.times(vmp.minus(drop)).over(vmp.times(imp.minus(rise)));
  const q = inversePhi(phiOf(p).over(rho));
  const divisor = q.times(imp).minus(p.times(rise));
  const bend = imp.times(vmp).minus(rise.times(drop));
  const a = bend.over(divisor);
  const seriesResistance = q.times(drop).minus(p.times(vmp)).over(divisor);
  const atPeak = p.scaled(-1).exp();
  const lacking = complement(atPeak);
  const gained = complement(q.scaled(-1).exp());
  const determinant = a.times(q.times(lacking).minus(p.times(atPeak).times(gained)));
  const diodeCurrent = bend.over(determinant);
  const shuntConductance = rise
    .times(lacking)
    .minus(imp.times(atPeak).times(gained))
    .over(determinant);
  const share = voc.scaled(-1).over(a).exp();
  // By way of short circuit: the terms added to Isc are small, and so is what they widen.
  const atShort = isc.times(seriesResistance);
  const shareAtShort = atShort.minus(voc).over(a).exp();
  const throughDiode = diodeCurrent.times(shareAtShort.minus(share));
  return {
    photocurrent: isc.plus(throughDiode).plus(shuntConductance.times(atShort)),
    saturationCurrent: diodeCurrent.times(share),
    logSaturationCurrent: logOf(diodeCurrent).minus(voc.over(a)),
    idealityVoltage: a,
    seriesResistance,
    shuntConductance,
    diodeCurrent,
    variables,
  };
}

type P = IntervalGradient;

/** Zero where a curve meets the fifth condition: see `fifthCondition`, whose equations these are. */
export function encloseFifthResidual(
  curve: ExactEnclosure,
  condition: Exclude<FifthName, 'gamma'> | 'ideality',
  technology: TechnologyName,
  temperature: Kelvin,
  perFactor: number,
): IntervalGradient {
  const { diodeCurrent, idealityVoltage: a, seriesResistance, shuntConductance } = curve;
  const [, isc, voc, , , alpha, wanted] = curve.variables as [P, P, P, P, P, P, P];
  const slopeMiss = (conductance: IntervalGradient): IntervalGradient =>
    conductance.plus(wanted.times(seriesResistance.times(conductance).shifted(1)));
  switch (condition) {
    case 'beta': {
      const rise = temperature - STC_TEMPERATURE;
      const growth = saturationRatio(technology, temperature);
      const voltage = voc.plus(wanted.scaled(rise));
      const exponent = voltage
        .scaled(STC_TEMPERATURE / temperature)
        .minus(voc)
        .over(a);
      const diodeThen = diodeCurrent.times(exponent.exp()).scaled(growth);
      return curve.photocurrent
        .plus(alpha.scaled(rise))
        .minus(diodeThen)
        .plus(curve.saturationCurrent.scaled(growth))
        .minus(voltage.times(shuntConductance));
    }
    case 'slope-at-isc': {
      const growth = isc.times(seriesResistance).minus(voc).over(a).exp();
      return slopeMiss(diodeCurrent.times(growth).over(a).plus(shuntConductance));
    }
    case 'slope-at-voc':
      return slopeMiss(diodeCurrent.over(a).plus(shuntConductance));
    case 'typical':
    case 'ideality':
      return a.minus(wanted.scaled(perFactor));
  }
}

/** Where the argument may be zero nothing is known. */
const logOf = (x: IntervalGradient): IntervalGradient =>
  x.through(
    ({ low, high }) =>
      low > 0
        ? Interval.around(log(low), LOG_ERROR).hull(Interval.around(log(high), LOG_ERROR))
        : new Interval(-Infinity, Infinity),
    (value) => Interval.point(1).over(value),
  );

// For arguments from e^-700 to e^700, half a unit of the last place of the largest logarithm.
const LOG_ERROR = 1e-13;

const complement = (x: IntervalGradient): IntervalGradient => x.scaled(-1).shifted(1);

/** phi and its derivative rise, so their ends are at the ends; each is moved outward by far its error. */
const phiOf = (x: IntervalGradient): IntervalGradient =>
  x.through(
    ({ low, high }) => new Interval(phi(low) * BELOW, phi(high) * ABOVE),
    ({ low, high }) => new Interval(expm1(low) * BELOW, expm1(high) * ABOVE),
  );

/** Of the inverse q of phi(-q), which rises; its derivative is 1 / (1 - e^-q), which falls. */
const inversePhi = (x: IntervalGradient): IntervalGradient =>
  x.through(inversePhiOf, (value) => {
    const { low, high } = inversePhiOf(value);
    return new Interval(BELOW / -expm1(-high), ABOVE / -expm1(-low));
  });

const inversePhiOf = ({ low, high }: Interval): Interval =>
  new Interval(inversePhiLeft(low) * BELOW, inversePhiLeft(high) * ABOVE);

const BELOW = 1 - 1e-13;
const ABOVE = 1 + 1e-13;
