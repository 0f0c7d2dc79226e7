import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { CELL_POINTS } from '../source/measured/easwarakhanthan.js';
import { newFolder } from '../new-folder.js';
import { DEMO, run } from './run-program.js';

const demo = join(DEMO, 'measured.csv');
const DEMO_OPTIONS = ['--cells', '60', '--temperature', '43', '--irradiance', '860'];
const CELL_OPTIONS = ['--cells', '1', '--temperature', '33', '--irradiance', '1000'];

const folder = newFolder();
const cell = join(folder, 'cell.csv');
writeFileSync(
  cell,
  `V,I\n${CELL_POINTS.map(({ voltage, current }) => `${voltage},${current}`).join('\n')}\n`,
);

const fitCurve = (file: string, ...options: string[]) => run(['fit-curve', file, ...options]);

interface CurveFit {
  readonly parameters: Record<string, { value: number; standard_error: number; standing: string }>;
  readonly rms_exact_A: number;
  readonly rms_implicit_A: number;
  readonly outliers: readonly { line: number }[];
  readonly outliers_left_out: boolean;
  readonly points: readonly unknown[];
}
const json = (file: string, ...options: string[]): CurveFit =>
  JSON.parse(fitCurve(file, ...options, '--json').stdout) as CurveFit;

describe('fit-curve', () => {
  test('reaches the published optimum of the 57 mm cell in both conventions', () => {
    // Easwarakhanthan et al. 1986; see test/published.
    expect(json(cell, ...CELL_OPTIONS).rms_exact_A).toBeLessThanOrEqual(7.7301e-4);
    const implicit = json(cell, ...CELL_OPTIONS, '--residual', 'implicit');
    expect(implicit.rms_implicit_A).toBeLessThanOrEqual(9.86022e-4);
    const double = json(cell, ...CELL_OPTIONS, '--model', 'double');
    expect(double.rms_exact_A).toBeLessThanOrEqual(7.32649e-4);
    expect(double.parameters['second_ideality_factor']).toMatchObject({
      value: 2,
      standing: 'at-bound',
    });
  });

  test('prints parameters with standard errors, both errors, the picture and no outlier', () => {
    const { status, stdout, stderr } = fitCurve(cell, ...CELL_OPTIONS);
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout).toMatch(/series resistance Rs +0\.03654\d+ +4\.93e-4 +ohm +determine it/);
    expect(stdout).toMatch(/exact: .* 0\.773006$/m);
    expect(stdout).toMatch(/implicit: .* 0\.98911$/m);
    expect(stdout).toContain('size of residual');
    expect(stdout).toContain('8 of 8 searches led to this optimum.');
    expect(stdout).toContain('No point is an outlier.');
  });

  test('reports the outlier of the demo by its line, and leaves it out on request', () => {
    const { stderr, stdout } = fitCurve(demo, ...DEMO_OPTIONS);
    expect(stderr).toContain('measured.csv:21: 17.388 V, 7.597 A is 184 mA off the curve');
    expect(stderr).toContain('fitted all the same.\n  Check the point');
    expect(stdout).toContain('Outliers, part of the fit:');
    const without = fitCurve(demo, ...DEMO_OPTIONS, '--without-outliers');
    expect(without.stdout).toContain('Outliers, left out of the fit:');
    expect(without.stderr).toContain('left out.');
    const { outliers, outliers_left_out, points } = json(
      demo,
      ...DEMO_OPTIONS,
      '--without-outliers',
    );
    expect([outliers.map(({ line }) => line), outliers_left_out, points.length]).toEqual([
      [21],
      true,
      47,
    ]);
  });

  test('says which parameters the points leave open', () => {
    const { stderr } = fitCurve(cell, ...CELL_OPTIONS, '--model', 'double');
    expect(stderr).toContain('ideality factor of the second diode: held by a bound');
    expect(stderr).toContain('saturation current: these points hardly determine it');
  });

  test('writes a model file whose curve, at the conditions measured, is the one fitted', () => {
    const model = join(folder, 'model.yaml');
    const options = [...DEMO_OPTIONS, '--technology', 'poly-si', '--without-outliers'];
    const { status, stderr } = fitCurve(demo, ...options, '--alpha', '4.1', '-o', model);
    expect(status).toBe(0);
    expect(stderr).toContain(`of polycrystalline silicon, written to ${model}.`);
    expect(readFileSync(model, 'utf8')).toContain('alpha_isc_A_per_K: 0.0041\n');
    const args = ['curve', model, '--irradiance', '860', '--temperature', '43', '--json'];
    const curve = JSON.parse(run(args).stdout) as { isc_A: number; voc_V: number };
    const fit = json(demo, ...options) as unknown as typeof curve;
    expect(curve.isc_A / fit.isc_A).toBeCloseTo(1, 12);
    expect(curve.voc_V / fit.voc_V).toBeCloseTo(1, 12);
  });

  test('gives the same bytes for the same file', () => {
    const [first, second] = [1, 2].map(() => fitCurve(demo, ...DEMO_OPTIONS, '--json').stdout);
    expect(first).toBe(second);
  });
});

describe('fit-curve refuses', () => {
  const refused = (text: string, ...options: string[]) => {
    const place = newFolder();
    writeFileSync(join(place, 'c.csv'), text);
    const { status, stdout, stderr } = run(
      ['fit-curve', 'c.csv', ...CELL_OPTIONS, ...options],
      place,
    );
    expect([status, stdout]).toEqual([2, '']);
    return stderr;
  };

  test('a call without the number of cells', () => {
    const { status, stderr } = fitCurve(demo, '--temperature', '43', '--irradiance', '860');
    expect(status).toBe(2);
    expect(stderr).toContain("required option '--cells <N>' not specified");
  });

  test('a word among the numbers, with its place', () => {
    expect(refused('V,I\n0,5\n0.1,five\n')).toBe(
      'error INVALID_VALUE c.csv:3:5: I: must be a number, found "five".\n',
    );
  });

  test('fewer points than parameters, with the file', () => {
    expect(refused('V,I\n0,5\n0.1,4.9\n0.3,4\n0.5,0\n')).toBe(
      'error MEASURED_CURVE c.csv: the curve has 4 different voltages; the 5 parameters of the ' +
        'single-diode equation need at least as many.\n',
    );
  });

  test('currents counted as a load does, until told so', () => {
    const text = `V,I\n${CELL_POINTS.map((p) => `${p.voltage},${-p.current}`).join('\n')}\n`;
    expect(refused(text)).toContain('turn their sign (--negate-current)');
    const file = join(folder, 'load.csv');
    writeFileSync(file, text);
    expect(json(file, ...CELL_OPTIONS, '--negate-current').rms_exact_A).toBeLessThan(7.7301e-4);
  });

  test('a model file without what translation needs, before any work', () => {
    const { status, stderr } = fitCurve('nowhere.csv', ...CELL_OPTIONS, '-o', 'm.yaml');
    expect(status).toBe(2);
    expect(stderr).toContain('error NO_MODULE --alpha: is missing');
    const double = fitCurve('nowhere.csv', ...CELL_OPTIONS, '-o', 'm.yaml', '--model', 'double');
    expect(double.stderr).toContain('error NO_MODULE --output: a model file holds a single-diode');
  });

  test('nothing, but warns, where the voltage of a cell is odd: cells miscounted', () => {
    const options = ['--cells', '6', '--temperature', '43', '--irradiance', '860'];
    const { status, stderr } = fitCurve(demo, ...options);
    expect(status).toBe(0);
    expect(stderr).toContain('open circuit lies at 5.94 V a cell; expected 0.3 to 1.3 V');
  });
});
