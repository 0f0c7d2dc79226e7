import { findRoot } from '../../numeric/root.js';
import type { Enclosure } from './enclosure.js';

/**
 * How power changes along a curve, over a parameter t from 0 to `end`: the current of a string, or
 * the voltage of strings side by side. Power is zero at both ends.
 */
export interface PowerSlope {
  readonly end: number;
  /** Where the curve may have a kink; they rise, strictly inside 0 to `end`. */
  readonly kinks: readonly number[];
  /** Whether dP/dt falls strictly between one kink and the next. */
  readonly concave: boolean;
  /** dP/dt, away from kinks. */
  at(t: number): number;
  /**
   * Sets `into` to a range that holds dP/dt from `from` to `to`, between which there is no kink.
   * Where `concave`: exactly the slopes at the two ends, taken from inside.
   */
  enclose(from: number, to: number, into: Enclosure): void;
  /** The larger of the shares of open-circuit voltage and of short-circuit current gone through. */
  extent(from: number, to: number): number;
}

/** 2^-20: two peaks nearer than this share of the curve, in voltage and in current, may be one. */
const RESOLUTION = 9.5367431640625e-7;

/**
 * Every t at which power has a local maximum, in rising order.
 *
 * **Ideal bypasses and blocking, no breakdown: every peak, with no exception.** The voltage of cells
 * is a strictly falling, concave function of their current, and so are sums and shifts of such
 * functions and their inverses, and sums of those inverses. So a string's V(I) is concave between
 * the currents at which a bypass comes in, and strings side by side have a concave I(V) between
 * the voltages at which one does or a blocking diode lets go. Where f falls strictly and is concave
 * (t f(t))'' = 2 f' + t f'' < 0: power is strictly concave from kink to kink, and has a maximum
 * inside exactly if its slope is above zero at the start and below at the end. At a kink it has
 * none: there the slope of V(I) or I(V) jumps upwards, so dP/dt does, and a maximum needs it to go
 * from above zero to below.
 *
 * **Junction diodes and breakdown** bend the curve both ways. Then dP/dt is enclosed: over any range
 * of t each element's -dV/dI lies between known bounds (its conductances are sums of one that rises
 * and one that falls with the junction voltage), hence so does dP/dt. A range whose bounds are both
 * above or both below zero holds no peak; any other is halved, until it spans less than
 * `RESOLUTION` of the curve in voltage and in current. Ranges left over that touch form a
 * cluster. Power rises into it and falls out of it: one peak is reported. Otherwise none is. So
 * every peak is found except one that shares with another peak, or with a dip that undoes it, a
 * cluster; there powers differ by less than RESOLUTION Isc Voc for each range of the cluster.
 * Bounds come from ordinary arithmetic, without directed rounding, which is some 10^-14 of them.
 */
export function peakParameters(slope: PowerSlope): number[] {
  if (!(slope.end > 0)) return [];
  const edges = [0, ...slope.kinks, slope.end];
  if (!slope.concave) return clusteredPeaks(slope, edges);
  const range = { least: 0, most: 0 };
  return edges.slice(1).flatMap((to, index) => {
    const from = edges[index]!;
    slope.enclose(from, to, range);
    const { most, least } = range;
    return most > 0 && least < 0 ? [zeroBetween(slope, from, most, to, least)] : [];
  });
}

/** dP/dt has opposite signs at the ends, where it is given: at kinks only one side is meant. */
function zeroBetween(
  slope: PowerSlope,
  from: number,
  atFrom: number,
  to: number,
  atTo: number,
): number {
  const result = findRoot((t) => (t === from ? atFrom : t === to ? atTo : slope.at(t)), from, to);
  return result.status === 'converged' ? result.root : NaN;
}

function clusteredPeaks(slope: PowerSlope, edges: readonly number[]): number[] {
  const peaks: number[] = [];
  const range = { least: 0, most: 0 };
  // Power rises from its zero at t = 0.
  let rising = true;
  let clusterStart = 0;
  const settle = (from: number, sign: number): void => {
    if (rising && sign < 0) peaks.push(between(slope, clusterStart, from));
    rising = sign > 0;
  };
  for (let piece = 1; piece < edges.length; piece++) {
    const open = [[edges[piece - 1]!, edges[piece]!] as const];
    for (let next = open.pop(); next !== undefined; next = open.pop()) {
      const [from, to] = next;
      slope.enclose(from, to, range);
      const sign = range.least > 0 ? 1 : range.most < 0 ? -1 : 0;
      if (sign !== 0) {
        settle(from, sign);
        clusterStart = to;
        continue;
      }
      const middle = 0.5 * (from + to);
      const isWhole = middle <= from || middle >= to || slope.extent(from, to) < RESOLUTION;
      if (!isWhole) open.push([middle, to], [from, middle]);
    }
  }
  // Power falls to its zero at the end, whatever the arithmetic could tell of the last range.
  settle(slope.end, -1);
  return peaks;
}

/** Where power stops rising between the ends of a cluster. */
function between(slope: PowerSlope, from: number, to: number): number {
  const result = findRoot((t) => (t === from ? 1 : t === to ? -1 : slope.at(t)), from, to);
  return result.status === 'converged' ? result.root : 0.5 * (from + to);
}
