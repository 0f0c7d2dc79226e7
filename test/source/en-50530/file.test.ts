import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { parseEn50530 } from '../../../src/source/en-50530/file.js';
import { faultOf } from '../fault-of.js';

const TEXT = `generator: en-50530
technology: thin-film
umpp_stc_V: 400
impp_stc_A: 10
`;
const parse = (text: string) => parseEn50530(parseInput(text, 'source.yaml'));

describe('parseEn50530', () => {
  test('gives the source of a file, with the coefficients of its technology', () => {
    const source = parse(TEXT);
    expect(source.name).toBe('EN 50530 source, thin film');
    expect(source.rating).toEqual({ technology: 'thin-film', peakVoltage: 400, peakCurrent: 10 });
    expect(source.constants.shortCircuitCoefficient).toBe(0.0002);
    expect(source.constants.openCircuitCoefficient).toBe(-0.002);
  });

  test('takes a name and coefficients in %/K', () => {
    const source = parse(
      `${TEXT}name: Bench source\nalpha_isc_pct_per_K: 0.045\nbeta_voc_pct_per_K: -0.275\n`,
    );
    expect(source.name).toBe('Bench source');
    expect(source.constants.shortCircuitCoefficient).toBeCloseTo(0.00045, 18);
    expect(source.constants.openCircuitCoefficient).toBeCloseTo(-0.00275, 18);
  });

  test.each([
    ['generator: en-50530', 'generator: en-50531', 'generator', 'must be "en-50530"'],
    ['thin-film', 'cdte', 'technology', 'must be one of c-si, thin-film, found "cdte".'],
    ['400', '0', 'umpp_stc_V', 'must be above 0, found 0.'],
    ['400', '400 V', 'umpp_stc_V', 'must be a number, found "400 V".'],
    ['impp_stc_A: 10', 'impp_stc_A: -1', 'impp_stc_A', 'must be above 0, found -1.'],
  ])('refuses a file with %s replaced by %s', (from, to, field, message) => {
    const [problem, ...others] = faultOf(() => parse(TEXT.replace(from, to))).problems;
    expect(others).toEqual([]);
    const line = TEXT.split('\n').findIndex((text) => text.includes(from)) + 1;
    expect(problem).toMatchObject({ code: 'INVALID_VALUE', file: 'source.yaml', line, field });
    expect(problem!.message).toContain(message);
  });

  test('names every key that is missing, unknown or out of range', () => {
    const text = `${TEXT.replace('impp_stc_A', 'impp_A')}beta_voc_pct_per_K: 0.3\nalpha_isc_pct_per_K: 40\n`;
    expect(
      faultOf(() => parse(text)).problems.map(({ code, field }) => `${code} ${field}`),
    ).toEqual([
      'MISSING_KEY impp_stc_A',
      'INVALID_VALUE alpha_isc_pct_per_K',
      'INVALID_VALUE beta_voc_pct_per_K',
      'UNKNOWN_KEY impp_A',
    ]);
  });
});
