/**
 * The meaning of blocks spelled out the slow way, for comparison: every pass of every repeat is
 * written out as a straight line, and a reading searches the lines from the first.
 */
import type { Block } from '../../src/weather/definition.js';

/** Irradiance in W/m², cell temperature in °C. */
type Pair = readonly [irradiance: number, temperature: number];

interface Line {
  readonly from: Pair;
  readonly to: Pair;
  readonly time: number;
}

/** The lines in order, or undefined if the blocks have to be refused. */
export function writtenOut(blocks: readonly Block[], start: Pair): Line[] | undefined {
  const lines: Line[] = [];
  let now = start;
  const go = (to: Pair, time: number): boolean => {
    lines.push({ from: now, to, time });
    now = to;
    return Number.isFinite(time);
  };
  const run = (block: Block): boolean => {
    const { hold, step, ramp, repeat, sequence } = block;
    const change = step ?? ramp ?? {};
    const to = [change.irradiance_W_per_m2 ?? now[0], change.cell_temperature_C ?? now[1]] as const;
    if (hold !== undefined) return go(now, hold.for_s);
    if (step !== undefined) return go(to, 0);
    if (ramp?.for_s !== undefined) return go(to, ramp.for_s);
    if (ramp !== undefined) {
      return to[0] !== now[0] && go(to, Math.abs(to[0] - now[0]) / ramp.slope_W_per_m2_per_s!);
    }
    if (sequence !== undefined) return sequence.blocks.every(run);
    for (let pass = 0; pass < repeat!.times; pass++) {
      const first = lines.length;
      if (!repeat!.blocks.every(run)) return false;
      if (lines.slice(first).every((line) => line.time === 0)) return false;
    }
    return true;
  };
  return blocks.every(run) && lines.some((line) => line.time > 0) ? lines : undefined;
}

export const startsOf = (lines: readonly Line[]): number[] => {
  let start = 0;
  return lines.map((line) => (start += line.time) - line.time);
};

export const totalOf = (lines: readonly Line[]): number =>
  lines.reduce((sum, line) => sum + line.time, 0);

/** The last line that has begun, at its place or, beyond its end, at its end. */
export function readingOf(lines: readonly Line[], starts: readonly number[], time: number): Pair {
  const index = starts.findLastIndex((start) => start <= Math.max(0, time));
  const { from, to, time: length } = lines[index]!;
  const done = length === 0 ? 1 : Math.min(1, (Math.max(0, time) - starts[index]!) / length);
  const blend = (a: number, b: number): number => a * (1 - done) + b * done;
  return [blend(from[0], to[0]), blend(from[1], to[1])];
}

export const steepestOf = (lines: readonly Line[]): number =>
  lines.reduce(
    (most, { from, to, time }) =>
      time === 0 ? most : Math.max(most, Math.abs(to[0] - from[0]) / time),
    0,
  );
