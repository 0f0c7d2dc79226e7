import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import {
  parseMeasuredCurve,
  readMeasuredCurve,
  type MeasuredCurveOptions,
} from '../../../src/source/measured/curve-file.js';
import { newFolder } from '../../new-folder.js';
import { faultOf } from '../fault-of.js';

const read = (text: string, options?: MeasuredCurveOptions) =>
  parseMeasuredCurve(text, 'c.csv', options).points.map(({ voltage, current }) => [
    voltage,
    current,
  ]);
const problemsOf = (text: string, options?: MeasuredCurveOptions) =>
  faultOf(() => parseMeasuredCurve(text, 'c.csv', options)).problems;

describe('A measured curve is read', () => {
  test('with the line of each point, past comments, blank lines and a byte order mark', () => {
    const text = '\uFEFF# bench 3\n\nvoltage_V,current_A\n0,5\n# lamp adjusted\n\n0.5,-1e-1\n';
    expect(parseMeasuredCurve(text, 'c.csv').points).toEqual([
      { voltage: 0, current: 5, line: 4 },
      { voltage: 0.5, current: -0.1, line: 7 },
    ]);
  });

  test.each([
    ['voltage_V,current_A', [1500, 2]],
    ['V,I', [1500, 2]],
    ['U;I', [1500, 2]],
    ['V,A', [1500, 2]],
    ['Voltage (mV),Current (mA)', [1.5, 0.002]],
    ['U [mV];I [µA]', [1.5, 2e-6]],
    ['PV voltage / V\tPV current / A', [1500, 2]],
    ['vdc_mV,idc_uA', [1.5, 2e-6]],
    ['Vpv,Ipv', [1500, 2]],
    ['VOLTAGE,CURRENT', [1500, 2]],
    ['"voltage, V","current, mA"', [1500, 0.002]],
    ['module_voltage_kV,string current kA', [1_500_000, 2000]],
  ])('under the header %s', (header, point) => {
    const delimiter = /[;\t]/.exec(header)?.[0] ?? ',';
    const found = read(`${header}\n1500${delimiter}2\n`)[0]!;
    expect(found[0]).toBeCloseTo(point[0]!, 9);
    expect(found[1]).toBeCloseTo(point[1]!, 12);
  });

  test('among other columns, in any order of columns', () => {
    const text = 'time_s,I_A,T_C,power_W,U_V\n0,5,25,0,0.1\n';
    expect(read(text)).toEqual([[0.1, 5]]);
  });

  test('from columns that the caller names, whatever they are called', () => {
    const text = 'ch1,ch2_mA,voltage_V\n1,2,3\n';
    const options = { voltageColumn: 'ch1', currentColumn: 'CH2_mA' };
    expect(read(text, options)).toEqual([[1, 0.002]]);
  });

  test('with decimal commas and with the sign of a load, where the caller says so', () => {
    const options = { decimalComma: true, negateCurrent: true };
    expect(read('U;I\n0,25;-5,5\n1;0\n', options)).toEqual([
      [0.25, 5.5],
      [1, 0],
    ]);
  });

  test('as the nearest double of the decimal that stands there, in millivolts too', () => {
    expect(read('V_mV,I_mA\n600.1,0.3\n')).toEqual([[0.6001, 0.0003]]);
  });

  test('from line ends of every system', () => {
    expect(read('V,I\r\n0,5\r\n1,4\r\n')).toEqual(read('V,I\n0,5\n1,4'));
    for (const text of ['V,I\r\n0,5\r\n1,4\r\n', 'V,I\n0,5\n1,4', 'V,I\n0,5\n1,4\n\n']) {
      const { points } = parseMeasuredCurve(text, 'c.csv');
      expect(points.map(({ line }) => line)).toEqual([2, 3]);
    }
  });
});

