/**
 * The curves through short circuit, open circuit and peak that also peak there: a family with one
 * parameter, in closed form but for the inverse of one function.
 *
 * Over the junction voltage u = V + I Rs the single-diode curve is I = Iph - I0 (e^(u/a) - 1) - u Gsh,
 * and for given a and Rs the three points lie at u = Isc Rs, Vmp + Imp Rs and Voc. With the two spans
 * between them counted in ideality voltages,
 *
 *     q = (Vmp - (Isc - Imp) Rs) / a,    p = (Voc - Vmp - Imp Rs) / a,
 *
 * the points are linear in Iph, X = I0 e^(Voc/a) and Gsh. Putting their solution into dP/dV = 0 at
 * the peak leaves, after everything else has cancelled,
 *
 *     phi(p) = rho phi(-q),    phi(x) = e^x - 1 - x,
 *     rho = Imp (2 Vmp - Voc) / (Vmp (2 Imp - Isc)),
 *
 * where rho is known from the datasheet. So each p > 0 has one q > 0, and then a and Rs follow from
 * the two spans, which are linear in them:
 *
 *     a  = (Isc Vmp + Imp Voc - Isc Voc) / (q Imp - p (Isc - Imp))
 *     Rs = (q (Voc - Vmp) - p Vmp)       / (q Imp - p (Isc - Imp))
 *
 * What that proves (p' is a derivative; the inequalities are those of phi):
 * - rho > 0 needs Vmp > Voc/2 and Imp > Isc/2, which every concave curve's peak keeps: its tangent at
 *   the peak meets the axes at 2 Vmp and 2 Imp. They are also enough: the family is then not empty.
 * - For given a there is one Rs at most. phi(p)/phi(-q) falls with Rs, because x phi'(x)/phi(x) is
 *   above 2 for x > 0 and below 2 for x < 0, and because the curve bends; and it rises with 1/a. So
 *   along the family Rs falls as a rises, and p falls as well.
 * - Gsh >= 0 where (Isc - Imp)(e^p - 1) >= Imp (1 - e^-q); the ratio of the two rises with p,
 *   because phi(x) / (4 sinh²(x/2)) is above 1/2 for x > 0 and below 1/2 for x < 0.
 * - I0 is above zero throughout.
 * So the members that a module can have (Rs >= 0, Gsh >= 0) are those up to some largest a, at which
 * either Rs or Gsh has come down to zero. Towards a = 0 nothing ends them.
 */
import { exp, expm1 } from '../../numeric/exponential.js';
import { findRoot } from '../../numeric/root.js';
import type { Amperes, Volts } from '../../quantities.js';
import type { SingleDiode } from '../single-diode.js';
import { inversePhiLeft, phi } from './curvature.js';

/** What of a datasheet the family depends on. */
export interface ThreePoints {
  readonly shortCircuitCurrent: Amperes;
  readonly openCircuitVoltage: Volts;
  readonly peakCurrent: Amperes;
  readonly peakVoltage: Volts;
}

/** One curve of the family. Outside the feasible range its Rs or Gsh is below zero. */
export interface ExactCurve {
  readonly diode: SingleDiode;
  /** From the peak to open circuit, in ideality voltages at the junction. */
  readonly kneeSpan: number;
  /** I0 e^(Voc/a): the diode's current at open circuit, which unlike I0 never underflows. */
  readonly diodeCurrent: Amperes;
}

/** Whether the points leave the family any curves: rho is above zero. */
export const hasExactCurves = (points: ThreePoints): boolean =>
  2 * points.peakVoltage > points.openCircuitVoltage &&
  2 * points.peakCurrent > points.shortCircuitCurrent &&
  points.peakVoltage < points.openCircuitVoltage &&
  points.peakCurrent < points.shortCircuitCurrent;

/**
 * The curve of a knee span.
 * @param points With `hasExactCurves`.
 * @param kneeSpan p above zero; such that q Imp > p (Isc - Imp), which holds for all p of feasible
 * curves and all above.
 * Accuracy: the points and the flat peak to 1e-12 relative, as far as double numbers carry I0.
 */
