/** Why no curve is exact for a datasheet, and the nearest value of one number that would allow one. */
import { findRoot } from '../../numeric/root.js';
import {
  junctionLimits,
  largestFeasible,
  type Infeasibility,
  type PointsOfCells,
} from './feasible-range.js';

/** A change of one number that makes the datasheet feasible, all others kept. */
export interface Remedy {
  readonly field: 'isc_A' | 'voc_V' | 'imp_A' | 'vmp_V' | 'cells_in_series';
  readonly found: number;
  /** The nearest feasible value; the bound itself is not feasible where a peak must lie above it. */
  readonly nearest: number;
  /** nearest / found - 1. */
  readonly change: number;
}

export interface Diagnosis {
  /** Which condition fails and by how much, without a full stop. */
  readonly account: string;
  readonly advice: string;
  /** The most suspicious number first. */
  readonly remedies: readonly Remedy[];
}

/**
 * The point is suspected first that would have to move least; but where it would have to move by more
 * than a hundredth, which is no matter of rounding, and half the cells would do, the count of the
 * cells: half-cut modules are easily counted in pieces.
 */
export function diagnose(datasheet: PointsOfCells, why: Infeasibility): Diagnosis {
  const remedies =
    why.failure === 'knee' ? kneeRemedies(datasheet, why.most) : peakRemedies(datasheet);
  const advice = adviceOf(remedies);
  return { account: accountOf(datasheet, why), advice, remedies };
}

function accountOf(datasheet: PointsOfCells, why: Infeasibility): string {
  const { peakVoltage, openCircuitVoltage, peakCurrent, shortCircuitCurrent } = datasheet;
  switch (why.failure) {
    case 'peak-voltage':
      return peakVoltage < openCircuitVoltage
        ? `the peak of a curve that bends downward lies above half of Voc, ` +
            `${figures(openCircuitVoltage / 2)} V, and vmp_V is ${figures(peakVoltage)} V`
        : `the peak lies left of open circuit, and vmp_V is not below voc_V`;
    case 'peak-current':
      return peakCurrent < shortCircuitCurrent
        ? `the peak of a curve that bends downward lies above half of Isc, ` +
            `${figures(shortCircuitCurrent / 2)} A, and imp_A is ${figures(peakCurrent)} A`
        : `current falls with voltage, and imp_A is not below isc_A`;
    case 'knee': {
      const [least] = junctionLimits(datasheet);
      const lacks = why.mostEnd === 'shunt-path' ? 'shunt conductance' : 'series resistance';
      return (
        `the knee is squarer than any junction's: without a negative ${lacks} it takes A at most ` +
        `${why.most.toFixed(3)}, and junctions have ${least.toFixed(3)} at least`
      );
    }
  }
}

function peakRemedies(datasheet: PointsOfCells): Remedy[] {
  const { peakVoltage, openCircuitVoltage, peakCurrent, shortCircuitCurrent } = datasheet;
  const remedies: Remedy[] = [];
  if (!(2 * peakVoltage > openCircuitVoltage)) {
    remedies.push(remedy('vmp_V', peakVoltage, openCircuitVoltage / 2));
    remedies.push(remedy('voc_V', openCircuitVoltage, 2 * peakVoltage));
  } else if (!(peakVoltage < openCircuitVoltage)) {
    remedies.push(remedy('vmp_V', peakVoltage, openCircuitVoltage));
  }
  if (!(2 * peakCurrent > shortCircuitCurrent)) {
    remedies.push(remedy('imp_A', peakCurrent, shortCircuitCurrent / 2));
    remedies.push(remedy('isc_A', shortCircuitCurrent, 2 * peakCurrent));
  } else if (!(peakCurrent < shortCircuitCurrent)) {
    remedies.push(remedy('imp_A', peakCurrent, shortCircuitCurrent));
  }
  return remedies;
}

/** Less current or voltage at the peak, or more at the ends, makes the knee softer. */
function kneeRemedies(datasheet: PointsOfCells, most: number): Remedy[] {
  const { peakVoltage, openCircuitVoltage, peakCurrent, shortCircuitCurrent } = datasheet;
  const [least] = junctionLimits(datasheet);
  const points = [
    moved(datasheet, 'imp_A', 'peakCurrent', shortCircuitCurrent / 2),
    moved(datasheet, 'vmp_V', 'peakVoltage', openCircuitVoltage / 2),
    moved(datasheet, 'isc_A', 'shortCircuitCurrent', 2 * peakCurrent),
    moved(datasheet, 'voc_V', 'openCircuitVoltage', 2 * peakVoltage),
  ]
    .filter((each) => each !== undefined)
    .sort((a, b) => Math.abs(a.change) - Math.abs(b.change));
  // A goes with the inverse of the cells: only their product counts.
  const { cellsInSeries } = datasheet;
  const cells = Math.floor((cellsInSeries * most) / least);
  const fewer = cells >= 1 ? [remedy('cells_in_series', cellsInSeries, cells)] : [];
  const isRounding = points[0] !== undefined && Math.abs(points[0].change) <= BY_ROUNDING;
  const isMiscount = 2 * cells >= cellsInSeries;
  return !isRounding && isMiscount ? [...fewer, ...points] : [...points, ...fewer];
}

const BY_ROUNDING = 0.01;

/** The value nearest to the datasheet's at which the knee is soft enough. */
function moved(
  datasheet: PointsOfCells,
  field: Remedy['field'],
  key: 'peakCurrent' | 'peakVoltage' | 'shortCircuitCurrent' | 'openCircuitVoltage',
  farthest: number,
): Remedy | undefined {
  const found = datasheet[key];
  const [least] = junctionLimits(datasheet);
  const excess = (value: number): number =>
    largestFeasible({ ...datasheet, [key]: value }, 2 * least).ideality - least;
  // On the way to the bound, where the family ends, the knee softens and hardens again.
  for (let step = 1; step < STEPS; step += 1) {
    const at = (count: number): number => found + (count / STEPS) * (farthest - found);
    if (excess(at(step)) < 0) continue;
    const ends = [at(step - 1), at(step)].sort((a, b) => a - b) as [number, number];
    const root = findRoot(excess, ...ends, { tolerance: found * NEAR_ENOUGH });
    return root.status === 'converged' ? remedy(field, found, root.root) : undefined;
  }
  return undefined;
}

const STEPS = 500;
// Datasheets print four digits.
const NEAR_ENOUGH = 1e-7;

const remedy = (field: Remedy['field'], found: number, nearest: number): Remedy => ({
  field,
  found,
  nearest,
  change: nearest / found - 1,
});

function adviceOf([first, ...others]: readonly Remedy[]): string {
  if (first === undefined) return 'no change of one number makes it feasible';
  const text = ({ field, nearest, change }: Remedy): string =>
    `${field} ${figures(nearest)} (${change > 0 ? '+' : ''}${(100 * change).toFixed(2)} %)`;
  const also = others.length === 0 ? '' : `; otherwise ${others.map(text).join(', or ')}`;
  return `check ${first.field} first, found ${figures(first.found)}: the nearest feasible is ${text(first)}${also}`;
}

const figures = (value: number): number => Number(value.toPrecision(5));
