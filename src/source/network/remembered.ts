/**
 * A function of one number that keeps its latest few answers. Searches ask again at the ends of
 * their brackets, and for a slope where they asked for a value. What is kept is what would be
 * computed again, so results do not depend on what was asked before.
 */
export function remembered(work: (x: number) => number): (x: number) => number {
  const keys = new Float64Array(KEPT).fill(NaN);
  const values = new Float64Array(KEPT);
  let oldest = 0;
  return (x) => {
    for (let slot = 0; slot < KEPT; slot++) if (keys[slot] === x) return values[slot]!;
    const value = work(x);
    keys[oldest] = x;
    values[oldest] = value;
    oldest = (oldest + 1) % KEPT;
    return value;
  };
}

const KEPT = 4;
