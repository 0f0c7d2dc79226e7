/** Reads a measured curve: a table of voltages and currents in a CSV file. */
import { readFileSync, statSync } from 'node:fs';
import { Fault, type Problem } from '../../fault.js';
import { worldFault } from '../../file/world-fault.js';
import { firstOf, readTable, type CsvRow, type CsvTable } from './csv-table.js';
import { curveColumns, type CurveColumn, type CurveColumns } from './curve-columns.js';
import type { MeasuredPoint } from './curve-data.js';

export interface MeasuredCurveOptions {
  /** Name of the column of voltages, where the header leaves it open. */
  readonly voltageColumn?: string | undefined;
  readonly currentColumn?: string | undefined;
  /** Numbers have a decimal comma; fields are then separated by semicolons or tabs. */
  readonly decimalComma?: boolean | undefined;
  /** Turns the sign of the currents: for instruments that count them as a load does. */
  readonly negateCurrent?: boolean | undefined;
}

export interface MeasuredCurve {
  readonly file: string;
  /** In the order of the file, each with its line. */
  readonly points: readonly MeasuredPoint[];
  readonly columns: CurveColumns;
}

const LARGEST_CURVE_BYTES = 16 * 1024 * 1024;

/** @throws Fault `FILE_MISSING`, `FILE_TOO_LARGE`, `DISK`, or the Faults of `parseMeasuredCurve`. */
export function readMeasuredCurve(file: string, options: MeasuredCurveOptions = {}): MeasuredCurve {
  return parseMeasuredCurve(readText(file), file, options);
}

/**
 * Points in V and A. Any order; other columns are ignored.
 * @param file Name for messages.
 * @throws Fault `EMPTY_FILE`, `CSV_SYNTAX`, `CSV_COLUMNS`, `NO_HEADER`, `CURVE_COLUMN`,
 * `INVALID_VALUE`, with every problem of its kind (the first ten in full).
 */
export function parseMeasuredCurve(
  text: string,
  file: string,
  options: MeasuredCurveOptions = {},
): MeasuredCurve {
  const table = readTable(text, file);
  if (options.decimalComma === true && table.delimiter === ',') {
    throw new Fault('input', {
      code: 'CSV_COLUMNS',
      ...table.header.place(0),
      message: 'a comma cannot be decimal mark and separator at once.',
      hint: 'Separate the fields by semicolons, or write decimal points.',
    });
  }
  const columns = curveColumns(table, {
    voltage: options.voltageColumn,
    current: options.currentColumn,
  });
  const problems: Problem[] = [];
  const points = table.rows.map((row) => pointOf(row, columns, options, problems));
  if (problems.length > 0) throw new Fault('input', firstOf(problems, file));
  return { file, points, columns: checkedColumns(columns, table, points) };
}

function pointOf(
  row: CsvRow,
  { voltage, current }: CurveColumns,
  options: MeasuredCurveOptions,
  problems: Problem[],
): MeasuredPoint {
  const read = (column: CurveColumn): number => {
    const text = row.fields[column.index]!;
    const plain = options.decimalComma === true ? text.replace(',', '.') : text;
    // What the comma stands for is settled: a point would be something else.
    const isNumber = NUMBER.test(plain) && !(options.decimalComma === true && text.includes('.'));
    const value = scaled(plain, column.exponent);
    if (isNumber && Number.isFinite(value)) return value;
    problems.push(notANumber(row, column, text, options.decimalComma === true));
    return NaN;
  };
  const sign = options.negateCurrent === true ? -1 : 1;
  // Adding 0 turns -0 into 0.
  return { voltage: read(voltage) + 0, current: sign * read(current) + 0, line: row.line };
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d{1,3})?$/;

/** The decimal point is moved in the text: 600.1 mV is the double nearest to 0.6001 V. */
function scaled(text: string, exponent: number): number {
  const [mantissa, own = '0'] = text.toLowerCase().split('e');
  return Number(`${mantissa}e${Number(own) + exponent}`);
}

function notANumber(
  row: CsvRow,
  column: CurveColumn,
  text: string,
  decimalComma: boolean,
): Problem {
  const hint = hintFor(text, decimalComma);
  return {
    code: 'INVALID_VALUE',
    ...row.place(column.index),
    field: column.name,
    message: `must be a number, found ${text === '' ? 'nothing' : `"${text.slice(0, 60)}"`}.`,
    ...(hint === undefined ? {} : { hint }),
  };
}

function hintFor(text: string, decimalComma: boolean): string | undefined {
  if (text === '' || /^(nan|inf|ovf?l?|overload|-+|null|n\/a)$/i.test(text)) {
    return 'Take the line out, or put # before it.';
  }
  if (!decimalComma && /^[+-]?\d*,\d+$/.test(text)) {
    return 'For decimal commas say so: --decimal-comma.';
  }
  if (decimalComma && NUMBER.test(text)) return 'The file was said to have decimal commas.';
  if (/^[+-]?[\d.,]+\s*[a-zA-Zµ]+$/.test(text)) {
    return 'Write the number alone: the name of the column tells the unit, as in voltage_mV.';
  }
  return undefined;
}

function checkedColumns(
  columns: CurveColumns,
  table: CsvTable,
  points: readonly MeasuredPoint[],
): CurveColumns {
  if (points.length > 0) return columns;
  throw new Fault('input', {
    code: 'EMPTY_FILE',
    ...table.header.place(0),
    message: 'the file has a header and no points.',
  });
}

function readText(file: string): string {
  try {
    const { size } = statSync(file);
    if (size > LARGEST_CURVE_BYTES) {
      throw new Fault('input', {
        code: 'FILE_TOO_LARGE',
        file,
        message: `a measured curve has at most ${LARGEST_CURVE_BYTES} bytes, found ${size}.`,
      });
    }
    return readFileSync(file, 'utf8');
  } catch (error) {
    throw worldFault(error, file);
  }
}
