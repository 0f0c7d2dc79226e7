/** A small picture of one or two curves over a common axis, in characters. */

export interface Trace {
  /** One letter; draws the curve where dots are not to be had. */
  readonly mark: string;
  /** Written at the axis of the trace. */
  readonly title: string;
  readonly unit: string;
  readonly x: ArrayLike<number>;
  readonly y: ArrayLike<number>;
}

export interface PictureOptions {
  /** Characters of the plotting area. */
  readonly width: number;
  readonly height: number;
  /** Braille dots (2 by 4 in a character), or letters where the terminal has no Unicode. */
  readonly dots: boolean;
  readonly xTitle: string;
  /** Colours a piece of the picture that belongs to trace number `trace`. */
  readonly paint?: (text: string, trace: number) => string;
}

/** Lines of the picture. The first trace has its scale on the left, the second on the right. */
export function drawTraces(traces: readonly Trace[], options: PictureOptions): string[] {
  const { width, height, xTitle } = options;
  const xMost = Math.max(...traces.map(({ x }) => largest(x)), 0);
  const tops = traces.map(({ y }) => largest(y));
  const grid = new Grid(options);
  traces.forEach((trace, index) => {
    plot(grid, trace, index, xMost, tops[index]!);
  });
  const scale = (index: number): string =>
    traces[index] === undefined ? '' : `${short(tops[index]!)} ${traces[index].unit}`;
  const left = scale(0);
  const margin = ' '.repeat(left.length);
  const body = Array.from({ length: height }, (_, row) => {
    const edge = row === 0 ? left : row === height - 1 ? '0'.padStart(left.length) : margin;
    const right = row === 0 ? scale(1) : '';
    return `${edge} |${grid.line(row)}| ${right}`.trimEnd();
  });
  const xScale = `${short(xMost)} ${xTitle}`;
  const names = traces.map(({ title, mark }) => (options.dots ? title : `${mark}: ${title}`));
  const painted = names.map((name, index) => options.paint?.(name, index) ?? name);
  const gap = Math.max(width - 1 - xScale.length, 1);
  return [
    ...body,
    `${margin} +${'-'.repeat(width)}+`,
    `${margin}  0${' '.repeat(gap)}${xScale}`,
    `${margin}  ${painted.join('   ')}`,
  ];
}

function plot(
  grid: Grid,
  { x, y, mark }: Trace,
  trace: number,
  xMost: number,
  yMost: number,
): void {
  for (let index = 0; index < x.length; index++) {
    const fromX = x[Math.max(index - 1, 0)]!;
    const fromY = y[Math.max(index - 1, 0)]!;
    // Between two points the line is walked in steps finer than a dot.
    for (let step = 0; step <= STEPS_PER_PIECE; step++) {
      const share = step / STEPS_PER_PIECE;
      const across = fromX + (x[index]! - fromX) * share;
      const up = fromY + (y[index]! - fromY) * share;
      if (xMost > 0 && yMost > 0) grid.set(across / xMost, up / yMost, trace, mark);
    }
  }
}

const STEPS_PER_PIECE = 16;

/** Characters with dots inside; fractions from 0 to 1 address it, the origin at the lower left. */
class Grid {
  readonly #options: PictureOptions;
  readonly #cells: Uint8Array;
  readonly #owners: Int8Array;
  readonly #letters: string[];

  constructor(options: PictureOptions) {
    this.#options = options;
    const size = options.width * options.height;
    this.#cells = new Uint8Array(size);
    this.#owners = new Int8Array(size).fill(-1);
    this.#letters = new Array<string>(size).fill(' ');
  }

  set(across: number, up: number, trace: number, mark: string): void {
    if (!(across >= 0 && across <= 1 && up >= 0 && up <= 1)) return;
    const { width, height } = this.#options;
    const column = Math.round(across * (width * 2 - 1));
    const row = Math.round((1 - up) * (height * 4 - 1));
    const cell = (row >> 2) * width + (column >> 1);
    this.#cells[cell]! |= BRAILLE[row & 3]![column & 1]!;
    this.#owners[cell] = trace;
    this.#letters[cell] = mark;
  }

  line(row: number): string {
    const { width, dots, paint } = this.#options;
    let text = '';
    for (let cell = row * width; cell < (row + 1) * width; cell++) {
      const dotted =
        this.#cells[cell] === 0 ? ' ' : String.fromCodePoint(0x2800 + this.#cells[cell]!);
      const character = dots ? dotted : this.#letters[cell]!;
      const owner = this.#owners[cell]!;
      text += owner >= 0 && paint !== undefined ? paint(character, owner) : character;
    }
    return text;
  }
}

// Unicode, block "Braille Patterns": the bit of each dot, by row and column.
const BRAILLE = [
  [0x01, 0x08],
  [0x02, 0x10],
  [0x04, 0x20],
  [0x40, 0x80],
] as const;

function largest(values: ArrayLike<number>): number {
  let most = -Infinity;
  for (let index = 0; index < values.length; index++) most = Math.max(most, values[index]!);
  return most;
}

const short = (value: number): string => String(Number(value.toPrecision(3)));
