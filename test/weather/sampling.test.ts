import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sampleCount } from '../../src/weather/sampling.js';
import { TIME_SLACK } from '../../src/weather/time-slack.js';
import { problemsOf } from './reading.js';

describe('the number of samples', () => {
  it.each([
    [60, 0.1, 601],
    [0.3, 0.1, 4],
    [0.9, 0.3, 4],
    [1, 0.3, 4],
    [0.1 + 0.2, 0.3, 2],
    [0, 5, 1],
    [4.999, 5, 1],
    [5, 5, 2],
    [1e10, 1, 10_000_000_001],
  ])('of %d s in steps of %d s is %d', (duration, period, count) => {
    expect(sampleCount(duration, period)).toBe(count);
  });

  it('counts both ends of whole numbers of decimal periods, however they round', () => {
    const microseconds = fc.integer({ min: 1, max: 10_000_000 });
    const periods = fc.integer({ min: 0, max: 1_000_000 });
    fc.assert(
      fc.property(microseconds, periods, (period, count) => {
        expect(sampleCount((count * period) / 1e6, period / 1e6)).toBe(count + 1);
        expect(sampleCount(count * (period / 1e6), period / 1e6)).toBe(count + 1);
      }),
      { seed: 6001, numRuns: 5000 },
    );
  });

  it('does not count a sample that is missed by a thousand-millionth of a period', () => {
    const count = fc.integer({ min: 1, max: 1000 });
    const period = fc.double({ min: 1e-6, max: 1e3, noNaN: true });
    fc.assert(
      fc.property(count, period, (whole, step) => {
        expect(sampleCount((whole - 1e-9) * step, step)).toBe(whole);
      }),
      { seed: 6002, numRuns: 2000 },
    );
  });

  it.each([
    [-1, 1, 'duration'],
    [NaN, 1, 'duration'],
    [Infinity, 1, 'duration'],
    [1, 0, 'period'],
    [1, -0.1, 'period'],
    [1, NaN, 'period'],
    [1, Infinity, 'period'],
    [1e10, 1e-3, 'period'],
    [1, 5e-324, 'period'],
  ])('is refused for %d s in steps of %d s', (duration, period, field) => {
    expect(problemsOf(() => sampleCount(duration, period))).toMatchObject([
      { code: 'ARGUMENT', field },
    ]);
  });
});

describe('the slack of times', () => {
  it('is 256 roundings of a double', () => {
    expect(TIME_SLACK).toBe(256 * 2 ** -53);
  });
});
