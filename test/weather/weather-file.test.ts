import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { z } from 'zod';
import { hold, ramp, repeat, sequence, step, trapezoids } from '../../src/weather/blocks.js';
import { weatherDefinition } from '../../src/weather/definition.js';
import { compileWeather, loadWeather } from '../../src/weather/load.js';
import type { Weather } from '../../src/weather/weather.js';
import { celsiusAt, irradianceAt, markText, problemsOf, weatherIn } from './reading.js';

const MORNING = `
name: slow dawn, then cloud
cell_temperature_C: 5
irradiance_W_per_m2: 20
blocks:
  - hold: { for_s: 60 }
  - step: { irradiance_W_per_m2: 800, cell_temperature_C: 31 }
  - ramp: { irradiance_W_per_m2: 300, for_s: 20 }
  - ramp: { irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 50, cell_temperature_C: 45 }
  - repeat:
      times: 3
      blocks:
        - sequence:
            name: dip
            blocks:
              - ramp: { irradiance_W_per_m2: 400, slope_W_per_m2_per_s: 100 }
              - ramp: { irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 100 }
        - hold: { for_s: 30 }
  - trapezoids: { table: medium-high, slopes_W_per_m2_per_s: [50], settle_s: 60 }
`;

const summary = (weather: Weather): unknown => ({
  name: weather.name,
  groups: weather.groups,
  duration: weather.duration,
  marks: [...weather.marks()].map(markText),
  course: Array.from({ length: 100 }, (_, index) => {
    const time = (index * weather.duration) / 99;
    return [irradianceAt(weather, time), celsiusAt(weather, time)];
  }),
});

describe('a weather file', () => {
  it('says what happens, block by block', () => {
    const weather = weatherIn(MORNING);
    expect(weather.name).toBe('slow dawn, then cloud');
    expect(weather.duration).toBe(60 + 20 + 12 + 3 * (5 + 5 + 30) + 60 + 10 * (14 + 14 + 20));
    const course = [0, 60, 70, 80, 86, 92, 97, 102, 132, 137, 212, 272, 279, 286];
    expect(course.map((time) => irradianceAt(weather, time))).toEqual([
      20, 800, 550, 300, 600, 900, 400, 900, 900, 400, 300, 300, 650, 1000,
    ]);
    expect([0, 60, 80, 86, 92, 500].map((time) => celsiusAt(weather, time))).toEqual([
      5, 31, 31, 38, 45, 45,
    ]);
    expect([...weather.marks()].map(markText).slice(0, 4)).toEqual([
      'pass 1 / dip: 92 to 102',
      'pass 2 / dip: 132 to 142',
      'pass 3 / dip: 172 to 182',
      'medium-high 50 W/m²/s: 212 to 752',
    ]);
  });

  it('means what the same blocks written in code mean', () => {
    const dip = sequence(
      [
        ramp({ irradiance_W_per_m2: 400, slope_W_per_m2_per_s: 100 }),
        ramp({ irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 100 }),
      ],
      'dip',
    );
    const inCode = compileWeather({
      name: 'slow dawn, then cloud',
      cell_temperature_C: 5,
      irradiance_W_per_m2: 20,
      blocks: [
        hold(60),
        step({ irradiance_W_per_m2: 800, cell_temperature_C: 31 }),
        ramp({ irradiance_W_per_m2: 300, for_s: 20 }),
        ramp({ irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 50, cell_temperature_C: 45 }),
        repeat(3, [dip, hold(30)]),
        trapezoids({ table: 'medium-high', slopes_W_per_m2_per_s: [50], settle_s: 60 }),
      ],
    });
    expect(summary(inCode)).toEqual(summary(weatherIn(MORNING)));
  });

  it('may reuse blocks by an alias', () => {
    const weather = weatherIn(
      'name: twice\nblocks:\n  - sequence: &half { blocks: [ hold: { for_s: 4 } ] }\n  - sequence: *half\n',
    );
    expect(weather.duration).toBe(8);
  });

  it('is read from the disk, and missed by name', () => {
    const folder = mkdtempSync(join(tmpdir(), 'weather-'));
    onTestFinished(() => {
      rmSync(folder, { recursive: true });
    });
    const file = join(folder, 'morning.yaml');
    writeFileSync(file, MORNING);
    expect(summary(loadWeather(file))).toEqual(summary(weatherIn(MORNING)));
    const absent = join(folder, 'evening.yaml');
    expect(problemsOf(() => loadWeather(absent))).toMatchObject([
      { code: 'FILE_MISSING', file: absent },
    ]);
  });
});

describe('the schema of a weather file', () => {
  const schema = z.toJSONSchema(weatherDefinition, { io: 'input' });

  it('describes every key', () => {
    const bare: string[] = [];
    let described = 0;
    const visit = (node: unknown, path: string): void => {
      if (typeof node !== 'object' || node === null) return;
      for (const [key, value] of Object.entries(node)) {
        if (key === 'properties') {
          for (const [name, property] of Object.entries(value as Record<string, object>)) {
            if ('description' in property || '$ref' in property) described++;
            else bare.push(`${path}.${name}`);
          }
        }
        visit(value, `${path}.${key}`);
      }
    };
    visit(schema, '');
    expect(bare).toEqual([]);
    expect(described).toBeGreaterThan(20);
    expect(schema.$defs!['__schema0']).toHaveProperty('description');
  });

  it('states the ranges that the program holds', () => {
    expect(schema).toMatchObject({
      additionalProperties: false,
      properties: {
        irradiance_W_per_m2: { minimum: 0, maximum: 2000, default: 0 },
        cell_temperature_C: { minimum: -60, maximum: 120, default: 25 },
      },
      $defs: { weatherBlock: { minProperties: 1, maxProperties: 1 } },
    });
  });
});
