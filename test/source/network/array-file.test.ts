import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { fromCelsius, STC_TEMPERATURE, uniformConditions } from '../../../src/quantities.js';
import { parseArray } from '../../../src/source/network/array-file.js';
import { faultOf } from '../fault-of.js';
import { ARRAY_MODULE } from './array-module.js';

const HEAD = 'array: south roof\nmodule: module.yaml\n';
const read = (text: string) =>
  parseArray(parseInput(HEAD + text, 'array.yaml'), () => ARRAY_MODULE);
const curveOf = (text: string) => read(text).array.at(uniformConditions(1000, STC_TEMPERATURE));
const problemsOf = (text: string) => faultOf(() => read(text)).problems;

const module = ARRAY_MODULE.at(uniformConditions(1000, STC_TEMPERATURE));

describe('an array file', () => {
  test('gives equal modules in series the voltage of all, and strings in parallel the current', () => {
    const curve = curveOf('strings: [{ modules: 8, count: 3 }]\n');
    expect(curve.shortCircuitCurrent / (3 * module.shortCircuitCurrent)).toBeCloseTo(1, 12);
    expect(curve.openCircuitVoltage / (8 * module.openCircuitVoltage)).toBeCloseTo(1, 12);
    const [peak, ...others] = curve.peaks();
    expect(others).toEqual([]);
    expect(peak!.power / (24 * module.peaks()[0]!.power)).toBeCloseTo(1, 12);
    for (const share of [0.1, 0.5, 0.8, 0.95, 1.05]) {
      const expected = 3 * module.current(share * module.openCircuitVoltage);
      const current = curve.current(8 * share * module.openCircuitVoltage);
      // 1e-12 of Isc, which is 27.6 A, with the rounding of a voltage eight times as large.
      expect(Math.abs(current - expected)).toBeLessThan(2.8e-11);
      expect(curve.slope(8 * share * module.openCircuitVoltage)).toBeCloseTo(
        (3 / 8) * module.slope(share * module.openCircuitVoltage),
        9,
      );
    }
  });

  test('has a peak for each irradiance of a string, and a group for each name', () => {
    const text = `groups: { sun: 1, tree: 0.6, chimney: 0.3 }
strings: [{ modules: 4, shade: { 2: tree, 3: [chimney, sun, tree] } }]
`;
    const { array } = read(text);
    expect(array.groups).toBe(3);
    expect(curveOf(text).peaks()).toHaveLength(3);
    const own = { irradiance: [1000, 600, 300], cellTemperature: [298.15, 298.15, 298.15] };
    const plain = read(text.replace('tree: 0.6, chimney: 0.3', 'tree: 1, chimney: 1')).array;
    expect(plain.at(own).peaks()).toEqual(curveOf(text).peaks());
  });

  test('takes soiling off all light, and a deviation off one module', () => {
    const soiled = curveOf('soiling_pct: 10\nstrings: [{ modules: 2 }]\n');
    const dim = ARRAY_MODULE.at(uniformConditions(900, STC_TEMPERATURE));
    expect(soiled.shortCircuitCurrent / dim.shortCircuitCurrent).toBeCloseTo(1, 12);
    const uneven = curveOf('strings: [{ modules: 2, deviation_pct: { 2: -10 } }]\n');
    expect(uneven.peaks()).toHaveLength(2);
  });

  test('loses a shorted substring, a whole string to an open module, and current to a crack', () => {
    const whole = curveOf('strings: [{ modules: 2 }, { modules: 2 }]\n');
    const fault = (text: string) =>
      curveOf(
        `strings: [{ modules: 2 }, { modules: 2 }]\nfaults: [{ string: 1, module: 1, ${text} }]\n`,
      );
    const open = fault('open: true');
    expect(open.shortCircuitCurrent / whole.shortCircuitCurrent).toBeCloseTo(0.5, 12);
    expect(open.openCircuitVoltage).toBeCloseTo(whole.openCircuitVoltage, 9);
    const shorted = curveOf(
      'strings: [{ modules: 2 }]\nfaults: [{ string: 1, module: 1, substring: 1, bypass: shorted }]\n',
    );
    expect(shorted.openCircuitVoltage / whole.openCircuitVoltage).toBeCloseTo(5 / 6, 12);
    const cracked = curveOf(
      'strings: [{ modules: 2 }]\nfaults: [{ string: 1, module: 1, substring: 1, cracked: { lost_area: 0.3 } }]\n',
    );
    expect(cracked.peaks()).toHaveLength(2);
    const bare = fault('substring: 1, bypass: open');
    expect(bare.peaks()).toEqual(whole.peaks());
  });

  test('gives nothing in the dark', () => {
    const { array } = read(
      'groups: { sun: 1, tree: 0 }\nstrings: [{ modules: 3, shade: { 1: tree } }]\n',
    );
    const night = array.at(uniformConditions(0, STC_TEMPERATURE));
    expect([night.shortCircuitCurrent, night.openCircuitVoltage]).toEqual([0, 0]);
    expect(night.peaks()).toEqual([{ voltage: 0, current: 0, power: 0 }]);
    expect(array.at(uniformConditions(1000, STC_TEMPERATURE)).peaks()).toHaveLength(1);
  });

  test('warns of strings of unequal length, where the second is', () => {
    expect(read('strings:\n  - modules: 8\n  - modules: 7\n').warnings).toMatchObject([
      { code: 'UNEQUAL_STRINGS', line: 5, field: 'strings[1].modules' },
    ]);
  });
});

