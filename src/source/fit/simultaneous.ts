import { findRoot } from '../../numeric/root.js';
import type { Datasheet } from '../datasheet.js';
import type { SingleDiode } from '../single-diode.js';
import { lastCondition, type LastCondition } from './last-condition.js';
import { cellIdealityRange, type MethodOutcome } from './outcome.js';
import { peakExcess, throughBothEnds, throughThreePoints } from './three-points.js';

/**
 * The simultaneous solution for I0, A and Rs from three conditions:
 *
 *     open circuit        I(Voc) = 0
 *     peak                I(Vmp) = Imp
 *     series resistance   dI/dV at open circuit is the given slope; where no slope is given,
 *                         dP/dV at Vmp is zero, so that the curve peaks at the datasheet's peak
 *
 * Short circuit fixes Iph, and the slope at short circuit Rsh. There is no shunt path where no slope
 * is given, or one flatter than the diode alone makes it.
 *
 * The three are not handed to a multidimensional iteration. Each A has one curve through the three
 * points or none, and has one up to some largest A; along these curves the last condition runs
 * through zero once or not at all. So it is always known whether a solution exists, there is only
 * one, and no starting guess is needed.
 *
 * Accuracy where solved: each condition met to 1e-9 relative.
 */
export function fitSimultaneously(datasheet: Datasheet): MethodOutcome {
  const condition = lastCondition(datasheet);
  const nearest = search(datasheet, condition, cellIdealityRange(datasheet));
  if (nearest === undefined) return noCurve(datasheet, condition);
  const { ideality, diode } = nearest;
  const conditions = `open circuit, Imp at Vmp and ${condition.name}`;
  if (isMet(nearest)) {
    const account = `${conditions} are met together at A = ${ideality.toFixed(4)}`;
    return { solved: true, ideality, diode, account };
  }
  const account =
    `no A from ${cellIdealityRange(datasheet).join(' to ')} meets ${conditions} together; the ` +
    `nearest curve, A = ${ideality.toFixed(3)}, ${condition.describe(diode)}`;
  const advice = whatToLookFor(datasheet, condition, ideality);
  return { solved: false, ideality, diode, account, advice };
}

/** A curve through the three points, and what it misses of the last condition. */
interface Trial {
  readonly ideality: number;
  readonly diode: SingleDiode;
  readonly miss: number;
}

const isMet = (trial: Trial): boolean => Math.abs(trial.miss) <= 1e-9;

/** The trial that meets the condition, or else the nearest; undefined where no curve exists. */
function search(
  datasheet: Datasheet,
  condition: LastCondition,
  [least, most]: readonly [number, number],
): Trial | undefined {
  const trial = (ideality: number): Trial | undefined => {
    const diode = throughThreePoints(datasheet, ideality);
    return diode && { ideality, diode, miss: condition.miss(diode) };
  };
  const low = trial(least);
  if (low === undefined) return undefined;
  const high = trial(most) ?? trial(largestIdeality(datasheet, least, most)) ?? low;
  const found = findRoot((ideality) => trial(ideality)?.miss ?? NaN, least, high.ideality);
  const between = found.status === 'converged' ? trial(found.root) : undefined;
  if (between !== undefined && isMet(between)) return between;
  return Math.abs(low.miss) <= Math.abs(high.miss) ? low : high;
}

/** The A whose curve passes through the peak without series resistance. */
function largestIdeality(datasheet: Datasheet, least: number, most: number): number {
  const found = findRoot((ideality) => peakExcess(datasheet, ideality, 0), least, most);
  return found.status === 'converged' ? found.root : least;
}

function noCurve(datasheet: Datasheet, condition: LastCondition): MethodOutcome {
  const [least, most] = cellIdealityRange(datasheet);
  const lack = -peakExcess(datasheet, least, 0) / datasheet.peakCurrent;
  return {
    solved: false,
    ideality: least,
    diode: throughBothEnds(datasheet, least, 0),
    account:
      `no A from ${least} to ${most} gives a curve as square as this datasheet; the nearest, ` +
      `A = ${least} without series resistance, carries ${(100 * lack).toFixed(2)} % less than ` +
      'Imp at Vmp',
    advice: whatToLookFor(datasheet, condition, least),
  };
}

/** Where the conditions would be met, if anywhere, and what that says about the datasheet. */
function whatToLookFor(
  datasheet: Datasheet,
  condition: LastCondition,
  nearestIdeality: number,
): string {
  const [least, most] = cellIdealityRange(datasheet);
  const elsewhere = search(datasheet, condition, [0.4 * least, 2 * most]);
  const { small, large } = condition.suspects;
  const look = `look for ${nearestIdeality > least ? large : small}`;
  return elsewhere !== undefined && isMet(elsewhere)
    ? `all would be met at A = ${elsewhere.ideality.toFixed(3)}; ${look}`
    : `they are met at no other A either; ${look}`;
}
