import { spawnSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { DEMO, PROGRAM, run } from './run-program.js';

const module = join(DEMO, 'module.yaml');
const version = (
  JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8')) as {
    version: string;
  }
).version;

let folder: string;
beforeAll(() => {
  folder = newFolder();
});

describe('the program', () => {
  test('tells its version, which is that of the package', () => {
    expect(run(['--version'])).toEqual({ status: 0, stdout: `${version}\n`, stderr: '' });
  });

  test('lists every command in its help, with the exit codes and the safety note', () => {
    const { status, stdout } = run(['--help']);
    expect(status).toBe(0);
    for (const command of ['fit', 'curve', 'emit', 'verify', 'schema', 'demo']) {
      expect(stdout).toMatch(new RegExp(`^ {2}${command} `, 'm'));
    }
    expect(stdout).toContain('2 bad input or usage');
    expect(stdout).toContain('lethal DC voltages');
  });

  test('shows its help and ends with exit code 2 when called without a command', () => {
    const { status, stderr } = run([]);
    expect(status).toBe(2);
    expect(stderr).toContain('Usage: hillproof');
  });

  test('offers the nearest command for a word it does not know', () => {
    const { status, stderr, stdout } = run(['verfy']);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).toContain("error: unknown command 'verfy'");
    expect(stderr).toContain('Did you mean verify?');
  });

  test('names an option out of its range with what it expects', () => {
    const { status, stderr } = run(['curve', module, '--irradiance', 'bright']);
    expect(status).toBe(2);
    expect(stderr).toContain("'--irradiance <W/m2>' argument 'bright' is invalid");
    expect(stderr).toContain('Expected a number from 0 to 2000 W/m2.');
  });

  test('writes no escape sequences where there is no terminal', () => {
    expect(run(['fit', module]).stdout).not.toContain('\u001b');
    expect(run(['demo', '--out', join(folder, 'plain')]).stdout).not.toContain('\u001b');
  });
});

describe('fit', () => {
  test('prints five parameters, the method and how each datasheet number is met', () => {
    const { status, stdout, stderr } = run(['fit', module]);
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout).toContain('Exact solution');
    for (const name of ['Iph', 'I0', 'A', 'Rs', 'Rsh']) expect(stdout).toContain(` ${name} `);
    for (const field of ['isc_A', 'voc_V', 'vmp_V', 'imp_A', 'pmp_W']) {
      expect(stdout).toMatch(new RegExp(`${field} .* 0\\.000 %`));
    }
    expect(stdout).toContain('ideality factor between 1 and 2');
  });

  test('shows the candidates of the sweep on request', () => {
    const { stdout } = run(['fit', module, '--candidates']);
    expect(stdout).toContain('Exact solution');
    expect(stdout.match(/^ {2}[12]\.\d{3} /gm)).toHaveLength(101);
  });

  test('gives the same as JSON', () => {
    const { stdout } = run(['fit', module, '--json']);
    expect(JSON.parse(stdout)).toMatchObject({
      method: 'exact',
      solved: true,
      parameters: { ideality_factor: expect.closeTo(1.02358, 4) as number },
    });
  });

  test('writes a model file that curve takes in place of the datasheet, with the same curve', () => {
    const model = join(folder, 'fitted.yaml');
    const { status, stderr } = run(['fit', module, '-o', model]);
    expect([status, stderr]).toEqual([0, `Model written to ${model}.\n`]);
    const peak = (source: string): number => {
      const { stdout } = run(['curve', source, '--irradiance', '800', '--json']);
      return (JSON.parse(stdout) as { peaks: { power_W: number }[] }).peaks[0]!.power_W;
    };
    expect(peak(model)).toBeCloseTo(peak(module), 9);
  });

  test('ends with exit code 1 when no curve meets the datasheet, and says what is missed', () => {
    const odd = join(folder, 'odd.yaml');
    const text = readFileSync(module, 'utf8').replace('vmp_V: 30.97', 'vmp_V: 34.5');
    writeFileSync(odd, text.replace('slope_at_isc_A_per_V: -0.0024\n', ''));
    const { status, stderr } = run(['fit', odd]);
    expect(status).toBe(1);
    expect(stderr).toMatch(/No curve meets this datasheet/);
  });
});