export function exactCurve(points: ThreePoints, kneeSpan: number): ExactCurve {
  const { shortCircuitCurrent, openCircuitVoltage, peakCurrent, peakVoltage } = points;
  const rise = shortCircuitCurrent - peakCurrent;
  const p = kneeSpan;
  const q = plateauSpan(points, p);
  const divisor = q * peakCurrent - p * rise;
  const a = bend(points) / divisor;
  const seriesResistance = (q * (openCircuitVoltage - peakVoltage) - p * peakVoltage) / divisor;
  // Of the diode's current at open circuit: what it still lacks at the peak, and there of itself.
  const lacking = -expm1(-p);
  const atPeak = exp(-p);
  const gained = -expm1(-q);
  // a times this is the determinant of the linear equations.
  const determinant = a * (q * lacking - p * atPeak * gained);
  const diodeCurrent = bend(points) / determinant;
  const shuntConductance = (rise * lacking - peakCurrent * atPeak * gained) / determinant;
  const share = exp(-openCircuitVoltage / a);
  return {
    kneeSpan,
    diodeCurrent,
    diode: {
      photocurrent: diodeCurrent * (1 - share) + shuntConductance * openCircuitVoltage,
      saturationCurrent: diodeCurrent * share,
      idealityVoltage: a,
      seriesResistance,
      shuntConductance,
    },
  };
}

/**
 * The knee span of the curve with an ideality voltage.
 * @param leastSpan Of a curve with a larger ideality voltage, or as large.
 */
export function spanOfIdealityVoltage(
  points: ThreePoints,
  idealityVoltage: Volts,
  leastSpan: number = LEAST_SPAN,
): number {
  const { shortCircuitCurrent, openCircuitVoltage, peakCurrent, peakVoltage } = points;
  const rise = shortCircuitCurrent - peakCurrent;
  const wanted = bend(points) / idealityVoltage;
  const excess = (p: number): number => plateauSpan(points, p) * peakCurrent - p * rise - wanted;
  // p a <= Voc - Vmp unless Rs is below zero.
  let most = Math.max(leastSpan, (openCircuitVoltage - peakVoltage) / idealityVoltage);
  while (excess(most) < 0 && most < MOST_SPAN) most *= 1.5;
  const found = findRoot(excess, leastSpan, most);
  return found.status === 'converged' ? found.root : leastSpan;
}

/** The curve that has no series resistance left, unless the knee is too soft for there to be one. */
export function spanWithoutSeriesResistance(points: ThreePoints): number | undefined {
  // There q / p = Vmp / (Voc - Vmp), and phi(p) / phi(-q) rises with p from the square of its inverse.
  const { openCircuitVoltage, peakVoltage } = points;
  const ratio = peakVoltage / (openCircuitVoltage - peakVoltage);
  const rho = peakRatio(points);
  return risingRoot((p) => phi(p) / phi(-ratio * p) - rho);
}

/** The curve that has no shunt path left, unless the plateau is too steep for there to be one. */
export function spanWithoutShunt(points: ThreePoints): number | undefined {
  const { shortCircuitCurrent, peakCurrent } = points;
  const ratio = (shortCircuitCurrent - peakCurrent) / peakCurrent;
  return risingRoot((p) => ratio * expm1(p) + expm1(-plateauSpan(points, p)));
}

/** q of p. */
const plateauSpan = (points: ThreePoints, p: number): number =>
  inversePhiLeft(phi(p) / peakRatio(points));

/** rho. */
const peakRatio = (d: ThreePoints): number =>
  (d.peakCurrent * (2 * d.peakVoltage - d.openCircuitVoltage)) /
  (d.peakVoltage * (2 * d.peakCurrent - d.shortCircuitCurrent));

/** How far the peak lies above the chord from short to open circuit, as twice an area. */
const bend = (d: ThreePoints): number =>
  d.peakCurrent * d.peakVoltage -
  (d.shortCircuitCurrent - d.peakCurrent) * (d.openCircuitVoltage - d.peakVoltage);

/** The root of a function that ends above zero, and starts there too if it has none. */
function risingRoot(f: (p: number) => number): number | undefined {
  const found = findRoot(f, LEAST_SPAN, MOST_SPAN);
  return found.status === 'converged' ? found.root : undefined;
}

// Knees of cells are 1 to 10 ideality voltages wide.
const LEAST_SPAN = 1e-3;
const MOST_SPAN = 300;
