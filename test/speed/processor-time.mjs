/**
 * Timing on a machine that is shared: processor time instead of time on the clock, contestants by
 * turns so that a slow spell meets all of them, and the best turn of each.
 */

/** Seconds of this process so far, all threads: garbage collection and compilation count. */
export function processorTime() {
  const { user, system } = process.cpuUsage();
  return (user + system) * 1e-6;
}

/** Seconds of processor time that so many passes of `work` take. */
export function secondsOf(work, passes) {
  const start = processorTime();
  for (let pass = 0; pass < passes; pass += 1) work();
  return processorTime() - start;
}

/**
 * @param contestants Functions that give the seconds of one turn.
 * @returns The least seconds of each.
 */
export function leastByTurns(contestants, rounds) {
  const least = contestants.map(() => Infinity);
  for (let round = 0; round < rounds; round += 1) {
    contestants.forEach((turn, index) => {
      least[index] = Math.min(least[index], turn());
    });
  }
  return least;
}
