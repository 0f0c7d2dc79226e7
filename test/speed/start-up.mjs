/** How long the program takes to show its help, beside a Node that does nothing. */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { leastByTurns } from './processor-time.mjs';

const PROGRAM = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));
const ROUNDS = 15;

export function measure() {
  const [ours, theirs] = leastByTurns(
    [() => secondsOfNode(PROGRAM, '--help'), () => secondsOfNode('-e', '0')],
    ROUNDS,
  );
  const what = 'time to show help';
  const ratio = ours / theirs;
  return [{ what, unit: 's', ours, rival: 'node -e 0', theirs, ratio, atMost: 1.5 }];
}

/** By the clock: what a user waits. */
function secondsOfNode(...options) {
  const start = process.hrtime.bigint();
  const { error, status } = spawnSync(process.execPath, options, { stdio: 'ignore' });
  const seconds = Number(process.hrtime.bigint() - start) * 1e-9;
  if (error !== undefined || status !== 0) throw error ?? new Error(`${options} ends in ${status}`);
  return seconds;
}
