/** Which ideality factors have an exact curve that a module can have, or why none has. */
import type { Datasheet } from '../datasheet.js';
import { TECHNOLOGIES } from '../technology.js';
import {
  exactCurve,
  hasExactCurves,
  spanOfIdealityVoltage,
  spanWithoutSeriesResistance,
  spanWithoutShunt,
  type ThreePoints,
} from './exact-curves.js';
import { idealityVoltageAtStc } from './outcome.js';

/** What ends the feasible ideality factors. */
export type RangeEnd =
  /** Rs has come down to zero. */
  | 'series-resistance'
  /** 1/Rsh has. */
  | 'shunt-path'
  /** What a junction can be, or an A asked for beyond that. */
  | 'junction'
  /** I0, e^-(Voc/a) of the current, has become too small for a double number. */
  | 'saturation-current';

/** A of one cell, from `least` to `most`; every one between has one exact curve. */
export interface FeasibleRange {
  readonly least: number;
  readonly leastEnd: RangeEnd;
  readonly most: number;
  readonly mostEnd: RangeEnd;
}

/** The same with the knee spans of both ends, which run the other way. */
export interface FeasibleSpans extends FeasibleRange {
  readonly spanAtLeast: number;
  readonly spanAtMost: number;
}

/** What of a datasheet the range depends on. */
export type PointsOfCells = ThreePoints & Pick<Datasheet, 'cellsInSeries' | 'technology'>;

/** The condition that leaves a datasheet without exact curves. */
export type Infeasibility =
  /** Vmp is not above half of Voc: no curve that bends downward peaks there. */
  | { readonly failure: 'peak-voltage' }
  /** Imp is not above half of Isc: the same. */
  | { readonly failure: 'peak-current' }
  /** The knee is squarer than any junction's: Rs or 1/Rsh would be negative from A = `most` on. */
  | {
      readonly failure: 'knee';
      readonly most: number;
      readonly mostEnd: RangeEnd;
      readonly span: number;
    };

/**
 * Ideality factors of one junction that recombination allows: 2/3 where Auger recombination in high
 * injection limits it, 1 for diffusion, 2 in the depletion region; coupled defects have been seen at
 * 3. Common practice, from memory. Whoever asks for another by number gets it, as far as exact
 * curves reach.
 */
const JUNCTION_RANGE = [2 / 3, 3] as const;

/**
 * The feasible range of a datasheet. Rs and 1/Rsh end it above only (proved in exact-curves.ts), so it is an
 * interval, and its lower end is that of junctions, or of what the caller asks for.
 * @param limits Of A of one cell; by default what junctions can have.
 */
export function feasibleRange(
  datasheet: PointsOfCells,
  limits: readonly [least: number, most: number] = junctionLimits(datasheet),
): FeasibleSpans | Infeasibility {
  if (!hasExactCurves(datasheet)) {
    const { peakVoltage, openCircuitVoltage } = datasheet;
    const voltageFails = !(
      2 * peakVoltage > openCircuitVoltage && peakVoltage < openCircuitVoltage
    );
    return { failure: voltageFails ? 'peak-voltage' : 'peak-current' };
  }
  const [least, leastEnd] = leastOf(datasheet, limits[0]);
  const [, most] = limits;
  const top = largestFeasible(datasheet, most);
  if (top.ideality < least) {
    return { failure: 'knee', most: top.ideality, mostEnd: top.end, span: top.span };
  }
  const bottomVoltage = idealityVoltageAtStc(datasheet, least);
  return {
    least,
    leastEnd,
    most: top.ideality,
    mostEnd: top.end,
    spanAtLeast: spanOfIdealityVoltage(datasheet, bottomVoltage, top.span),
    spanAtMost: top.span,
  };
}

function leastOf(datasheet: PointsOfCells, wanted: number): readonly [number, RangeEnd] {
  const { openCircuitVoltage } = datasheet;
  const least = openCircuitVoltage / (MOST_GROWTH * idealityVoltageAtStc(datasheet, 1));
  return wanted < least ? [least, 'saturation-current'] : [wanted, 'junction'];
}

/** Of Voc over a: e^-690 is 2e-300. */
const MOST_GROWTH = 690;

/** What junctions can have, of a whole cell. */
export function junctionLimits(
  datasheet: Pick<Datasheet, 'technology'>,
): readonly [least: number, most: number] {
  const { junctions } = TECHNOLOGIES[datasheet.technology];
  return [JUNCTION_RANGE[0] * junctions, JUNCTION_RANGE[1] * junctions];
}

/**
 * A caller's A widens the range of junctions, so that it is met as far as exact curves reach; down to
 * half of it, so that there is a nearest A where they do not reach it.
 */
export function limitsFor(
  datasheet: Pick<Datasheet, 'technology'>,
  ideality: number | undefined,
): readonly [number, number] {
  const [least, most] = junctionLimits(datasheet);
  return ideality === undefined
    ? [least, most]
    : [Math.min(least, 0.5 * ideality), Math.max(most, ideality)];
}

/**
 * The feasible curve with the largest A up to `most`: its knee span, A, and what ends it.
 * @param datasheet One with exact curves.
 */
export function largestFeasible(
  datasheet: PointsOfCells,
  most: number,
): { readonly span: number; readonly ideality: number; readonly end: RangeEnd } {
  // The larger span has the smaller A: it is reached first.
  const withoutSeries = spanWithoutSeriesResistance(datasheet) ?? 0;
  const withoutShunt = spanWithoutShunt(datasheet) ?? 0;
  const span = Math.max(withoutSeries, withoutShunt);
  const ideality = span > 0 ? idealityOf(datasheet, span) : Infinity;
  if (ideality <= most) {
    const end = withoutSeries >= withoutShunt ? 'series-resistance' : 'shunt-path';
    return { span, ideality, end };
  }
  const mostVoltage = idealityVoltageAtStc(datasheet, most);
  const spanAtMost = spanOfIdealityVoltage(datasheet, mostVoltage, span > 0 ? span : undefined);
  return { span: spanAtMost, ideality: most, end: 'junction' };
}

const idealityOf = (datasheet: PointsOfCells, span: number): number =>
  exactCurve(datasheet, span).diode.idealityVoltage / idealityVoltageAtStc(datasheet, 1);
