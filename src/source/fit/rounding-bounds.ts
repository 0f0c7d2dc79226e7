import { Interval } from '../../numeric/interval.js';
import type { Datasheet } from '../datasheet.js';
import type { SingleDiode } from '../single-diode.js';
import { fitExactly } from './exact.js';
import { fifthCondition, type FifthChoice, type FifthCondition } from './fifth-condition.js';
import { idealityVoltageAtStc } from './outcome.js';
import type { DatasheetRounding } from './printed-rounding.js';
import {
  conditionBranch,
  datasheetAt,
  rangeEnds,
  roundingBox,
  type RangeEndBranch,
} from './rounding-branches.js';
import {
  encloseBranch,
  PARAMETERS,
  parametersOf,
  type Branch,
  type DatasheetBox,
  type DatasheetPoint,
  type ParameterIntervals,
  type ParameterName,
} from './rounding-enclosure.js';

/** From the least to the most value that a parameter takes, in SI units. */
export type Bound = readonly [low: number, high: number];

/** What rounding alone does to the parameters of a fit. */
export interface RoundingBounds {
  readonly photocurrent: Bound;
  readonly saturationCurrent: Bound;
  /** A of one cell. */
  readonly ideality: Bound;
  readonly seriesResistance: Bound;
  readonly shuntConductance: Bound;
  /**
   * True: no datasheet that prints like this one has an exact solution outside the bounds. False:
   * the bounds are only what the corners of the box give, and some datasheet inside might leave them.
   * So it is under the condition gamma, and where rounding is too coarse for the condition to settle A
   * within a narrow range, which slopes at open circuit often are.
   */
  readonly guaranteed: boolean;
}

/**
 * Bounds of the exact method's parameters over all datasheets that print like this one: each number
 * anywhere within half a unit of its last digit, independently of the others. Undefined where the
 * datasheet has no exact solution.
 *
 * What is guaranteed, and how: the derivatives of the parameters are enclosed over the whole box by
 * interval arithmetic with outward rounding, so that a bound found at a corner is one over the box
 * (see `encloseBranch`). Where the box is too wide for that, or reaches past an end of the feasible
 * range, it is split, into 400 pieces at most. Datasheets of the box without an exact solution have no
 * say. What is taken for granted is that a condition is met at one A at most (see `fitExactly`: held by
 * tests, not proved), and that the solution for one datasheet is right to 1e-9.
 *
 * The bounds are wider than need be by 10 % at most where the whole box is feasible, and by up to twice
 * where it reaches past an end of the range (tests compare with thousands of datasheets of the box).
 * Takes from 1 to 300 ms: it is no part of `fitDatasheet`.
 * @throws Fault `ARGUMENT` as `fitExactly`.
 */
export function roundingBounds(
  datasheet: Datasheet,
  rounding: DatasheetRounding,
  choice: FifthChoice = {},
): RoundingBounds | undefined {
  const { solved, diode } = fitExactly(datasheet, choice);
  if (!solved) return undefined;
  const condition = fifthCondition(datasheet, choice);
  const box = roundingBox(datasheet, rounding, condition);
  const enclosed = search(datasheet, box, condition, choice, diode);
  const fitted = intervalsOf(diode);
  const found = enclosed ?? corners(datasheet, box, condition, choice);
  const hull = found === undefined ? fitted : hullOf(found, fitted);
  const perFactor = idealityVoltageAtStc(datasheet, 1);
  return {
    photocurrent: bound(hull.photocurrent),
    saturationCurrent: bound(hull.logSaturationCurrent.exp()),
    ideality: bound(hull.idealityVoltage, perFactor),
    seriesResistance: bound(hull.seriesResistance),
    shuntConductance: bound(hull.shuntConductance),
    guaranteed: enclosed !== undefined,
  };
}

/** No parameter is below zero. */
const bound = ({ low, high }: Interval, unit = 1): Bound => [Math.max(low, 0) / unit, high / unit];