describe('a wrong array file', () => {
  const PLACE = 'string: 1, module: 1, substring: 1';
  test.each([
    ['modules: 2, shade: { 3: sun }', 'NO_SUCH_MODULE', 'strings[0].shade.3'],
    ['modules: 2, shade: { 2: moon }', 'UNKNOWN_GROUP', 'strings[0].shade.2'],
    ['modules: 2, shade: { 2: [sun, sun] }', 'NO_SUCH_SUBSTRING', 'strings[0].shade.2'],
    ['modules: 2, deviation_pct: { 9: 1 }', 'NO_SUCH_MODULE', 'strings[0].deviation_pct.9'],
    ['modules: 2, shade: { two: sun }', 'INVALID_KEY', 'strings[0].shade.two'],
    ['modules: 0', 'INVALID_VALUE', 'strings[0].modules'],
    ['', 'MISSING_KEY', 'strings[0].modules'],
  ])('is refused at its place: a string with %s', (string, code, field) => {
    const problems = problemsOf(`strings:\n  - { ${string} }\n`);
    expect(problems).toMatchObject([{ code, field, file: 'array.yaml', line: 4 }]);
  });

  test.each([
    ['groups: { sun: -0.1 }', 'INVALID_VALUE', 'groups.sun'],
    ['substrings_per_module: 7', 'UNEVEN_SUBSTRINGS', 'substrings_per_module'],
    ['soiling_pct: 120', 'INVALID_VALUE', 'soiling_pct'],
    ['bypas: none', 'UNKNOWN_KEY', 'bypas'],
    ['bypass: { drop_V: -1 }', 'INVALID_VALUE', 'bypass.drop_V'],
    ['faults: [{ string: 2, module: 1, open: true }]', 'NO_SUCH_STRING', 'faults[0].string'],
    ['faults: [{ string: 1, module: 9, open: true }]', 'NO_SUCH_MODULE', 'faults[0].module'],
    [
      'faults: [{ string: 1, module: 1, substring: 4, bypass: open }]',
      'NO_SUCH_SUBSTRING',
      'faults[0].substring',
    ],
    [
      `faults: [{ ${PLACE}, bypass: open }, { ${PLACE}, bypass: shorted }]`,
      'CONTRARY_FAULTS',
      'faults[1].bypass',
    ],
    [`shaded_cells: [{ ${PLACE}, count: 21, factor: 0 }]`, 'TOO_MANY_CELLS', 'shaded_cells[0]'],
    [`shaded_cells: [{ ${PLACE}, factor: -1 }]`, 'INVALID_VALUE', 'shaded_cells[0].factor'],
  ])('is refused at its place: %s', (line, code, field) => {
    const problems = problemsOf(`strings: [{ modules: 2 }]\n${line}\n`);
    expect(problems).toMatchObject([{ code, field, file: 'array.yaml', line: 4 }]);
  });

  test('is refused where every substring of a string is shorted', () => {
    const faults = [1, 2, 3]
      .map((n) => `{ string: 1, module: 1, substring: ${n}, bypass: shorted }`)
      .join(', ');
    expect(problemsOf(`strings: [{ modules: 1 }]\nfaults: [${faults}]\n`)).toMatchObject([
      { code: 'SHORTED_STRING', field: 'strings[0]', line: 3 },
    ]);
  });

  test('gets the nearest name of a group as a hint', () => {
    const text =
      'groups: { sun: 1, chimney: 0.3 }\nstrings: [{ modules: 2, shade: { 1: chimny } }]\n';
    expect(problemsOf(text)).toMatchObject([{ hint: 'Did you mean chimney?' }]);
  });
});

describe('an array under conditions out of range', () => {
  const { array } = read('groups: { sun: 1, tree: 0.5 }\nstrings: [{ modules: 2 }]\n');

  test.each([
    ['negative irradiance', -1, 25],
    ['cells colder than -60 °C', 500, -61],
    ['cells hotter than 120 °C', 500, 121],
  ])('is refused: %s', (_, irradiance, celsius) => {
    const conditions = uniformConditions(irradiance, fromCelsius(celsius));
    expect(faultOf(() => array.at(conditions)).problems[0]).toMatchObject({ code: 'ARGUMENT' });
  });

  test('is refused with a number of groups that is neither its own nor one', () => {
    const conditions = { irradiance: [1, 2, 3], cellTemperature: [300, 300, 300] };
    expect(faultOf(() => array.at(conditions)).problems[0]!.message).toContain('2 shading groups');
  });
});
