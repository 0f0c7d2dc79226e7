/** What a user reads after a mistake: where it is, what was found, what was expected, what to do. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { SMALL_SUITE, writeInputs } from '../vectors/small-suite.js';
import { DEMO, run } from './run-program.js';

const demoModule = readFileSync(join(DEMO, 'module.yaml'), 'utf8');

/** Runs fit on the demo's datasheet with one piece of text exchanged. */
function fitWith(from: string, to: string): { status: number | null; stderr: string } {
  expect(demoModule).toContain(from);
  const folder = newFolder();
  writeFileSync(join(folder, 'm.yaml'), demoModule.replace(from, to));
  const { status, stderr, stdout } = run(['fit', 'm.yaml'], folder);
  expect(stdout).toBe('');
  return { status, stderr };
}

describe('a datasheet', () => {
  test('with an unknown key is refused at the key, with the nearest key known', () => {
    expect(fitWith('vmp_V: 30.97', 'vmpp_V: 30.97')).toEqual({
      status: 2,
      stderr:
        'error MISSING_KEY m.yaml:2:1: vmp_V: is missing: expected a number.\n' +
        'error UNKNOWN_KEY m.yaml:8:1: vmpp_V: is not a key known here.\n  Did you mean vmp_V?\n',
    });
  });

  test('with a decimal comma is refused with how to write it', () => {
    expect(fitWith('voc_V: 38.1', 'voc_V: 38,1')).toEqual({
      status: 2,
      stderr:
        'error INVALID_VALUE m.yaml:6:8: voc_V: must be a number, found "38,1".\n' +
        '  Write the decimal mark as a point.\n',
    });
  });

  test('with peak and open circuit swapped is refused with the reason', () => {
    const { status, stderr } = fitWith('vmp_V: 30.97', 'vmp_V: 40');
    expect(status).toBe(2);
    expect(stderr).toContain(
      'm.yaml:8:8: vmp_V: must be below voc_V (38.1 V), found 40 V: the peak lies left of open circuit.',
    );
  });

  test('with a percentage written as millivolts is refused as a slip of the unit', () => {
    const { stderr } = fitWith('beta_voc_pct_per_K: -0.36', 'beta_voc_mV_per_K: -0.36');
    expect(stderr).toContain('It looks like %/K (then write beta_voc_pct_per_K)');
  });

  test('with broken YAML is refused at the place', () => {
    const { status, stderr } = fitWith('voc_V: 38.1', 'voc_V: [38.1');
    expect(status).toBe(2);
    expect(stderr).toMatch(/error YAML_SYNTAX m\.yaml:\d+:\d+: /);
  });

  test('that is not there is refused by name', () => {
    expect(run(['fit', 'nowhere.yaml'])).toEqual({
      status: 2,
      stdout: '',
      stderr: 'error FILE_MISSING nowhere.yaml: there is no such file or folder.\n',
    });
  });

  test('with an error gives the same as JSON, for programs', () => {
    const folder = newFolder();
    writeFileSync(join(folder, 'm.yaml'), demoModule.replace('isc_A: 9.22', 'isc_A: -9'));
    const { status, stderr } = run(['fit', 'm.yaml', '--json'], folder);
    expect(status).toBe(2);
    expect(JSON.parse(stderr)).toMatchObject({
      error: 'input',
      problems: [{ code: 'INVALID_VALUE', file: 'm.yaml', line: 5, column: 8, field: 'isc_A' }],
    });
  });
});

