import { describe, expect, test } from 'vitest';
import { parseInput } from '../../src/file/document.js';
import { parseDatasheet } from '../../src/source/datasheet-file.js';
import { faultOf } from './fault-of.js';

/** One key a line, in this order: the lines that problems name. */
const MODULE: Record<string, string | number> = {
  name: 'Any module 200 W',
  technology: 'poly-si',
  cells_in_series: 54,
  isc_A: 8.21,
  voc_V: 32.9,
  imp_A: 7.61,
  vmp_V: 26.3,
  alpha_isc_mA_per_K: 3.2,
  beta_voc_mV_per_K: -123,
};
type Changes = Record<string, string | number | undefined>;

function documentWith(changes: Changes) {
  const entries = Object.entries({ ...MODULE, ...changes }).filter(
    ([, value]) => value !== undefined,
  );
  return parseInput(entries.map(([key, value]) => `${key}: ${value}`).join('\n'), 'module.yaml');
}

const errorsOf = (changes: Changes) =>
  faultOf(() => parseDatasheet(documentWith(changes))).problems;
const warningsOf = (changes: Changes) => parseDatasheet(documentWith(changes)).warnings;

/** Line of a key in a file with these changes: its place in the order of the keys. */
function lineOf(key: string, changes: Changes): number {
  const keys = Object.entries({ ...MODULE, ...changes })
    .filter(([, value]) => value !== undefined)
    .map(([name]) => name);
  return keys.indexOf(key) + 1;
}

const percent: Changes = { alpha_isc_mA_per_K: undefined, beta_voc_mV_per_K: undefined };
const relative = (changes: Changes): Changes => ({
  ...percent,
  alpha_isc_pct_per_K: 0.04,
  beta_voc_pct_per_K: -0.36,
  ...changes,
});

interface Case {
  readonly of: string;
  readonly changes: Changes;
  readonly field: string;
  readonly code: string;
  readonly says: RegExp;
  readonly hint?: RegExp;
}

