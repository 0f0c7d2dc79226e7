import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hold, ramp, repeat, sequence, step } from '../../src/weather/blocks.js';
import type { Block } from '../../src/weather/definition.js';
import { TIME_SLACK } from '../../src/weather/time-slack.js';
import { irradianceAt, markText, weatherOf } from './reading.js';

const MILLION = 1_000_000;

describe('a repeat of a million passes', () => {
  const square = weatherOf(
    repeat(MILLION, [
      step({ irradiance_W_per_m2: 800 }),
      hold(0.2),
      step({ irradiance_W_per_m2: 200 }),
      hold(0.5),
    ]),
  );

  it('lasts a million times as long', () => {
    // 0.2 and 0.5 are no doubles: their sum is right to one unit in the last place, 2^-53 of it.
    expect(Math.abs(square.duration / 700_000 - 1)).toBeLessThanOrEqual(2.3e-16);
  });

  it('shows the start of a pass at every seam, and its end just before', () => {
    const pass = fc.integer({ min: 1, max: MILLION - 1 });
    fc.assert(
      fc.property(pass, (passed) => {
        expect(irradianceAt(square, passed * 0.7)).toBe(800);
        expect(irradianceAt(square, (passed * 7) / 10)).toBe(800);
        expect(irradianceAt(square, passed * 0.7 * (1 - 2 * TIME_SLACK))).toBe(200);
      }),
      { seed: 7001, numRuns: 2000 },
    );
  });

  it('differs between the k-th pass and the second by no more than the stated bound', () => {
    const period = 0.3 + 0.7;
    const triangle = weatherOf(
      ramp({ irradiance_W_per_m2: 100, for_s: 0.1 }),
      repeat(MILLION, [
        ramp({ irradiance_W_per_m2: 1000, for_s: 0.3 }),
        ramp({ irradiance_W_per_m2: 100, for_s: 0.7 }),
      ]),
    );
    const steepest = 900 / 0.3;
    const pass = fc.integer({ min: 1, max: MILLION - 1 });
    const phase = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(pass, phase, (passed, part) => {
        const time = 0.1 + passed * period + part;
        const second = irradianceAt(triangle, 0.1 + period + part);
        const later = irradianceAt(triangle, time);
        // Both samples are off by their own times' slack.
        const bound = steepest * TIME_SLACK * (time + 0.1 + period + part);
        expect(Math.abs(later - second)).toBeLessThanOrEqual(bound);
      }),
      { seed: 7002, numRuns: 2000 },
    );
  });

  it('is exact where the times are', () => {
    const saw = weatherOf(
      repeat(MILLION, [
        ramp({ irradiance_W_per_m2: 1000, for_s: 0.75 }),
        ramp({ irradiance_W_per_m2: 200, for_s: 0.5 }),
      ]),
    );
    const pass = fc.integer({ min: 1, max: MILLION - 1 });
    const tick = fc.integer({ min: 0, max: 1279 });
    fc.assert(
      fc.property(pass, tick, (passed, ticks) => {
        const phase = ticks / 1024;
        expect(irradianceAt(saw, passed * 1.25 + phase)).toBe(irradianceAt(saw, 1.25 + phase));
      }),
      { seed: 7003, numRuns: 2000 },
    );
  });

  it('gives the marks of its first passes without making the others', () => {
    const weather = weatherOf(repeat(1e9, [sequence([hold(2)], 'dip')]));
    const firstTwo: string[] = [];
    for (const mark of weather.marks()) {
      firstTwo.push(markText(mark));
      if (firstTwo.length === 2) break;
    }
    expect(firstTwo).toEqual(['pass 1 / dip: 0 to 2', 'pass 2 / dip: 2 to 4']);
  });
});

describe('repeats inside repeats', () => {
  it('sixteen deep around many blocks are compiled without doubling at every level', () => {
    // Doubling would make 2^16 copies of these 2000 ramps: more than the memory holds.
    const up = ramp({ irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 50 });
    const down = ramp({ irradiance_W_per_m2: 400, slope_W_per_m2_per_s: 50 });
    let blocks: Block[] = Array.from({ length: 1000 }, () => [up, down]).flat();
    for (let level = 0; level < 16; level++) {
      blocks = [ramp({ cell_temperature_C: level, for_s: 1 }), repeat(2, blocks)];
    }
    // Outermost pass counts: 2^16 bodies of 2000 ramps of 10 s, the very first of them 8 s longer,
    // and 2^level ramps of 1 s at every level.
    expect(weatherOf(...blocks).duration).toBe(65_536 * 20_000 + 8 + 65_535);
  });

  it('make a thousand million passes of three levels that end as one does', () => {
    const cycle = [
      step({ irradiance_W_per_m2: 700 }),
      hold(1),
      step({ irradiance_W_per_m2: 100 }),
      hold(1),
    ];
    const weather = weatherOf(repeat(1000, [repeat(1000, [repeat(1000, cycle)])]));
    expect(weather.duration).toBe(2e9);
    expect(irradianceAt(weather, 1_234_567_890)).toBe(700);
    expect(irradianceAt(weather, 1_234_567_891)).toBe(100);
    expect(irradianceAt(weather, 1_999_999_999.5)).toBe(100);
  });
});
