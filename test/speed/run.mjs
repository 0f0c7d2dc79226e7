/**
 * `npm run speed`: the library beside rivals that do the same work, in one run on one machine.
 * Only the ratios mean anything. Prints a table, or with `--json` one document.
 *
 * Each benchmark gives rows: `what`, `ours` and `theirs` in `unit`, the `rival`, the `ratio` of ours
 * to theirs, and the target, `atLeast` or `atMost`, where the project has set itself one.
 */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import * as changingConditions from './changing-conditions.mjs';
import * as elementaryFunctions from './elementary-functions.mjs';
import * as fixedCurve from './fixed-curve.mjs';
import { compileNewton } from './newton-program.mjs';
import { printRows } from './print-rows.mjs';
import * as startUp from './start-up.mjs';

const FLAGS = [['-O3'], ['-O3', '-march=native']];

const folder = mkdtempSync(join(tmpdir(), 'hillproof-speed-'));
try {
  const rows = await allRows();
  if (process.argv.includes('--json')) console.log(JSON.stringify({ rows }, undefined, 2));
  else printRows(rows);
} finally {
  rmSync(folder, { recursive: true });
}

async function allRows() {
  const builds = FLAGS.map((flags) => {
    return { folder, name: flags.join(' '), binary: compileNewton(folder, flags) };
  }).filter(({ binary }) => binary !== undefined);
  if (builds.length === 0) {
    console.error(`No C compiler (${process.env.CC ?? 'cc'}): the solvers run without a rival.`);
  }
  return [
    ...fixedCurve.measure(builds),
    ...changingConditions.measure(builds),
    ...(await elementaryFunctions.measure()).map(asRow),
    ...startUp.measure(),
  ];
}

/** The elementary functions report nanoseconds a call, ours over the engine's. */
function asRow({ name, ours_ns, theirs_ns, ratio }) {
  const [ours, theirs] = [1e9 / ours_ns, 1e9 / theirs_ns];
  return {
    ...{ what: name, unit: 'calls/s', ours, rival: `Math.${name}`, theirs, ratio: 1 / ratio },
    ...(name === 'exp' && { atLeast: 1 }),
  };
}