const REFUSED: Case[] = [
  {
    of: 'a peak at or beyond open circuit',
    changes: { vmp_V: 32.9 },
    field: 'vmp_V',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be below voc_V \(32\.9 V\), found 32\.9 V: the peak lies left of open circuit\.$/,
    hint: /swapped/,
  },
  {
    of: 'a peak current not below short circuit',
    changes: { imp_A: 8.21 },
    field: 'imp_A',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be below isc_A \(8\.21 A\), found 8\.21 A: current falls with voltage\.$/,
    hint: /swapped/,
  },
  {
    of: 'a fill factor below 0.3',
    changes: { vmp_V: 12, imp_A: 5 },
    field: 'vmp_V',
    code: 'FILL_FACTOR',
    says: /of 0\.222; PV modules lie between 0\.3 and 0\.9\.$/,
    hint: /another unit, or belongs to another column/,
  },
  {
    of: 'a fill factor above 0.9',
    changes: { vmp_V: 32, imp_A: 8.1 },
    field: 'vmp_V',
    code: 'FILL_FACTOR',
    says: /of 0\.960/,
  },
  {
    of: 'too little voltage a cell',
    changes: { cells_in_series: 120 },
    field: 'cells_in_series',
    code: 'CELL_VOLTAGE',
    says: /^gives 0\.274 V of voc_V for each cell; polycrystalline silicon lies between 0\.3 and 1\.3 V\.$/,
    hint: /^About 51 cells in series would fit\. Half-cut modules count cells in series/,
  },
  {
    of: 'too much voltage a cell',
    changes: { cells_in_series: 18, technology: 'gaas' },
    field: 'cells_in_series',
    code: 'CELL_VOLTAGE',
    says: /^gives 1\.828 V of voc_V for each cell; gallium arsenide lies between 0\.5 and 1\.5 V\.$/,
    hint: /^About 33 cells/,
  },
  {
    of: 'no temperature coefficient of current',
    changes: { alpha_isc_mA_per_K: undefined },
    field: 'alpha_isc_pct_per_K',
    code: 'MISSING_KEY',
    says: /^is missing: give alpha_isc_pct_per_K or alpha_isc_mA_per_K\.$/,
  },
  {
    of: 'no temperature coefficient of voltage',
    changes: { beta_voc_mV_per_K: undefined },
    field: 'beta_voc_pct_per_K',
    code: 'MISSING_KEY',
    says: /^is missing: give beta_voc_pct_per_K or beta_voc_mV_per_K\.$/,
  },
  {
    of: 'the coefficient of current in both forms',
    changes: { alpha_isc_pct_per_K: 0.04 },
    field: 'alpha_isc_mA_per_K',
    code: 'BOTH_FORMS',
    says: /^is given beside alpha_isc_pct_per_K: the same coefficient twice\.$/,
    hint: /delete the other/,
  },
  {
    of: 'the coefficient of voltage in both forms',
    changes: { beta_voc_pct_per_K: -0.37 },
    field: 'beta_voc_mV_per_K',
    code: 'BOTH_FORMS',
    says: /^is given beside beta_voc_pct_per_K/,
  },
  {
    of: 'a voltage that rises with temperature',
    changes: { beta_voc_mV_per_K: 123 },
    field: 'beta_voc_mV_per_K',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be below 0, found 123: open-circuit voltage falls as cells warm\.$/,
    hint: /write the minus sign/,
  },
  {
    of: 'mV/K in the key for %/K',
    changes: relative({ beta_voc_pct_per_K: -123 }),
    field: 'beta_voc_pct_per_K',
    code: 'UNIT_SLIP',
    says: /far stronger than any cell/,
    hint: /^It looks like mV\/K: write beta_voc_mV_per_K\.$/,
  },
  {
    of: '%/K in the key for mV/K',
    changes: { beta_voc_mV_per_K: -0.37 },
    field: 'beta_voc_mV_per_K',
    code: 'UNIT_SLIP',
    says: /^is -0\.0011 %\/K of voc_V, far weaker than any cell\.$/,
    hint: /^It looks like %\/K \(then write beta_voc_pct_per_K\) or V\/K \(then multiply by 1000\)\.$/,
  },
  {
    of: '%/K in the key for mV/K, of a single cell',
    changes: { beta_voc_mV_per_K: -0.37, cells_in_series: 1, voc_V: 0.61, vmp_V: 0.49 },
    field: 'beta_voc_mV_per_K',
    code: 'UNIT_SLIP',
    says: /^is -0\.061 %\/K of voc_V/,
  },
  {
    of: 'a ratio per kelvin in the key for %/K',
    changes: relative({ beta_voc_pct_per_K: -0.0037 }),
    field: 'beta_voc_pct_per_K',
    code: 'UNIT_SLIP',
    says: /far weaker/,
    hint: /^It looks like V\/K, or a ratio per kelvin\./,
  },
  {
    of: 'µV/K in the key for mV/K',
    changes: { beta_voc_mV_per_K: -123000 },
    field: 'beta_voc_mV_per_K',
    code: 'UNIT_SLIP',
    says: /far stronger/,
    hint: /another number of cells, or µV\/K/,
  },
  {
    of: 'mA/K in the key for %/K',
    changes: relative({ alpha_isc_pct_per_K: 3.2 }),
    field: 'alpha_isc_pct_per_K',
    code: 'UNIT_SLIP',
    says: /^is 3\.2 %\/K of isc_A; cells lie between -0\.02 and 0\.2 %\/K\.$/,
    hint: /^It looks like mA\/K: write alpha_isc_mA_per_K\.$/,
  },
  {
    of: 'µA/K in the key for mA/K',
    changes: { alpha_isc_mA_per_K: 3200 },
    field: 'alpha_isc_mA_per_K',
    code: 'UNIT_SLIP',
    says: /^is 39 %\/K of isc_A/,
    hint: /µA\/K/,
  },
  {
    of: 'a power that rises with temperature',
    changes: { gamma_pmp_pct_per_K: 0.45 },
    field: 'gamma_pmp_pct_per_K',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be below 0, found 0\.45: peak power falls as cells warm\.$/,
    hint: /minus sign/,
  },
  {
    of: 'a rising slope at short circuit',
    changes: { slope_at_isc_A_per_V: 0.0024 },
    field: 'slope_at_isc_A_per_V',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be 0 or below, found 0\.0024\.$/,
    hint: /negative number/,
  },
  {
    of: 'a slope at short circuit steeper than the chord to the peak',
    changes: { slope_at_isc_A_per_V: -0.03 },
    field: 'slope_at_isc_A_per_V',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be at least -0\.02281 A\/V, the mean slope from short circuit to the peak, found -0\.03/,
    hint: /inverse/,
  },
  {
    of: 'a rising slope at open circuit',
    changes: { slope_at_voc_A_per_V: 2.2 },
    field: 'slope_at_voc_A_per_V',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be below 0, found 2\.2\.$/,
    hint: /negative number/,
  },
  {
    of: 'V/A in the key for A/V at open circuit',
    changes: { slope_at_voc_A_per_V: -0.4426 },
    field: 'slope_at_voc_A_per_V',
    code: 'IMPOSSIBLE_VALUE',
    says: /^must be at most -1\.153 A\/V, the mean slope from the peak to open circuit, found -0\.4426/,
    hint: /inverse, in V\/A/,
  },
  {
    of: 'an operating temperature in kelvin',
    changes: { noct_C: 320 },
    field: 'noct_C',
    code: 'UNIT_SLIP',
    says: /^is 320 °C; modules usually lie between 40 and 50 °C\.$/,
    hint: /^It looks like kelvin: subtract 273\.15\.$/,
  },
  {
    of: 'an operating temperature of ice',
    changes: { noct_C: 0 },
    field: 'noct_C',
    code: 'IMPOSSIBLE_VALUE',
    says: /^is 0 °C/,
  },
];

