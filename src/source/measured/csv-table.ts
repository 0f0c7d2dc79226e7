/** A table in a text file, with the place of every field. Knows nothing of curves. */
import { CsvError, parse } from 'csv-parse/sync';
import { Fault, type Place, type Problem } from '../../fault.js';

export interface CsvTable {
  readonly file: string;
  readonly delimiter: Delimiter;
  /** The first line that is neither blank nor a comment. */
  readonly header: CsvRow;
  readonly rows: readonly CsvRow[];
}

export interface CsvRow {
  readonly fields: readonly string[];
  readonly line: number;
  /** Place of a field. */
  place(index: number): Place;
}

type Delimiter = ',' | ';' | '\t';

/**
 * Splits a text into rows. The delimiter is the first of semicolon, tab and comma that the header
 * has outside quotes. Blank lines, lines that start with `#`, and a byte order mark are skipped;
 * fields are trimmed and may be quoted as in RFC 4180.
 * @throws Fault `EMPTY_FILE`, `CSV_SYNTAX`, `CSV_COLUMNS` where a row is shorter than the header
 * or longer.
 */
export function readTable(text: string, file: string): CsvTable {
  const delimiter = delimiterOf(text);
  const [header, ...rows] = records(text, file, delimiter);
  if (header === undefined) {
    throw new Fault('input', { code: 'EMPTY_FILE', file, message: 'the file holds no data.' });
  }
  const width = header.fields.length;
  const problems = rows
    .filter(({ fields }) => fields.length !== width)
    .map((row) => widthProblem(row, width, delimiter));
  if (problems.length > 0) throw new Fault('input', firstOf(problems, file));
  return { file, delimiter, header, rows };
}

/** So many problems say enough; the rest are counted. */
export function firstOf(problems: readonly Problem[], file: string): Problem[] {
  const shown = problems.slice(0, MOST_PROBLEMS);
  const rest = problems.length - shown.length;
  if (rest === 0) return shown;
  return [...shown, { code: shown[0]!.code, file, message: `${rest} more like these.` }];
}

const MOST_PROBLEMS = 10;

const NAMES: Readonly<Record<Delimiter, string>> = {
  ',': 'commas',
  ';': 'semicolons',
  '\t': 'tabs',
};

function delimiterOf(text: string): Delimiter {
  const header = /^(?!\s*(?:#|$)).*$/m.exec(text.replace(/^\uFEFF/, ''))?.[0] ?? '';
  const outside = header.replaceAll(/"(?:[^"]|"")*"/g, '');
  return ([';', '\t'] as const).find((mark) => outside.includes(mark)) ?? ',';
}

interface Parsed {
  readonly record: string[];
  readonly info: { readonly lines: number };
}

function records(text: string, file: string, delimiter: Delimiter): CsvRow[] {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  try {
    const parsed = parse(text, {
      ...{ bom: true, comment: '#', comment_no_infix: true, delimiter, info: true },
      ...{ relax_column_count: true, skip_empty_lines: true, trim: true },
    }) as unknown as Parsed[];
    return parsed
      .filter(({ record }) => record.some((field) => field !== ''))
      .map(({ record, info }) =>
        row(record, lines[info.lines - 1] ?? '', info.lines, file, delimiter),
      );
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    const line: unknown = error['lines'];
    throw new Fault('input', {
      code: 'CSV_SYNTAX',
      file,
      ...(typeof line === 'number' ? { line } : {}),
      message: 'a quoted field is not closed, or has text beside its quotes.',
      hint: 'Quotes are not needed around numbers.',
    });
  }
}

/** `line` is where the record ends; a quoted field that holds line breaks begins earlier. */
function row(
  fields: string[],
  content: string,
  line: number,
  file: string,
  delimiter: Delimiter,
): CsvRow {
  const place = (index: number): Place => {
    const before = skipFields(content, index, delimiter);
    const blank = /^[ \t]*/.exec(delimiter === '\t' ? '' : content.slice(before))![0].length;
    return { file, line, column: before + blank + 1 };
  };
  return { fields, line, place };
}

/** Where field number `index` starts. */
function skipFields(content: string, index: number, delimiter: Delimiter): number {
  let at = 0;
  let isQuoted = false;
  for (let left = index; left > 0 && at < content.length; at++) {
    if (content[at] === '"') isQuoted = !isQuoted;
    else if (content[at] === delimiter && !isQuoted) left -= 1;
  }
  return at;
}

function widthProblem(row: CsvRow, width: number, delimiter: Delimiter): Problem {
  const found = row.fields.length;
  const message =
    `must have ${width} fields as the first line has, found ${found} ` +
    `(fields are separated by ${NAMES[delimiter]}).`;
  const isDecimal = delimiter === ',' && found === 2 * width;
  return {
    code: 'CSV_COLUMNS',
    ...row.place(Math.min(found, width)),
    message,
    ...(isDecimal
      ? { hint: 'If commas are decimal marks, separate fields by semicolons, or write points.' }
      : {}),
  };
}