/** The union over all pieces of the box; undefined where some piece defies enclosure. */
function search(
  datasheet: Datasheet,
  whole: DatasheetBox,
  condition: FifthCondition,
  choice: FifthChoice,
  fitted: SingleDiode,
): ParameterIntervals | undefined {
  const { name } = condition;
  if (name === 'gamma') return undefined;
  const branch = conditionBranch(datasheet, name, choice, fitted);
  const ends = rangeEnds(datasheet, choice.ideality);
  // Breadth first: all pieces become small together.
  const queue = [whole];
  let hull: ParameterIntervals | undefined;
  for (let piece = 0; piece < queue.length; piece += 1) {
    const box = queue[piece]!;
    const found = analysed(box, branch, ends, queue.length);
    if ('split' in found) {
      if (queue.length >= MOST_PIECES) return undefined;
      queue.push(...halves(box, found.split));
    } else {
      for (const each of found.alternatives) hull = hull === undefined ? each : hullOf(hull, each);
    }
  }
  return hull;
}

/** Pieces made in all; each costs up to a millisecond. */
const MOST_PIECES = 400;
/** Beyond these, pieces across an end of the range are no longer split, only counted on both sides. */
const ENOUGH_AT_ENDS = 100;
/** Beyond these, pieces loosely enclosed are no longer split. */
const ENOUGH_LOOSE = 40;
/** Of a parameter's width. */
const LOOSE = 0.05;

type Finding =
  /** The branches that datasheets of the piece may be on, each with its parameters. */
  | { readonly alternatives: readonly ParameterIntervals[] }
  /** By which variable to split the piece. */
  | { readonly split: number };

function analysed(
  box: DatasheetBox,
  condition: Branch,
  ends: readonly RangeEndBranch[],
  pieces: number,
): Finding {
  const { parameters: met, looseness, widest } = encloseBranch(condition, box);
  const split = { split: widest };
  if (met === undefined) return split;
  const isSplittable = box[widest]!.high > box[widest]!.low;
  const passed = ends
    .map((end) => ({ end, reserve: end.reserve(met) }))
    .filter(({ reserve }) => reserve.low < 0);
  if (passed.length === 0) {
    return isSplittable && looseness > LOOSE && pieces < ENOUGH_LOOSE
      ? split
      : { alternatives: [met] };
  }
  const isBeyond = passed.some(({ reserve }) => reserve.high < 0);
  if (!isBeyond && isSplittable && pieces < ENOUGH_AT_ENDS) return split;
  const atEnds = passed.map(({ end }) => encloseBranch(end, box).parameters);
  const known = atEnds.filter((each) => each !== undefined);
  if (known.length < atEnds.length) return split;
  return { alternatives: isBeyond ? known : [met, ...known] };
}

function halves(box: DatasheetBox, index: number): [DatasheetBox, DatasheetBox] {
  const { low, high } = box[index]!;
  const middle = 0.5 * (low + high);
  const part = (interval: Interval): DatasheetBox =>
    box.map((each, i) => (i === index ? interval : each));
  return [part(new Interval(low, middle)), part(new Interval(middle, high))];
}

/** What the datasheets at the corners of the box give. */
function corners(
  datasheet: Datasheet,
  box: DatasheetBox,
  condition: FifthCondition,
  choice: FifthChoice,
): ParameterIntervals | undefined {
  let points: DatasheetPoint[] = [[]];
  for (const { low, high } of box) {
    const ends = low === high ? [low] : [low, high];
    points = points.flatMap((point) => ends.map((end) => [...point, end]));
  }
  return points
    .map((point) => fitExactly(datasheetAt(datasheet, point, condition.name), choice))
    .filter(({ solved }) => solved)
    .map(({ diode }) => intervalsOf(diode))
    .reduce<ParameterIntervals | undefined>(
      (hull, each) => (hull === undefined ? each : hullOf(hull, each)),
      undefined,
    );
}

function intervalsOf(diode: SingleDiode): ParameterIntervals {
  const values = parametersOf(diode);
  return each((name) => Interval.point(values[name]));
}

const hullOf = (a: ParameterIntervals, b: ParameterIntervals): ParameterIntervals =>
  each((name) => a[name].hull(b[name]));

const each = (interval: (name: ParameterName) => Interval): ParameterIntervals =>
  Object.fromEntries(PARAMETERS.map((name) => [name, interval(name)])) as Record<
    ParameterName,
    Interval
  >;