const ODD: Case[] = [
  {
    of: 'a faint coefficient of current in the key for mA/K',
    changes: { alpha_isc_mA_per_K: 0.04 },
    field: 'alpha_isc_mA_per_K',
    code: 'UNIT_SLIP',
    says: /^is 0\.00049 %\/K of isc_A; cells usually lie between 0\.02 and 0\.12 %\/K\.$/,
    hint: /^It looks like %\/K \(then write alpha_isc_pct_per_K\) or A\/K \(then multiply by 1000\)\.$/,
  },
  {
    of: 'a faint coefficient of current in the key for %/K',
    changes: relative({ alpha_isc_pct_per_K: 0.0032 }),
    field: 'alpha_isc_pct_per_K',
    code: 'UNIT_SLIP',
    says: /^is 0\.0032 %\/K of isc_A/,
    hint: /A\/K, or a ratio per kelvin/,
  },
  {
    of: 'a strong coefficient of current',
    changes: relative({ alpha_isc_pct_per_K: 0.3 }),
    field: 'alpha_isc_pct_per_K',
    code: 'ODD_VALUE',
    says: /^is 0\.30 %\/K of isc_A; cells usually lie between 0\.02 and 0\.12 %\/K\.$/,
  },
  {
    of: 'a current that falls with temperature',
    changes: { alpha_isc_mA_per_K: -3.2 },
    field: 'alpha_isc_mA_per_K',
    code: 'ODD_VALUE',
    says: /^is -0\.039 %\/K/,
  },
  {
    of: 'V/K in the key for %/K, of a module of some 60 cells',
    changes: relative({ beta_voc_pct_per_K: -0.123 }),
    field: 'beta_voc_pct_per_K',
    code: 'ODD_VALUE',
    says: /^is -0\.12 %\/K of voc_V; cells usually lie between -0\.45 and -0\.2\.$/,
    hint: /^If the datasheet says V\/K, write beta_voc_mV_per_K, a thousand times as much\.$/,
  },
  {
    of: 'a strong coefficient of voltage',
    changes: relative({ beta_voc_pct_per_K: -0.6 }),
    field: 'beta_voc_pct_per_K',
    code: 'ODD_VALUE',
    says: /^is -0\.60 %\/K/,
  },
  {
    of: 'a ratio in place of the coefficient of power',
    changes: { gamma_pmp_pct_per_K: -0.0047 },
    field: 'gamma_pmp_pct_per_K',
    code: 'ODD_VALUE',
    says: /^is -0\.0047 %\/K; modules usually lie between -0\.5 and -0\.2 %\/K\.$/,
    hint: /ratio per kelvin/,
  },
  {
    of: 'W/K in place of the coefficient of power',
    changes: { gamma_pmp_pct_per_K: -0.94 },
    field: 'gamma_pmp_pct_per_K',
    code: 'ODD_VALUE',
    says: /^is -0\.94 %\/K/,
    hint: /W\/K/,
  },
  {
    of: 'a cool operating temperature',
    changes: { noct_C: 30 },
    field: 'noct_C',
    code: 'ODD_VALUE',
    says: /^is 30 °C; modules usually lie between 40 and 50 °C\.$/,
  },
  {
    of: 'a hot operating temperature',
    changes: { noct_C: 65 },
    field: 'noct_C',
    code: 'ODD_VALUE',
    says: /^is 65 °C/,
  },
];