describe('a suite', () => {
  const emit = (changes: Parameters<typeof writeInputs>[1]): ReturnType<typeof run> => {
    const folder = newFolder();
    writeInputs(folder, changes);
    return run(['emit', 'suite.yaml', '--out', 'out'], folder);
  };

  test('that names a missing file is refused at the name', () => {
    const { status, stderr } = emit({ suite: SMALL_SUITE.replace('model.yaml', 'modle.yaml') });
    expect(status).toBe(2);
    expect(stderr).toBe(
      'error FILE_MISSING suite.yaml:2:17: sources.one: modle.yaml: there is no such file or folder.\n',
    );
  });

  test('shows the mistakes of all its files at once', () => {
    const { stderr } = emit({
      suite: SMALL_SUITE.replace('UQ6.6', 'UQ6.x'),
      weather: 'name: Small\nblocks: [{ rmap: { irradiance_W_per_m2: 900, for_s: 2 } }]\n',
    });
    expect(stderr).toMatch(/error FORMAT suite\.yaml:4:21: formats\.voltage: /);
    expect(stderr).toMatch(/error UNKNOWN_\w+ weather\.yaml:2:12: .*rmap/);
    expect(stderr).toContain('Did you mean ramp?');
  });

  test('with more points than the format has codes is refused with both numbers', () => {
    const { status, stderr } = emit({
      suite: SMALL_SUITE.replace('UQ6.6', 'UQ6.0').replace('points: 4', 'points: 64'),
    });
    expect(status).toBe(2);
    expect(stderr).toContain('64 points need 64 different voltage codes, but UQ6.0 has 2');
    expect(stderr).toContain('Ask for fewer points, or give the voltage a finer format.');
  });

  test('with a timeline and no weather is refused', () => {
    const { stderr } = emit({ suite: SMALL_SUITE.replace('weather: weather.yaml\n', '') });
    expect(stderr).toContain('suite.yaml:7:11: timeline: needs a weather file');
  });

  test('whose C array would pass what C99 promises is refused where C is asked for', () => {
    const { status, stderr } = emit({
      suite: SMALL_SUITE.replace('every_s: 1', 'every_s: 0.001, outputs: [c]'),
      weather: 'name: Long\nblocks: [{ hold: { for_s: 20 } }]\n',
    });
    expect(status).toBe(2);
    expect(stderr).toContain('C_OBJECT_TOO_LARGE suite.yaml:8:1: timeline: the 20001 samples');
    expect(stderr).toContain('which is 3276 samples.');
  });

  test('is written without C where C could not hold it and nobody asked for C, with a warning', () => {
    const { status, stderr, stdout } = emit({
      suite: SMALL_SUITE.replace('every_s: 1', 'every_s: 0.001'),
      weather: 'name: Long\nblocks: [{ hold: { for_s: 20 } }]\n',
    });
    expect(status).toBe(0);
    expect(stderr).toContain('warning suite.yaml:8:1: timeline: is written without C sources');
    expect(stdout).toContain('small-one-timeline.hpv');
    expect(stdout).not.toContain('small-one-timeline.c ');
  });

  test('sampled faster than its time format counts is refused, with a format that would do', () => {
    const { status, stderr } = emit({
      suite: SMALL_SUITE.replace('every_s: 1', 'every_s: 0.0004'),
    });
    expect(status).toBe(2);
    expect(stderr).toContain('suite.yaml:8:22: timeline.every_s: is shorter than a step');
    expect(stderr).toContain('{ step: 0.0004, bits: 32 }');
  });

  test('longer than its time format counts is refused before anything is written', () => {
    const { status, stderr } = emit({
      suite: SMALL_SUITE.replace('every_s: 1', 'every_s: 3600'),
      weather: 'name: Long\nblocks: [{ hold: { for_s: 5000000 } }]\n',
    });
    expect(status).toBe(2);
    expect(stderr).toContain('suite.yaml:8:1: timeline: the last time is 4996800 s');
  });

  test('given in the place of a datasheet is named for what it is', () => {
    const folder = newFolder();
    writeInputs(folder);
    expect(run(['fit', 'suite.yaml'], folder).stderr).toBe(
      'error OTHER_KIND suite.yaml: is a suite file; expected a datasheet file.\n',
    );
  });

  test('with a label that no name in C can hold is refused at the label', () => {
    const { stderr } = emit({ suite: SMALL_SUITE.replace('{ one:', '{ One:') });
    expect(stderr).toMatch(/^error INVALID_KEY suite\.yaml:2:12: sources\.One: /);
    expect(stderr).toContain('it must have lower-case letters, digits and hyphens, a letter first');
  });

  test('whose format refuses a value names format and value', () => {
    const { status, stderr } = emit({
      suite: SMALL_SUITE.replace('UQ6.6', '{ q: UQ4.8, overflow: refuse }'),
    });
    expect(status).toBe(2);
    expect(stderr).toMatch(
      /VALUE_OUT_OF_RANGE suite\.yaml:5:1: curves: curve 0, voc: .*UQ4\.8 holds 0 to 15\.99/,
    );
  });
});