describe('curve', () => {
  test('prints key points, a picture and as many rows as asked for', () => {
    const { status, stdout } = run([
      ...['curve', module, '--irradiance', '800'],
      ...['--temperature', '45', '--points', '101'],
    ]);
    expect(status).toBe(0);
    expect(stdout).toContain('at 800 W/m², 45 °C');
    expect(stdout).toMatch(/short-circuit current +7\.4\d+ A/);
    expect(stdout).toMatch(/peak +\d+\.\d+ W at \d+\.\d+ V, \d+\.\d+ A/);
    expect(stdout).toMatch(/[\u2801-\u28ff]{5}/);
    expect(stdout.match(/^ {2}\d+\.\d{4} +\d+\.\d{5} +\d+\.\d{4}$/gm)).toHaveLength(101);
  });

  test('prints CSV and nothing else', () => {
    const lines = run(['curve', module, '--points', '5', '--csv']).stdout.trimEnd().split('\n');
    expect(lines[0]).toBe('voltage_V,current_A,power_W');
    expect(lines).toHaveLength(6);
    expect(lines[1]).toMatch(/^0,9\.2\d*,0$/);
    expect(lines[5]).toMatch(/^38\.(?:1|0999999999)\d*,0,0$/);
  });

  test('shows a source in the dark as zeros', () => {
    const { stdout } = run(['curve', module, '--irradiance', '0', '--json']);
    expect(JSON.parse(stdout)).toMatchObject({ isc_A: 0, voc_V: 0, peaks: [{ power_W: 0 }] });
  });
});

describe('emit and verify', () => {
  test('build a suite, list its files, and find it whole', () => {
    const out = join(folder, 'suite');
    const emitted = run(['emit', join(DEMO, 'suite.yaml'), '--out', out]);
    expect(emitted.status).toBe(0);
    expect(emitted.stdout).toContain('demo-roof-curves.hpv');
    expect(emitted.stdout).toContain('15 curves, 720 points, 15 peaks');
    const verified = run(['verify', out]);
    expect(verified.status).toBe(0);
    expect(verified.stdout).toContain('whole: demo holds what its inputs give');
  });

  test('end with exit code 1 and name the file, when a file was changed', () => {
    const out = join(folder, 'changed');
    run(['emit', join(DEMO, 'suite.yaml'), '--out', out]);
    const file = join(out, 'demo-roof-timeline.csv');
    writeFileSync(file, readFileSync(file, 'utf8').replace('1800', '1801'));
    const { status, stderr, stdout } = run(['verify', out]);
    expect(status).toBe(1);
    expect(stderr).toContain(`error FILE_CHANGED ${file}: has been changed: the SHA-256 differs.`);
    expect(stdout).toContain('damaged: 1 problem in demo');
    expect(JSON.parse(run(['verify', out, '--json']).stdout)).toMatchObject({
      problems: [{ code: 'FILE_CHANGED', file }],
    });
  });

  test('count what the formats could not hold', () => {
    const suite = join(folder, 'narrow.yaml');
    writeFileSync(
      suite,
      `suite: narrow
sources: { roof: ${module} }
formats: { voltage: UQ5.8, current: UQ4.12, power: UQ9.7 }
curves: { points: 16, conditions: [{ irradiance_W_per_m2: 1000, cell_temperature_C: 25 }] }
outputs: [json]
`,
    );
    const { status, stderr } = run(['emit', suite, '--out', join(folder, 'narrow')]);
    expect(status).toBe(0);
    expect(stderr).toContain('curve.voc took its lowest code 0 times and its highest 1 times.');
  });
});

const terminal = spawnSync('script', ['--version']).status === 0;

describe('at a terminal', () => {
  test.skipIf(!terminal)(
    'a command that fails while its progress line runs ends all the same (needs the program script)',
    () => {
      const suite = join(folder, 'failing.yaml');
      writeFileSync(
        suite,
        `suite: failing
sources: { roof: ${module} }
weather: ${join(DEMO, 'day.yaml')}
formats: { voltage: UQ6.10, current: { q: UQ3.12, overflow: refuse }, power: UQ10.6 }
timeline: { every_s: 0.1 }
`,
      );
      const command = `"${process.execPath}" "${PROGRAM}" emit "${suite}" --out "${join(folder, 'never')}"`;
      const { status, stdout } = spawnSync('script', ['-qec', command, '/dev/null'], {
        encoding: 'utf8',
        timeout: 50_000,
      });
      expect(status).toBe(2);
      expect(stdout).toContain('VALUE_OUT_OF_RANGE');
    },
  );
});

describe('schema', () => {
  test.each(['array', 'datasheet', 'generator', 'model', 'suite', 'weather'])(
    'prints the JSON Schema of a %s',
    (kind) => {
      const schema = JSON.parse(run(['schema', kind]).stdout) as Record<string, unknown>;
      expect(schema['$schema']).toBe('https://json-schema.org/draft/2020-12/schema');
      expect(schema['additionalProperties']).toBe(false);
      const shipped = new URL(`../../dist/schema/${kind}.schema.json`, import.meta.url);
      expect(JSON.parse(readFileSync(shipped, 'utf8'))).toEqual(schema);
    },
  );
});

describe('demo', () => {
  test('builds and verifies the demo suite, draws a curve and says where things lie', () => {
    const out = join(folder, 'demo');
    const { status, stdout } = run(['demo', '--out', out]);
    expect(status).toBe(0);
    expect(stdout).toMatch(/[\u2801-\u28ff]{5}/);
    expect(stdout).toContain(`demo in ${out}`);
    expect(stdout).toContain('whole: demo holds what its inputs give');
  });
});