describe('A datasheet is refused for', () => {
  test.each(REFUSED)('$of', ({ changes, field, code, says, hint }) => {
    const [problem, ...others] = errorsOf(changes);
    expect(others).toEqual([]);
    expect(problem).toMatchObject({ file: 'module.yaml', field, code });
    expect(problem!.message).toMatch(says);
    if (hint !== undefined) expect(problem!.hint).toMatch(hint);
    // A key that is not there has no line of its own.
    expect(problem!.line).toBe(code === 'MISSING_KEY' ? 1 : lineOf(field, changes));
  });
});

describe('A datasheet is taken, with a warning, for', () => {
  test.each(ODD)('$of', ({ changes, field, code, says, hint }) => {
    const [problem, ...others] = warningsOf(changes);
    expect(others).toEqual([]);
    expect(problem).toMatchObject({
      file: 'module.yaml',
      field,
      code,
      line: lineOf(field, changes),
    });
    expect(problem!.message).toMatch(says);
    if (hint !== undefined) expect(problem!.hint).toMatch(hint);
  });
});

describe('A datasheet', () => {
  test('of an ordinary module passes without a word', () => {
    expect(warningsOf({})).toEqual([]);
    expect(warningsOf(relative({}))).toEqual([]);
    const full = {
      gamma_pmp_pct_per_K: -0.47,
      noct_C: 47,
      slope_at_isc_A_per_V: -0.0024,
      slope_at_voc_A_per_V: -2.2,
    };
    expect(warningsOf(full)).toEqual([]);
    expect(warningsOf({ slope_at_isc_A_per_V: 0 })).toEqual([]);
  });

  test('is told all that is wrong with it at once', () => {
    const problems = errorsOf({ cells_in_series: 10, beta_voc_mV_per_K: 123, noct_C: 320 });
    expect(problems.map(({ code }) => code)).toEqual([
      'CELL_VOLTAGE',
      'IMPOSSIBLE_VALUE',
      'UNIT_SLIP',
    ]);
  });

  test('with swapped points hears of those, not of what follows from them', () => {
    const changes = { vmp_V: 32.9, voc_V: 26.3, slope_at_isc_A_per_V: -0.03 };
    expect(errorsOf(changes).map(({ field }) => field)).toEqual(['vmp_V']);
  });
});
