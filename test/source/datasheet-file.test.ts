import { describe, expect, test } from 'vitest';
import { parseInput } from '../../src/file/document.js';
import { parseDatasheet } from '../../src/source/datasheet-file.js';
import { faultOf } from './fault-of.js';

const LINES = [
  'name: Any module 200 W',
  'technology: poly-si',
  'cells_in_series: 54',
  'isc_A: 8.21',
  'voc_V: 32.9',
  'imp_A: 7.61',
  'vmp_V: 26.3',
  'alpha_isc_pct_per_K: 0.04',
  'beta_voc_pct_per_K: -0.36',
];

/** The file with some lines in place of those of the same key, or added at its end. */
function file(...changes: string[]): string {
  const keyOf = (line: string): string => line.split(':')[0]!;
  const lines = LINES.map(
    (line) => changes.find((change) => keyOf(change) === keyOf(line)) ?? line,
  );
  const added = changes.filter((change) => !LINES.some((line) => keyOf(line) === keyOf(change)));
  return [...lines, ...added].join('\n');
}

const parse = (text: string) => parseDatasheet(parseInput(text, 'module.yaml'));
const problemsOf = (text: string) => faultOf(() => parse(text)).problems;

describe('parseDatasheet', () => {
  test('converts to SI units', () => {
    const { datasheet, warnings } = parse(
      file(
        'gamma_pmp_pct_per_K: -0.45',
        'noct_C: 47',
        'slope_at_isc_A_per_V: -0.0024',
        'slope_at_voc_A_per_V: -2.2',
        'tolerance_pct: 3',
      ),
    );
    expect(warnings).toEqual([]);
    expect(datasheet).toEqual({
      name: 'Any module 200 W',
      technology: 'poly-si',
      cellsInSeries: 54,
      shortCircuitCurrent: 8.21,
      openCircuitVoltage: 32.9,
      peakCurrent: 7.61,
      peakVoltage: 26.3,
      shortCircuitCoefficient: 0.0004 * 8.21,
      openCircuitCoefficient: (-0.36 / 100) * 32.9,
      peakPowerCoefficient: -0.45 / 100,
      nominalOperatingTemperature: 320.15,
      slopeAtShortCircuit: -0.0024,
      slopeAtOpenCircuit: -2.2,
      tolerance: 0.03,
    });
  });

  test('takes coefficients in mA/K and mV/K in place of those in %/K', () => {
    const text = file('alpha_isc_mA_per_K: 3.2', 'beta_voc_mV_per_K: -123')
      .replace(/alpha_isc_pct.*\n/, '')
      .replace(/beta_voc_pct.*\n/, '');
    const { datasheet } = parse(text);
    expect(datasheet.shortCircuitCoefficient).toBe(0.0032);
    expect(datasheet.openCircuitCoefficient).toBe(-0.123);
  });

  test('leaves out what the file leaves out', () => {
    const { datasheet } = parse(file());
    expect(Object.keys(datasheet)).not.toContain('slopeAtShortCircuit');
    expect(Object.keys(datasheet)).not.toContain('tolerance');
  });

  test('reads JSON just as well', () => {
    const { datasheet } = parse(file());
    const json = JSON.stringify({
      name: 'Any module 200 W',
      technology: 'poly-si',
      cells_in_series: 54,
      isc_A: 8.21,
      voc_V: 32.9,
      imp_A: 7.61,
      vmp_V: 26.3,
      alpha_isc_pct_per_K: 0.04,
      beta_voc_pct_per_K: -0.36,
    });
    expect(parse(json).datasheet).toEqual(datasheet);
  });

  test('names the nearest key to one it does not know', () => {
    expect(problemsOf(file('alpha_isc_pct: 0.04', 'pmp_W: 200'))).toEqual([
      expect.objectContaining({
        code: 'UNKNOWN_KEY',
        file: 'module.yaml',
        line: 10,
        column: 1,
        field: 'alpha_isc_pct',
        hint: 'Did you mean alpha_isc_pct_per_K?',
      }),
      expect.objectContaining({ code: 'UNKNOWN_KEY', line: 11, field: 'pmp_W' }),
    ]);
  });

  test('names every key that is missing', () => {
    const problems = problemsOf('name: x\ntechnology: cdte\ncells_in_series: 100\nvoc_V: 80\n');
    expect(problems.map(({ code, field }) => `${code} ${field}`)).toEqual([
      'MISSING_KEY isc_A',
      'MISSING_KEY imp_A',
      'MISSING_KEY vmp_V',
    ]);
    expect(problems[0]).toMatchObject({ file: 'module.yaml', line: 1 });
    expect(problems[0]!.message).toBe('is missing: expected a number.');
  });

  test.each([
    ['voc_V: "37,2"', 'Write the decimal mark as a point.'],
    ['voc_V: 37,2', 'Write the decimal mark as a point.'],
    ['voc_V: 37 V', 'Write the number alone: the key names the unit.'],
    ['voc_V: 37.2V', 'Write the number alone: the key names the unit.'],
  ])('refuses %s and says how to write it', (line, hint) => {
    const found = line.slice(7).replaceAll('"', '');
    expect(problemsOf(file(line))).toEqual([
      {
        code: 'INVALID_VALUE',
        file: 'module.yaml',
        line: 5,
        column: 8,
        field: 'voc_V',
        message: `must be a number, found "${found}".`,
        hint,
      },
    ]);
  });

  test.each([
    ['cells_in_series: 54.5', 'must be a whole number, found 54.5.'],
    ['cells_in_series: 0', 'must be at least 1, found 0.'],
    ['cells_in_series: 401', 'must be at most 400, found 401.'],
    ['isc_A: 0', 'must be above 0, found 0.'],
    ['isc_A: -8', 'must be above 0, found -8.'],
    ['isc_A: .nan', 'must be a number, found NaN.'],
    ['isc_A: .inf', 'must be a number, found Infinity.'],
    ['voc_V: 1001', 'must be at most 1000, found 1001.'],
    ['isc_A:', 'must be a number, found nothing.'],
    ['isc_A: [8.21]', 'must be a number, found a list of 1.'],
    ['name: 7', 'must be text, found 7.'],
    ['name: ""', 'must have at least 1 character, found "".'],
    ['tolerance_pct: -3', 'must be at least 0, found -3.'],
  ])('refuses %s: %s', (line, message) => {
    const [problem, ...others] = problemsOf(file(line));
    expect(others).toEqual([]);
    expect(problem).toMatchObject({ code: 'INVALID_VALUE', field: line.split(':')[0], message });
  });

  test('refuses a technology it does not know, and names the nearest', () => {
    expect(problemsOf(file('technology: Poly-Si'))).toEqual([
      {
        code: 'INVALID_VALUE',
        file: 'module.yaml',
        line: 2,
        column: 13,
        field: 'technology',
        message:
          'must be one of mono-si, poly-si, cdte, cis, cigs, gaas, a-si-triple, found "Poly-Si".',
        hint: 'Did you mean poly-si?',
      },
    ]);
  });

  test('refuses a file that is not a group of keys', () => {
    expect(problemsOf('- 1\n- 2\n')[0]).toMatchObject({
      code: 'INVALID_VALUE',
      line: 1,
      message: 'must be a group of keys, found a list of 2.',
    });
  });
});
