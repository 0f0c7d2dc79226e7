/**
 * The elementary functions of dist/numeric beside the engine's own, on the arguments they meet in
 * use: exponents of diodes, ratios of currents.
 */
import { exp, expm1 } from '../../dist/numeric/exponential.js';
import { log, log1p } from '../../dist/numeric/logarithm.js';

const ARGUMENTS = 4096;
const REPETITIONS = 1500;

const CASES = [
  { name: 'exp', range: [-50, 50], ours: exp },
  { name: 'expm1', range: [-5, 40], ours: expm1 },
  { name: 'log', range: [0.001, 100], ours: log },
  { name: 'log1p', range: [-0.9, 100], ours: log1p },
];

/**
 * Nanoseconds a call takes in a loop over a typed array, loop included: the best of many short
 * runs, ours and the engine's by turns, so that both meet the same state of the machine.
 * @returns {Promise<{ name: string, ours_ns: number, theirs_ns: number, ratio: number }[]>}
 * `ratio` is ours over theirs: below 1 is faster than the engine.
 */
export async function measure() {
  return CASES.map(({ name, range: [low, high], ours }) => {
    const xs = evenlySpread(low, high);
    const runOurs = loopOver(ours);
    const runTheirs = loopOver(Math[name]);
    let [oursBest, theirsBest] = [Infinity, Infinity];
    for (let i = 0; i < REPETITIONS; i += 1) {
      oursBest = Math.min(oursBest, nanoseconds(runOurs, xs));
      theirsBest = Math.min(theirsBest, nanoseconds(runTheirs, xs));
    }
    const [ours_ns, theirs_ns] = [oursBest / ARGUMENTS, theirsBest / ARGUMENTS];
    return { name, ours_ns, theirs_ns, ratio: ours_ns / theirs_ns };
  });
}

/** Spread by the golden ratio, in no order a branch predictor could learn. */
function evenlySpread(low, high) {
  return Float64Array.from(
    { length: ARGUMENTS },
    (_, i) => low + (high - low) * ((i * 0.6180339887498949) % 1),
  );
}

let loops = 0;

/**
 * A loop of its own for each function. Equal source texts would share the engine's notes on what
 * they call, and the second function would pay for the first; a number makes them differ.
 */
function loopOver(f) {
  loops += 1;
  return new Function(
    'f',
    `return function run(xs) { // ${loops}
      let sum = 0;
      for (let i = 0; i < xs.length; i += 1) sum += f(xs[i]);
      return sum;
    }`,
  )(f);
}

function nanoseconds(run, xs) {
  const start = process.hrtime.bigint();
  const sum = run(xs);
  const duration = Number(process.hrtime.bigint() - start);
  if (Number.isNaN(sum)) throw new Error('The sum keeps the loop from being optimised away.');
  return duration;
}
