import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TIME_SLACK } from '../../src/weather/time-slack.js';
import { celsiusAt, irradianceAt, problemsOf, weatherOf } from './reading.js';
import { randomBlocks } from './random-blocks.js';
import { readingOf, startsOf, steepestOf, totalOf, writtenOut } from './reference.js';

const START = [0, 25] as const;

/** W/m² and K: a blend of two values takes at most five roundings of 2^-53 of 2000. */
const ROUNDING = 5 * 2000 * 1.12e-16;
/** K: what `celsiusAt` rounds to. */
const CELSIUS_ROUNDING = 1e-9;

// Sixty-fourths of a second, whole levels and slopes that are powers of two: every duration, start
// and period is a double, and so the two ways must find the same line at every instant.
const exact = randomBlocks({
  duration: fc.integer({ min: 1, max: 640 }).map((ticks) => ticks / 64),
  slope: fc.integer({ min: -1, max: 6 }).map((power) => 2 ** power),
  steps: true,
});

describe('any blocks', () => {
  it('read as if every pass were written out, at all boundaries and between them', () => {
    fc.assert(
      fc.property(exact, fc.array(fc.nat(), { maxLength: 20 }), (blocks, others) => {
        const lines = writtenOut(blocks, START);
        fc.pre(lines !== undefined);
        const weather = weatherOf(...blocks);
        const total = totalOf(lines);
        expect(weather.duration).toBe(total);
        const starts = startsOf(lines);
        const between = others.map((ticks) => (ticks % (128 * total + 1)) / 128);
        for (const boundary of [...starts, total]) between.push(boundary - 1 / 256, boundary);
        for (const time of between) {
          const [irradiance, temperature] = readingOf(lines, starts, time);
          expect(Math.abs(irradianceAt(weather, time) - irradiance)).toBeLessThanOrEqual(ROUNDING);
          expect(Math.abs(celsiusAt(weather, time) - temperature)).toBeLessThanOrEqual(
            CELSIUS_ROUNDING,
          );
        }
      }),
      { seed: 5001, numRuns: 400 },
    );
  });

  it('are refused exactly if some pass has a slope without a change, or takes no time', () => {
    let refused = 0;
    fc.assert(
      fc.property(exact, (blocks) => {
        if (writtenOut(blocks, START) !== undefined) {
          weatherOf(...blocks);
          return;
        }
        refused++;
        const codes = problemsOf(() => weatherOf(...blocks)).map((problem) => problem.code);
        expect(['NOTHING_CHANGES', 'NO_DURATION']).toEqual(expect.arrayContaining(codes));
      }),
      { seed: 5002, numRuns: 1500 },
    );
    expect(refused).toBeGreaterThan(50);
  });

  it('without steps change no faster than their steepest ramp, across seams too', () => {
    const smooth = randomBlocks({
      duration: fc.double({ min: 1e-3, max: 100, noNaN: true }),
      slope: fc.double({ min: 0.1, max: 1000, noNaN: true }),
      steps: false,
    });
    const part = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(smooth, fc.array(fc.tuple(part, part), { maxLength: 20 }), (blocks, pairs) => {
        const lines = writtenOut(blocks, START);
        fc.pre(lines !== undefined);
        const weather = weatherOf(...blocks);
        const steepest = steepestOf(lines);
        // Near pairs at every boundary find a jump that far ones would hide.
        const near = startsOf(lines).map((start) => [start * (1 - 1e-9), start * (1 + 1e-9)]);
        const far = pairs.map((pair) => pair.map((place) => place * weather.duration));
        for (const [one, other] of [...near, ...far] as [number, number][]) {
          const change = Math.abs(irradianceAt(weather, one) - irradianceAt(weather, other));
          const apart = Math.abs(one - other) + 2 * TIME_SLACK * weather.duration;
          expect(change).toBeLessThanOrEqual(steepest * apart + 2 * ROUNDING);
        }
      }),
      { seed: 5003, numRuns: 300 },
    );
  });

  it('stay within the values they name', () => {
    fc.assert(
      fc.property(exact, fc.double({ min: 0, max: 1, noNaN: true }), (blocks, part) => {
        const lines = writtenOut(blocks, START);
        fc.pre(lines !== undefined);
        const weather = weatherOf(...blocks);
        const levels = lines.flatMap(({ from, to }) => [from[0], to[0]]);
        const irradiance = irradianceAt(weather, part * weather.duration);
        expect(irradiance).toBeGreaterThanOrEqual(Math.min(...levels));
        expect(irradiance).toBeLessThanOrEqual(Math.max(...levels));
      }),
      { seed: 5004, numRuns: 500 },
    );
  });

  it('read the same in whatever order the times come', () => {
    const times = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 2 });
    fc.assert(
      fc.property(exact, times, (blocks, parts) => {
        fc.pre(writtenOut(blocks, START) !== undefined);
        const readings = (order: number[]): Map<number, number> => {
          const weather = weatherOf(...blocks);
          return new Map(
            order.map((part) => [part, irradianceAt(weather, part * weather.duration)]),
          );
        };
        const inOrder = readings(parts.toSorted((a, b) => a - b));
        for (const [part, irradiance] of readings(parts))
          expect(inOrder.get(part)).toBe(irradiance);
      }),
      { seed: 5005, numRuns: 200 },
    );
  });
});

describe('decimal times', () => {
  // Milliseconds are whole numbers to the reference and rounded doubles to the weather.
  it('meet every boundary, whether sampled by a product or by a quotient', () => {
    const blocks = randomBlocks({
      duration: fc.integer({ min: 1, max: 2000 }).map((milliseconds) => milliseconds / 1000),
      steps: true,
    });
    fc.assert(
      fc.property(blocks, fc.integer({ min: 1, max: 50 }), (list, period) => {
        const lines = writtenOut(list, START)?.map((line) => ({
          ...line,
          time: Math.round(line.time * 1000),
        }));
        fc.pre(lines !== undefined);
        const weather = weatherOf(...list);
        const starts = startsOf(lines);
        const late = 2 * TIME_SLACK * weather.duration * 1000 * steepestOf(lines) + ROUNDING;
        for (const boundary of [...starts, totalOf(lines)]) {
          const nearest = Math.round(boundary / period);
          for (const time of [boundary * 0.001, boundary / 1000]) {
            const [irradiance] = readingOf(lines, starts, boundary);
            expect(Math.abs(irradianceAt(weather, time) - irradiance)).toBeLessThanOrEqual(late);
          }
          const [irradiance] = readingOf(lines, starts, nearest * period);
          const sampled = irradianceAt(weather, nearest * (period / 1000));
          expect(Math.abs(sampled - irradiance)).toBeLessThanOrEqual(late);
        }
      }),
      { seed: 5006, numRuns: 300 },
    );
  });
});
