/** Which columns of a table hold voltage and current, and in what units. */
import { Fault, type Problem } from '../../fault.js';
import { suggest } from '../../file/nearest.js';
import type { CsvTable } from './csv-table.js';

export interface CurveColumn {
  readonly index: number;
  readonly name: string;
  /** Power of ten from the column's unit to V or A: -3 for millivolts. */
  readonly exponent: number;
}

export interface CurveColumns {
  readonly voltage: CurveColumn;
  readonly current: CurveColumn;
}

type Quantity = keyof CurveColumns;

/**
 * The one column whose name says voltage and the one whose name says current, or those named.
 *
 * A name is split into words at anything that is not a letter. Its unit is the last word, or what
 * stands in brackets or behind a slash: kV, V, mV, kA, A, mA, µA (uA). Words for voltage: voltage,
 * V, U, volt; for current: current, I, ampere; both also as in Vpv, Idc. Case counts only for
 * units. So `voltage_V`, `U [mV]`, `Current (mA)`, `V`, `I`, `PV voltage / V` are understood. With no unit in the
 * name the numbers are in V and A.
 * @throws Fault `NO_HEADER`, `CURVE_COLUMN` where none or several columns answer.
 */
export function curveColumns(
  table: CsvTable,
  named: { readonly voltage?: string | undefined; readonly current?: string | undefined },
): CurveColumns {
  const { header, file } = table;
  if (header.fields.every((field) => /^[-+.\d,eE]*$/.test(field))) {
    throw new Fault('input', {
      code: 'NO_HEADER',
      ...header.place(0),
      message: `the first line must name the columns, found "${header.fields.join(' ')}".`,
      hint: 'Put a line such as voltage_V,current_A above the numbers.',
    });
  }
  const problems: Problem[] = [];
  const columns = QUANTITIES.map((quantity) => {
    const found = locate(table, quantity, named[quantity]);
    if ('problem' in found) problems.push({ file, ...found.problem });
    return found;
  });
  const [voltage, current] = columns;
  if (
    voltage === undefined ||
    current === undefined ||
    'problem' in voltage ||
    'problem' in current
  ) {
    throw new Fault('input', problems);
  }
  if (voltage.index === current.index) {
    throw new Fault('input', {
      code: 'CURVE_COLUMN',
      ...header.place(voltage.index),
      message: `voltage and current must be two columns, found "${voltage.name}" named for both.`,
    });
  }
  return { voltage, current };
}

const QUANTITIES = ['voltage', 'current'] as const;

const UNITS: Readonly<Record<Quantity, Readonly<Record<string, number>>>> = {
  voltage: { kV: 3, V: 0, mV: -3 },
  current: { kA: 3, A: 0, mA: -3, µA: -6, μA: -6, uA: -6 },
};
const OTHER: Readonly<Record<Quantity, Quantity>> = { voltage: 'current', current: 'voltage' };
const WORDS: Readonly<Record<Quantity, RegExp>> = {
  voltage: /^(voltages?|volts?|[vu](pv|dc|in|out|meas|mod|module|cell|term)?)$/i,
  current: /^(currents?|amp(ere)?s?|i(pv|dc|in|out|meas|mod|module|cell|term)?)$/i,
};

type Located = CurveColumn | { readonly problem: Omit<Problem, 'file'> };

function locate(table: CsvTable, quantity: Quantity, named: string | undefined): Located {
  const { header } = table;
  const readings = header.fields.map((name) => readName(name));
  if (named !== undefined) return locateNamed(table, quantity, named);
  const candidates = readings.flatMap((reading, index) =>
    reading.quantity === quantity ? [index] : [],
  );
  const [index, ...others] = candidates;
  const option = `Name the column of ${quantity} with --${quantity}-column.`;
  const names = (indices: readonly number[]): string =>
    indices.map((i) => `"${header.fields[i]!}"`).join(', ');
  if (index === undefined) {
    return problemAt(
      table,
      0,
      `no column says ${quantity}, found ${names([...header.fields.keys()])}.`,
      option,
    );
  }
  if (others.length > 0) {
    return problemAt(
      table,
      others[0]!,
      `several columns say ${quantity}: ${names(candidates)}.`,
      option,
    );
  }
  return columnAt(table, quantity, index);
}

function locateNamed(table: CsvTable, quantity: Quantity, named: string): Located {
  const { fields } = table.header;
  const wanted = named.trim();
  const exact = fields.indexOf(wanted);
  const index =
    exact >= 0 ? exact : fields.findIndex((name) => name.toLowerCase() === wanted.toLowerCase());
  if (index < 0) {
    return problemAt(table, 0, `there is no column "${wanted}".`, suggest(wanted, fields));
  }
  return columnAt(table, quantity, index);
}

function columnAt(table: CsvTable, quantity: Quantity, index: number): Located {
  const name = table.header.fields[index]!;
  const { unit } = readName(name);
  const exponent = unit === undefined ? 0 : UNITS[quantity][unit];
  if (exponent !== undefined) return { index, name, exponent };
  const known = Object.keys(UNITS[quantity]).join(', ');
  return problemAt(
    table,
    index,
    `the unit of ${quantity} must be one of ${known}, found "${unit}" in "${name}".`,
    UNITS[OTHER[quantity]][unit!] === undefined
      ? undefined
      : `That is a unit of ${OTHER[quantity]}.`,
  );
}

interface NameReading {
  readonly quantity?: Quantity;
  readonly unit?: string;
}

function readName(name: string): NameReading {
  const set = /^(.*?)\s*(?:\[([^\]]*)\]|\(([^)]*)\)|\/\s*(\S.*))\s*$/.exec(name);
  const written = set?.[2] ?? set?.[3] ?? set?.[4];
  const words = (set?.[1] ?? name).split(/[^\p{L}]+/u).filter((word) => word !== '');
  const last = words.at(-1);
  const isUnit = last !== undefined && QUANTITIES.some((q) => UNITS[q][last] !== undefined);
  const unit = written?.trim() ?? (isUnit ? last : undefined);
  const rest = written === undefined && isUnit && words.length > 1 ? words.slice(0, -1) : words;
  const quantity = QUANTITIES.find((q) => rest.some((word) => WORDS[q].test(word)));
  const byUnit = QUANTITIES.find(
    (q) => rest.length === 1 && rest[0] === unit && UNITS[q][unit!] === 0,
  );
  const known = quantity ?? byUnit;
  return {
    ...(known === undefined ? {} : { quantity: known }),
    ...(unit === undefined || unit === '' ? {} : { unit }),
  };
}

const problemAt = (table: CsvTable, index: number, message: string, hint?: string): Located => ({
  problem: {
    code: 'CURVE_COLUMN',
    ...table.header.place(index),
    message,
    ...(hint === undefined ? {} : { hint }),
  },
});
