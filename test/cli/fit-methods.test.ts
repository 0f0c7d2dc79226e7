/** `fit` with its methods and what settles the ideality factor; commands.test.ts has the rest. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { DEMO, run } from './run-program.js';

const module = join(DEMO, 'module.yaml');

let folder: string;
beforeAll(() => {
  folder = newFolder();
});

/** The demo module with a change. */
function changed(name: string, from: string, to: string): string {
  const file = join(folder, name);
  const text = readFileSync(module, 'utf8');
  expect(text).toContain(from);
  writeFileSync(file, text.replace(from, to));
  return file;
}

interface FitJson {
  readonly method: string;
  readonly solved: boolean;
  readonly parameters: Record<string, number>;
  readonly rounding?: Record<string, [number, number]> & { guaranteed: boolean };
  readonly feasible_ideality?: { least: number; most: number; mostEnd: string };
  readonly fifth_condition?: { name: string; met: boolean };
  readonly agreements: { field: string; miss: number }[];
  readonly remedies?: { field: string }[];
}
const json = (args: readonly string[]): FitJson =>
  JSON.parse(run(['fit', ...args, '--json']).stdout) as FitJson;

describe('fit', () => {
  test('is exact by default, tells the feasible range and what settled A', () => {
    const { status, stdout, stderr } = run(['fit', module]);
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout).toContain('Exact solution: short circuit, open circuit and the peak are met');
    expect(stdout).toMatch(/exactly for A from 0\.667 to 1\.195 \(there no shunt path is left\)/);
    expect(stdout).toContain('the coefficient of Voc settles A = 1.02');
    expect(stdout).toMatch(/beta_voc_mV_per_K .* 0\.000 %/);
    const { feasible_ideality: feasible, fifth_condition: fifth } = json([module]);
    expect(feasible).toMatchObject({ mostEnd: 'shunt-path' });
    expect(fifth).toMatchObject({ name: 'beta', met: true });
  });

  test('bounds what rounding alone does to each parameter, by the digits in the file', () => {
    const { stdout } = run(['fit', module]);
    expect(stdout).toMatch(/parameter at STC +rounding alone: from +to/);
    const { rounding, parameters } = json([module]);
    expect(rounding!.guaranteed).toBe(true);
    for (const [name, value] of Object.entries(parameters)) {
      const [low, high] = rounding![name]!;
      expect(low).toBeLessThan(value);
      expect(high).toBeGreaterThan(value);
    }
    // A zero written out says that the digit is known.
    const finer = json([changed('finer.yaml', 'voc_V: 38.1', 'voc_V: 38.100')]).rounding!;
    const width = ([low, high]: [number, number]): number => high - low;
    expect(width(finer['series_resistance_ohm']!)).toBeLessThan(
      0.9 * width(rounding!['series_resistance_ohm']!),
    );
  });

  test('shows every method side by side with what each meets and misses', () => {
    const { status, stdout, stderr } = run(['fit', module, '--method', 'all']);
    expect([status, stderr]).toEqual([0, '']);
    for (const title of ['Exact solution:', 'Simultaneous solution:', 'Sweep of the ideality']) {
      expect(stdout).toContain(title);
    }
    expect(stdout).toMatch(/parameter at STC +exact +simultaneous +sweep/);
    expect(stdout).toMatch(/beta_voc_mV_per_K +-137\.16( +-?0\.\d{3} %){3}/);
    const { methods } = JSON.parse(run(['fit', module, '--method', 'all', '--json']).stdout) as {
      methods: FitJson[];
    };
    expect(methods.map(({ method }) => method)).toEqual(['exact', 'simultaneous', 'sweep']);
    for (const each of methods) {
      const alone = json([module, '--method', each.method]);
      expect(each.parameters).toEqual(alone.parameters);
      expect(each.agreements).toEqual(alone.agreements);
    }
  });

  test('shows every method although none has a solution', () => {
    const square = changed('square.yaml', 'imp_A: 8.67', 'imp_A: 9.1');
    const { status, stdout } = run(['fit', square, '--method', 'all']);
    expect(status).toBe(0);
    expect(stdout).toContain('Exact solution (no solution; the nearest): the knee is squarer');
  });

  test.each([
    [['--meet', 'gamma'], 'gamma'],
    [['--meet', 'slope-at-isc'], 'slope-at-isc'],
    [['--meet', 'typical'], 'typical'],
    [['--ideality', '1.1'], 'ideality'],
  ])('takes %j to settle A', (options, name) => {
    const { fifth_condition: fifth, parameters } = json([module, ...options]);
    expect(fifth!.name).toBe(name);
    if (name === 'ideality') expect(parameters['ideality_factor']).toBeCloseTo(1.1, 12);
  });

  test('says which number of an infeasible datasheet to check first, and ends with exit code 1', () => {
    const square = changed('too-square.yaml', 'imp_A: 8.67', 'imp_A: 9.1');
    const { status, stderr } = run(['fit', square]);
    expect(status).toBe(1);
    expect(stderr).toMatch(/^No curve meets this datasheet: the knee is squarer than any/);
    expect(stderr).toMatch(
      /^check imp_A first, found 9\.1: the nearest feasible is imp_A 8\.\d+ /m,
    );
    expect(json([square]).remedies![0]!.field).toBe('imp_A');
  });

  test('warns where the coefficient of Voc is met by no feasible curve', () => {
    const file = changed('steep.yaml', 'beta_voc_pct_per_K: -0.36', 'beta_voc_pct_per_K: -0.52');
    const { status, stderr } = run(['fit', file]);
    expect(status).toBe(0);
    expect(stderr).toMatch(/warning .*comes nearest to the coefficient of Voc, which it misses by/);
    expect(stderr).toContain('--meet gamma');
  });

  test.each([
    [['--method', 'best'], "option '--method <method>' argument 'best' is invalid"],
    [['--meet', 'voc'], "option '--meet <condition>' argument 'voc' is invalid"],
    [['--ideality', '0'], 'Expected a number from 0.1 to 10.'],
    [['--ideality', '1', '--meet', 'beta'], "'--ideality <A>' cannot be used with option '--meet"],
    [['--meet', 'slope-at-voc'], 'must be a condition that the datasheet gives a number for'],
    [['--method', 'all', '-o', 'model.yaml'], '--output: must be given with one method'],
  ])('refuses %j with exit code 2', (options, message) => {
    const { status, stdout, stderr } = run(['fit', module, ...options], folder);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).toContain(message);
  });
});
