/**
 * The one error type of the house. A Problem is plain data: where, what was found, what was
 * expected, how to mend it. A Fault carries one or more of them.
 */

/** Whose move it is, and therefore the exit code of the program. */
export type FaultKind =
  /** The caller's data or usage is wrong (exit 2). */
  | 'input'
  /** A check or verdict failed (exit 1). */
  | 'check'
  /** Disk, instrument, foreign program (exit 3). */
  | 'world';

/** A place in an input file. Lines and columns count from 1. */
export interface Place {
  readonly file?: string;
  readonly line?: number;
  readonly column?: number;
  /** Path of the field inside the document, as in `curves.conditions[2].irradiance`. */
  readonly field?: string;
}

export interface Problem extends Place {
  /** Stable upper-case identifier for programs, such as `UNKNOWN_KEY`. The text may improve. */
  readonly code: string;
  /** One sentence: what is wrong, with what was found and what was expected. */
  readonly message: string;
  /** What to do next. */
  readonly hint?: string;
}

export class Fault extends Error {
  override readonly name = 'Fault';
  readonly kind: FaultKind;
  readonly problems: readonly Problem[];

  constructor(kind: FaultKind, problems: Problem | readonly Problem[], options?: ErrorOptions) {
    const list = 'code' in problems ? [problems] : problems;
    super(list.map(describeProblem).join('\n'), options);
    this.kind = kind;
    this.problems = list;
  }
}

/** `module.yaml:4:8: voc_V: must be above 0, found -3. Hint …` in one or two lines. */
export function describeProblem(problem: Problem): string {
  const { file, line, column, field, message, hint } = problem;
  const position = [file, line, column].filter((part) => part !== undefined).join(':');
  const where = [position, field].filter((part) => part !== undefined && part !== '').join(': ');
  return `${where === '' ? '' : `${where}: `}${message}${hint === undefined ? '' : `\n  ${hint}`}`;
}

/** A Fault for an argument of a library function that is out of its stated range. */
export function argumentFault(field: string, expected: string, found: unknown): Fault {
  return new Fault('input', {
    code: 'ARGUMENT',
    field,
    message: `must be ${expected}, found ${String(found)}.`,
  });
}
