/** The one way to print: results to stdout, everything else to stderr. */
import Table from 'cli-table3';
import pc from 'picocolors';
import { describeProblem, Fault, type Problem } from '../fault.js';

/** Writes a result. */
export function printLine(text = ''): void {
  process.stdout.write(`${text}\n`);
}

/** Writes a result for programs: one JSON document. */
export function printJson(value: unknown): void {
  process.stdout.write(`${JSON.stringify(value, undefined, 2)}\n`);
}

/** Says something about the work, not part of the result. */
export function say(text: string): void {
  process.stderr.write(`${text}\n`);
}

export function sayWarnings(warnings: readonly Problem[]): void {
  for (const warning of warnings)
    say(`${errColours.yellow('warning')} ${describeProblem(warning)}`);
}

/** Columns without ruled lines; the first is for names, the others for figures. */
export function printTable(head: readonly string[], rows: readonly (readonly string[])[]): void {
  const table = new Table({
    head: [...head],
    chars: BLANK,
    style: { head: [], border: [], 'padding-left': 0, 'padding-right': 2 },
    colAligns: head.map((_, index) => (index === 0 ? 'left' : 'right')),
  });
  table.push(...rows.map((row) => [...row]));
  for (const line of table.toString().split('\n')) printLine(`  ${line}`.trimEnd());
}

const BLANK = {
  ...{ top: '', 'top-mid': '', 'top-left': '', 'top-right': '' },
  ...{ bottom: '', 'bottom-mid': '', 'bottom-left': '', 'bottom-right': '' },
  ...{ left: '', 'left-mid': '', mid: '', 'mid-mid': '', right: '', 'right-mid': '', middle: '' },
};

// A plain boolean: the library takes undefined for "decide yourself", and then colours CI logs.
const coloursFor = (stream: NodeJS.WriteStream) => {
  const { NO_COLOR: refused = '', TERM: terminal } = process.env;
  // A pipe has no isTTY at all.
  const isTerminal = (stream.isTTY as boolean | undefined) === true;
  return pc.createColors(isTerminal && refused === '' && terminal !== 'dumb');
};
export const colours = coloursFor(process.stdout);
const errColours = coloursFor(process.stderr);

/** Braille needs a terminal that shows Unicode. */
export const showsUnicode = (): boolean =>
  /utf-?8/i.test(
    [process.env['LC_ALL'], process.env['LC_CTYPE'], process.env['LANG']].find(
      (value) => value !== undefined && value !== '',
    ) ?? '',
  );

const EXIT_CODES = { input: 2, check: 1, world: 3 } as const;

/** Prints what went wrong and gives the exit code. */
export function reportFault(error: unknown, asJson: boolean): number {
  if (!(error instanceof Fault)) {
    say(`${errColours.red('error')} ${unforeseen(error)}`);
    return EXIT_CODES.world;
  }
  if (asJson) {
    say(JSON.stringify({ error: error.kind, problems: error.problems }, undefined, 2));
  } else {
    reportProblems(error.problems);
  }
  return EXIT_CODES[error.kind];
}

// The system's own errors say enough; anything else is a fault of this program, and its place helps.
function unforeseen(error: unknown): string {
  if (!(error instanceof Error)) return String(error);
  if ('code' in error && 'syscall' in error) return `DISK ${error.message}`;
  return `INTERNAL please report this: ${error.stack ?? error.message}`;
}

/** Each problem on stderr. */
export function reportProblems(problems: readonly Problem[]): void {
  for (const problem of problems) {
    say(`${errColours.red('error')} ${problem.code} ${describeProblem(problem)}`);
  }
}

/** Four significant digits, or as many as asked for, without an exponent where people expect none. */
export function figure(value: number, digits = 4): string {
  if (value === Infinity) return 'infinite';
  const size = Math.abs(value);
  if (value !== 0 && (size < 1e-3 || size >= 1e6)) return value.toExponential(digits - 1);
  return String(Number(value.toPrecision(digits)));
}

/** `1 problem`, `2 problems`. */
export const counted = (count: number, noun: string): string =>
  `${count} ${noun}${count === 1 ? '' : 's'}`;

/** Adding 0 turns -0 into 0. */
export const percentText = (ratio: number): string =>
  `${(Number((100 * ratio).toFixed(3)) + 0).toFixed(3)} %`;
