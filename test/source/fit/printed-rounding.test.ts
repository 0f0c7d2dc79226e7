import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { parseDatasheet } from '../../../src/source/datasheet-file.js';
import { roundingOfDocument, roundingOfNumbers } from '../../../src/source/fit/printed-rounding.js';

const YAML = `name: Any module
technology: mono-si
cells_in_series: 60
isc_A: 9.20 # a zero that counts
voc_V: 38.10
`;
const TEXT = YAML.concat('imp_A: 8.7\nvmp_V: 31\nalpha_isc_pct_per_K: 0.050\n').concat(
  'beta_voc_mV_per_K: -137\ngamma_pmp_pct_per_K: -4.5e-1\nslope_at_isc_A_per_V: -.0024\n',
);

describe('roundingOfDocument', () => {
  test('takes half a unit of the last digit as it stands in the text, trailing zeros included', () => {
    const rounding = roundingOfDocument(parseInput(TEXT, 'module.yaml'));
    expect(rounding).toEqual({
      shortCircuitCurrent: 0.005,
      openCircuitVoltage: 0.005,
      peakCurrent: 0.05,
      peakVoltage: 0.5,
      // 0.050 % of 9.20 A: at most 0.0505 % of 9.205 A, which is 0.0000485 A/K more.
      shortCircuitCoefficient: expect.closeTo((0.0505 * 9.205 - 0.05 * 9.2) / 100, 15) as number,
      openCircuitCoefficient: 0.0005,
      peakPowerCoefficient: 0.00005,
      slopeAtShortCircuit: 0.00005,
      slopeAtOpenCircuit: 0,
    });
  });

  test('reads JSON as well', () => {
    const json = `{"name": "x", "technology": "mono-si", "cells_in_series": 60, "isc_A": 9.20,
      "voc_V": 38.10, "imp_A": 8.7, "vmp_V": 31.0,
      "alpha_isc_mA_per_K": 4.60, "beta_voc_pct_per_K": -0.36}`;
    const document = parseInput(json, 'module.json');
    expect(parseDatasheet(document).datasheet.openCircuitVoltage).toBe(38.1);
    const rounding = roundingOfDocument(document);
    expect(rounding.openCircuitVoltage).toBe(0.005);
    expect(rounding.peakVoltage).toBe(0.05);
    expect(rounding.shortCircuitCoefficient).toBe(0.000005);
    expect(rounding.openCircuitCoefficient).toBeCloseTo((0.365 * 38.105 - 0.36 * 38.1) / 100, 15);
  });

  test('takes a value behind an alias for its shortest decimal', () => {
    const text = TEXT.replace('imp_A: 8.7', 'imp_A: *peak').replace(
      'name: Any module',
      'name: &peak 8.70',
    );
    const rounding = roundingOfDocument(parseInput(text, 'module.yaml'));
    expect(rounding.peakCurrent).toBe(0.05);
  });
});

describe('roundingOfNumbers', () => {
  test('has only the shortest decimal to go by', () => {
    const { datasheet } = parseDatasheet(parseInput(TEXT, 'module.yaml'));
    const rounding = roundingOfNumbers(datasheet);
    expect(rounding.shortCircuitCurrent).toBe(0.05);
    expect(rounding.openCircuitVoltage).toBe(0.05);
    expect(rounding.peakVoltage).toBe(0.5);
    expect(rounding.openCircuitCoefficient).toBe(0.0005);
    expect(rounding.slopeAtShortCircuit).toBe(0.00005);
    expect(rounding.slopeAtOpenCircuit).toBe(0);
    expect(roundingOfNumbers({ ...datasheet, slopeAtOpenCircuit: -1e-7 }).slopeAtOpenCircuit).toBe(
      0.5e-7,
    );
  });
});
