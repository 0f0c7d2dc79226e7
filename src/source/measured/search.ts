/** The best fit of a curve: searches from many starts, until the best end has been met again. */
import { leastSquares } from '../../numeric/least-squares.js';
import type { LeastSquaresResult } from '../../numeric/least-squares-problem.js';
import type { CurveData } from './curve-data.js';
import { residualProblem, type ResidualConvention } from './residuals.js';
import type { SearchBox } from './search-box.js';
import { startingPoints } from './starts.js';

export interface SearchResult {
  readonly best: LeastSquaresResult;
  readonly tried: number;
  /** How many of the starts led to the best end, itself included. */
  readonly agreeing: number;
}

const MOST_STARTS = 24;
/** So many starts are tried in any case. */
const LEAST_STARTS = 8;
/** So many starts have to lead to the best end. */
export const CONFIRMATIONS = 3;
/** Relative difference of two sums of squares that are one and the same minimum. */
const SAME_SUM = 1e-8;

/**
 * @param known Parameter sets to start from as well, after those from the grid.
 */
export function searchOptimum(
  convention: ResidualConvention,
  data: CurveData,
  box: SearchBox,
  known: readonly Float64Array[] = [],
): SearchResult {
  const problem = residualProblem(convention, box.scale, data);
  const ends: LeastSquaresResult[] = [];
  const starts = [...known, ...startingPoints(data, box, MOST_STARTS)];
  const bestSum = (): number => Math.min(...ends.map(({ sumOfSquares }) => sumOfSquares));
  // An exact fit leaves rounding, of which no two searches leave the same.
  const rounding =
    data.voltages.length * (EXACT_FIT * data.currentSpan) * (EXACT_FIT * data.currentSpan);
  const agreeing = (): number => {
    const most = bestSum() * (1 + SAME_SUM) + rounding;
    return ends.filter(({ sumOfSquares }) => sumOfSquares <= most).length;
  };
  for (const start of starts) {
    ends.push(leastSquares(problem, start, { ...box, iterationLimit: 500 }));
    if (ends.length >= LEAST_STARTS + known.length && agreeing() >= CONFIRMATIONS) break;
  }
  const least = bestSum();
  // Of equals the one that got nearest to a right angle, so that the order of starts is no matter.
  const best = ends
    .filter(({ sumOfSquares }) => sumOfSquares <= least * (1 + SAME_SUM) + rounding)
    .reduce((a, b) => (b.isSolution && (!a.isSolution || b.cosine < a.cosine) ? b : a));
  return { best, tried: ends.length, agreeing: agreeing() };
}

const EXACT_FIT = 1e-13;