describe('A file that cannot be read says where and how to mend it', () => {
  test('a word among the numbers', () => {
    expect(problemsOf('V,I\n0,5\n0.1,  5.2 A\n')).toEqual([
      {
        code: 'INVALID_VALUE',
        file: 'c.csv',
        line: 3,
        column: 7,
        field: 'I',
        message: 'must be a number, found "5.2 A".',
        hint: 'Write the number alone: the name of the column tells the unit, as in voltage_mV.',
      },
    ]);
  });

  test('an empty field, or a reading beyond the range of the instrument', () => {
    const problems = problemsOf('V,I\n0,\nOVL,5\n1,NaN\n2,Infinity\n3,0x10\n');
    expect(problems.map(({ line, column }) => [line, column])).toEqual([
      [2, 3],
      [3, 1],
      [4, 3],
      [5, 3],
      [6, 3],
    ]);
    expect(problems[0]!.hint).toContain('Take the line out');
    expect(problems[1]!.hint).toContain('Take the line out');
  });

  test('a decimal comma between semicolons, with the option that allows it', () => {
    const [problem] = problemsOf('U;I\n0,25;5\n');
    expect(problem).toMatchObject({ code: 'INVALID_VALUE', line: 2, column: 1 });
    expect(problem!.hint).toContain('--decimal-comma');
  });

  test('decimal commas between commas, which no option can mend', () => {
    const [problem] = problemsOf('V,I\n0,25,5,1\n');
    expect(problem).toMatchObject({ code: 'CSV_COLUMNS', line: 2 });
    expect(problem!.message).toContain('must have 2 fields as the first line has, found 4');
    expect(problem!.hint).toContain('decimal marks');
    expect(problemsOf('V,I\n0,5\n', { decimalComma: true })[0]!.code).toBe('CSV_COLUMNS');
  });

  test('a decimal point in a file that was said to have commas', () => {
    expect(problemsOf('U;I\n0.25;5\n', { decimalComma: true })[0]!.hint).toContain('was said');
  });

  test('a row that is too short', () => {
    expect(problemsOf('t,V,I\n0,1,5\n0,2\n')[0]).toMatchObject({
      code: 'CSV_COLUMNS',
      line: 3,
      message:
        'must have 3 fields as the first line has, found 2 (fields are separated by commas).',
    });
  });

  test('no header', () => {
    expect(problemsOf('0,5\n0.1,4\n')[0]).toMatchObject({ code: 'NO_HEADER', line: 1, column: 1 });
  });

  test('no column that says voltage, with all that are there', () => {
    expect(problemsOf('x,I\n0,5\n')).toMatchObject([
      {
        code: 'CURVE_COLUMN',
        line: 1,
        message: 'no column says voltage, found "x", "I".',
        hint: 'Name the column of voltage with --voltage-column.',
      },
    ]);
    expect(problemsOf('x,y\n0,5\n')).toHaveLength(2);
  });

  test('several columns that say voltage', () => {
    expect(problemsOf('V_set,V_meas,I\n0,0,5\n')[0]).toMatchObject({
      code: 'CURVE_COLUMN',
      column: 7,
      message: 'several columns say voltage: "V_set", "V_meas".',
    });
  });

  test('a named column that is not there, with the nearest that is', () => {
    const options = { voltageColumn: 'voltag' };
    expect(problemsOf('voltage,I\n0,5\n', options)[0]!.hint).toBe('Did you mean voltage?');
  });

  test('one column named for both', () => {
    const options = { voltageColumn: 'x', currentColumn: 'X' };
    expect(problemsOf('x,I\n0,5\n', options)[0]!.message).toContain('two columns');
  });

  test('a unit that is none of voltage or current', () => {
    expect(problemsOf('voltage_V,current (mA/cm²)\n0,5\n')[0]!.message).toBe(
      'the unit of current must be one of kA, A, mA, µA, μA, uA, found "mA/cm²" in ' +
        '"current (mA/cm²)".',
    );
    expect(problemsOf('voltage [mA],I\n0,5\n')[0]!.hint).toBe('That is a unit of current.');
  });

  test('a quote that is not closed', () => {
    expect(problemsOf('V,I\n0,"5\n1,4\n')[0]).toMatchObject({ code: 'CSV_SYNTAX', file: 'c.csv' });
  });

  test('nothing at all, or nothing below the header', () => {
    expect(problemsOf('')[0]!.code).toBe('EMPTY_FILE');
    expect(problemsOf('# only a comment\n')[0]!.code).toBe('EMPTY_FILE');
    expect(problemsOf('V,I\n')[0]!.code).toBe('EMPTY_FILE');
  });

  test('hundreds of bad numbers are told by ten of them and a count', () => {
    const problems = problemsOf(`V,I\n${'x,1\n'.repeat(300)}`);
    expect(problems).toHaveLength(11);
    expect(problems[10]!.message).toBe('290 more like these.');
  });

  test('no file at that path', () => {
    const file = join(newFolder(), 'c.csv');
    expect(faultOf(() => readMeasuredCurve(file)).problems[0]!.code).toBe('FILE_MISSING');
    writeFileSync(file, 'V,I\n0,5\n');
    expect(readMeasuredCurve(file).points).toEqual([{ voltage: 0, current: 5, line: 2 }]);
  });
});
