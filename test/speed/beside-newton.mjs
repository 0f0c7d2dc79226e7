/** A solver of the library beside the same work in C: speed by turns, and that both agree. */
import { newtonProgram } from './newton-program.mjs';
import { leastByTurns, secondsOf } from './processor-time.mjs';
import { POINTS } from './solver-inputs.mjs';

const WARM_UP_PASSES = 30;
/** A turn takes about 50 ms, long enough for several collections of what it leaves behind. */
const PASSES = 8;
const ROUNDS = 20;
/** Amperes. Both solvers claim far less; a wrong formula misses by far more. */
const AGREEMENT = 1e-9;

/**
 * @param builds Programs made of newton.c: `{ folder, binary, name }`; may be none.
 * @param kernel The one of newton.c that does the same work.
 * @param run Computes the currents of the inputs into `currents`.
 * @returns A row for each build, or one without a rival; see `run.mjs`.
 * @throws Error if the currents of both differ.
 */
export function besideNewton(builds, { what, kernel, inputs, run, currents, targets = {} }) {
  const programs = builds.map(({ folder, binary }) =>
    newtonProgram(folder, binary, kernel, inputs),
  );
  for (let pass = 0; pass < WARM_UP_PASSES; pass += 1) run();
  const turns = [() => secondsOf(run, PASSES), ...programs.map((c) => () => c.seconds(PASSES))];
  const [ours, ...theirs] = leastByTurns(turns, ROUNDS).map((s) => (POINTS * PASSES) / s);
  const row = { what, unit: 'points/s', ours };
  if (builds.length === 0) return [row];
  return builds.map(({ name }, index) => {
    const difference = largestDifference(currents, programs[index].currents());
    if (!(difference < AGREEMENT)) {
      throw new Error(`${what}: the currents differ from those of C ${name} by ${difference} A.`);
    }
    return {
      ...row,
      rival: `C ${name}`,
      theirs: theirs[index],
      ratio: ours / theirs[index],
      atLeast: targets[name],
      difference_A: difference,
    };
  });
}

function largestDifference(a, b) {
  if (a.length !== b.length) return NaN;
  return a.reduce((most, value, index) => Math.max(most, Math.abs(value - b[index])), 0);
}
