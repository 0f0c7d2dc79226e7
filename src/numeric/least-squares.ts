/**
 * Nonlinear least squares inside a box, after K. Levenberg (Quarterly of Applied Mathematics 2,
 * 1944, 164-168) and D. W. Marquardt (SIAM Journal 11, 1963, 431-441), with the scaling of
 * J. J. Moré (Lecture Notes in Mathematics 630, 1978, 105-116) and the damping of H. B. Nielsen
 * (report IMM-REP-1999-05, Technical University of Denmark).
 */
import { argumentFault } from '../fault.js';
import { DampedStep } from './damped-step.js';
import type {
  LeastSquaresEnd,
  LeastSquaresOptions,
  LeastSquaresProblem,
  LeastSquaresResult,
} from './least-squares-problem.js';

/**
 * A local minimum of the sum of squared residuals, from a start.
 *
 * Each step solves the damped linear problem by orthogonal reduction, never by normal equations.
 * Parameters at a bound whose slope points outwards are left out of it; a step is cut off at the
 * box component by component. As damping grows the step turns into a scaled gradient step, whose
 * cut-off lowers the sum if it is short enough, so a search gets stuck only at a minimum of the box
 * (or on a derivative that is wrong).
 *
 * Where a step promises less than the rounding of the sum can show, it is judged by whether it
 * lowers the cosine by a tenth instead; so the parameters come out as well as their gradient determines them
 * (about the condition number times 1e-15) and not only to the square root of that.
 *
 * Deterministic; allocates once. @throws Fault ARGUMENT.
 */
export function leastSquares(
  problem: LeastSquaresProblem,
  start: Readonly<ArrayLike<number>>,
  options: LeastSquaresOptions = {},
): LeastSquaresResult {
  const { iterationLimit = 200, rightAngle = 1e-14 } = options;
  checkArguments(problem, start, options);
  let here = new DampedStep(problem, start, options);
  let damping = FIRST_DAMPING;
  let growth = 2;
  for (let iterations = 1; ; iterations++) {
    if (!here.isFinite) return here.result('not-a-number', iterations);
    if (here.cosine <= rightAngle || here.isRounding) {
      return here.result('stationary', iterations);
    }
    if (iterations >= iterationLimit) return here.result('iteration-limit', iterations);
    for (;;) {
      const step = here.step(damping);
      if (step === undefined) return here.result(endWithoutStep(here), iterations);
      const { next, promised } = step;
      const gain = (here.sumOfSquares - next.sumOfSquares) / promised;
      if (promised > 0 && promised <= here.sumRounding) {
        next.differentiate();
        if (!(next.cosine < LESS_SLANTED * here.cosine)) {
          return here.result(endWithoutStep(here), iterations);
        }
        here = next;
        break;
      }
      if (promised > 0 && gain > LEAST_GAIN) {
        next.differentiate();
        here = next;
        const miss = 2 * gain - 1;
        damping *= Math.max(1 / 3, 1 - miss * miss * miss);
        growth = 2;
        break;
      }
      damping *= growth;
      growth *= 2;
    }
  }
}

// Much damping makes any step short and any promise small, so only what the undamped step promises
// tells a minimum from a derivative that is wrong.
const endWithoutStep = (here: DampedStep): LeastSquaresEnd =>
  here.mostPromised <= MANY * here.sumRounding ? 'rounding' : 'stuck';

const FIRST_DAMPING = 1e-3;
const LEAST_GAIN = 1e-4;
const MANY = 100;
const LESS_SLANTED = 0.9;

function checkArguments(
  { residualCount }: LeastSquaresProblem,
  start: Readonly<ArrayLike<number>>,
  { lower, upper }: LeastSquaresOptions,
): void {
  if (!(Number.isSafeInteger(residualCount) && residualCount >= 1)) {
    throw argumentFault('residualCount', 'an integer of at least 1', residualCount);
  }
  if (start.length === 0) throw argumentFault('start', 'at least one parameter', 'none');
  for (const [name, bounds] of [
    ['lower', lower],
    ['upper', upper],
  ] as const) {
    if (bounds !== undefined && bounds.length !== start.length) {
      throw argumentFault(name, `${start.length} bounds`, bounds.length);
    }
  }
  for (let j = 0; j < start.length; j++) {
    if (!((lower?.[j] ?? -Infinity) <= (upper?.[j] ?? Infinity))) {
      throw argumentFault(`upper[${j}]`, `at least ${lower?.[j]}`, upper?.[j]);
    }
  }
}
