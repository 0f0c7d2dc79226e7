import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { SMALL_MODEL } from '../vectors/small-suite.js';
import { DEMO, run } from './run-program.js';

const demo = join(DEMO, 'shaded-string.yaml');

const ARRAY = `array: roof
module: model.yaml
substrings_per_module: 3
groups: { sun: 1, tree: 0.4 }
strings:
  - modules: 4
    shade: { 2: tree, 3: [tree, sun, sun] }
`;

const SUITE = `suite: shaded
sources: { roof: roofs/array.yaml, one: roofs/model.yaml }
weather: weather.yaml
formats: { voltage: UQ7.9, current: UQ4.12 }
curves:
  points: 60
  grid: { irradiance_W_per_m2: [300, 1000], cell_temperature_C: [0, 60] }
timeline: { every_s: 1 }
`;

const WEATHER = `name: Small
irradiance_W_per_m2: 500
blocks: [{ ramp: { irradiance_W_per_m2: 900, for_s: 2 } }]
`;

let folder: string;
beforeAll(() => {
  folder = newFolder();
  mkdirSync(join(folder, 'roofs'));
  writeFileSync(join(folder, 'suite.yaml'), SUITE);
  writeFileSync(join(folder, 'weather.yaml'), WEATHER);
  writeFileSync(join(folder, 'roofs', 'array.yaml'), ARRAY);
  writeFileSync(join(folder, 'roofs', 'model.yaml'), SMALL_MODEL);
});

describe('curve of an array file', () => {
  test('shows every peak, names the global one, and marks them under the picture', () => {
    const { status, stdout, stderr } = run(['curve', demo]);
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout.match(/^ {2}global peak +[\d.]+ W at/gm)).toHaveLength(1);
    expect(stdout.match(/^ {2}local peak +[\d.]+ W at/gm)).not.toBeNull();
    expect(stdout).toMatch(/^ +G +\^$/m);
    expect(stdout).toContain('^ local peak   G global peak');
  });

  test('tells which cell takes most power, and how much', () => {
    const { stdout } = run(['curve', demo]);
    expect(stdout).toMatch(
      /hottest cell +takes [\d.]+ W at -[\d.]+ V at short circuit: string 1, module \d, substring \d/,
    );
  });

  test('gives the same as JSON, with the index of the global peak', () => {
    const { peaks, global_peak, hottest_cells } = JSON.parse(
      run(['curve', demo, '--json']).stdout,
    ) as {
      peaks: { power_W: number }[];
      global_peak: number;
      hottest_cells: unknown[];
    };
    expect(peaks.length).toBeGreaterThan(1);
    const most = Math.max(...peaks.map(({ power_W }) => power_W));
    expect(peaks[global_peak]!.power_W).toBe(most);
    expect(hottest_cells.length).toBeGreaterThan(0);
  });

  test('marks nothing where there is one peak', () => {
    const { stdout } = run(['curve', join(DEMO, 'module.yaml')]);
    expect(stdout).toMatch(/^ {2}peak +/m);
    expect(stdout).not.toContain('global peak');
  });
});

describe('a suite with an array', () => {
  test('is emitted with several peaks a curve, carries the module file, and verifies by itself', () => {
    const out = join(folder, 'out');
    const emitted = run(['emit', join(folder, 'suite.yaml'), '--out', out]);
    expect([emitted.status, emitted.stderr]).toEqual([0, '']);
    expect(readdirSync(join(out, 'inputs')).sort()).toEqual([
      'array.yaml',
      'model.yaml',
      'suite.yaml',
      'weather.yaml',
    ]);
    const peaks = readFileSync(join(out, 'shaded-roof-curves-peaks.csv'), 'utf8');
    // Four curves of two irradiances each, and a head.
    expect(
      peaks
        .trim()
        .split('\n')
        .filter((line) => /^\d/.test(line)),
    ).toHaveLength(8);
    const moved = join(folder, 'elsewhere');
    mkdirSync(moved);
    const { status, stdout } = run(['verify', out], moved);
    expect([status, stdout]).toEqual([0, expect.stringContaining('whole')]);
  });
});

describe('a wrong array file', () => {
  const curveOf = (text: string, name = 'wrong.yaml') => {
    const file = join(folder, 'roofs', name);
    writeFileSync(file, text);
    return run(['curve', file]);
  };

  test.each([
    ['names itself', ARRAY.replace('model.yaml', 'wrong.yaml'), 'NETWORK_LOOP'],
    ['names another array', ARRAY.replace('model.yaml', 'array.yaml'), 'ARRAY_IN_ARRAY'],
    ['names a module that is not there', ARRAY.replace('model.yaml', 'no.yaml'), 'FILE_MISSING'],
    ['leaves the module out', ARRAY.replace('module: model.yaml\n', ''), 'MISSING_KEY'],
  ])('that %s is refused with its line and field', (_, text, code) => {
    const { status, stdout, stderr } = curveOf(text);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).toContain(`error ${code} `);
    expect(stderr).toMatch(/wrong\.yaml:[12]:\d+: module: /);
  });

  test('that shades a module beyond the end is refused at that key', () => {
    const { status, stderr } = curveOf(ARRAY.replace('3: [tree', '5: [tree'));
    expect(status).toBe(2);
    expect(stderr).toMatch(/wrong\.yaml:7:\d+: strings\[0\]\.shade\.5: there is no module 5/);
  });

  test('that joins strings of unequal length gets a warning and its curve', () => {
    const { status, stderr } = curveOf(`${ARRAY}  - modules: 3\n`);
    expect(status).toBe(0);
    expect(stderr).toMatch(/warning .*wrong\.yaml:8:\d+: strings\[1\]\.modules: is 3/);
  });

  test('is refused before anything is written when a suite names it', () => {
    writeFileSync(join(folder, 'bad.yaml'), SUITE.replace('roofs/array.yaml', 'roofs/loop.yaml'));
    writeFileSync(join(folder, 'roofs', 'loop.yaml'), ARRAY.replace('model.yaml', 'loop.yaml'));
    const out = join(folder, 'never');
    const { status, stderr } = run(['emit', join(folder, 'bad.yaml'), '--out', out]);
    expect(status).toBe(2);
    expect(stderr).toContain('NETWORK_LOOP');
    expect(readdirSync(folder)).not.toContain('never');
  });
});
