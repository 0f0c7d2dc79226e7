import { Fault, type Problem } from '../fault.js';
import { fieldProblem } from '../file/definition.js';
import { fieldText, type FieldPath, type InputDocument } from '../file/document.js';
import type { Seconds } from '../quantities.js';
import { Chain } from './chain.js';
import { CompiledWeather } from './compiled-weather.js';
import {
  LONGEST_S,
  type Block,
  type Ramp,
  type Repeat,
  type Sequence,
  type WeatherDefinition,
} from './definition.js';
import { changedLevel, irradianceChange, levelKey, startLevel, type Level } from './level.js';
import type { Piece } from './piece.js';
import { RampPiece } from './ramp-piece.js';
import { Repetition } from './repetition.js';
import { Span } from './span.js';
import { trapezoidBlocks } from './trapezoids.js';
import type { Weather } from './weather.js';

/**
 * A definition whose blocks are right one by one (`mistakesIn` finds nothing) becomes a weather.
 * Every block starts from the conditions that the one before it left; a quantity that a block does
 * not set is carried through.
 * @throws Fault `NOTHING_CHANGES`, `NO_DURATION`, `TOO_LONG`: what shows only when blocks meet.
 */
export function compile(definition: WeatherDefinition, document: InputDocument): Weather {
  const compiler = new Compiler(document);
  const { piece } = compiler.list(definition.blocks, ['blocks'], startLevel(GROUPS, definition));
  compiler.requireDuration(piece.duration, ['blocks']);
  if (compiler.problems.length > 0) throw new Fault('input', compiler.problems);
  return new CompiledWeather(definition.name, GROUPS, piece);
}

// All light falls alike until there are blocks that shade.
const GROUPS = 1;

interface Compiled {
  readonly piece: Piece;
  readonly end: Level;
}

class Compiler {
  readonly #document: InputDocument;
  readonly #problems = new Map<string, Problem>();
  // A repeat compiles its blocks twice, so n repeats around a block would compile it 2^n times.
  // Few of those start from different conditions.
  readonly #done = new Map<readonly Block[], Map<string, Compiled>>();

  constructor(document: InputDocument) {
    this.#document = document;
  }

  get problems(): Problem[] {
    return [...this.#problems.values()];
  }

  list(blocks: readonly Block[], path: FieldPath, start: Level): Compiled {
    const byStart = this.#done.get(blocks) ?? new Map<string, Compiled>();
    this.#done.set(blocks, byStart);
    const key = levelKey(start);
    const compiled = byStart.get(key) ?? this.#chain(blocks, path, start);
    byStart.set(key, compiled);
    return compiled;
  }

  /** Reports what takes no time or too much, unless a problem inside `path` explains it. */
  requireDuration(duration: Seconds, path: FieldPath, at: FieldPath = path): void {
    const inside = fieldText(path);
    if ([...this.#problems.keys()].some((field) => field.startsWith(inside))) return;
    if (duration === 0) {
      this.#report(path, {
        code: 'NO_DURATION',
        message: 'must take some time, found only blocks that take none.',
        hint: 'Add a hold.',
      });
    } else if (duration > LONGEST_S) {
      const message = `must take at most ${LONGEST_S} s, found ${duration} s.`;
      this.#report(at, { code: 'TOO_LONG', message });
    }
  }

  #chain(blocks: readonly Block[], path: FieldPath, start: Level): Compiled {
    const pieces: Piece[] = [];
    let end = start;
    for (const [index, block] of blocks.entries()) {
      const compiled = this.#block(block, [...path, index], end);
      pieces.push(compiled.piece);
      end = compiled.end;
    }
    return { piece: new Chain(pieces), end };
  }

  #block(block: Block, path: FieldPath, start: Level): Compiled {
    const { hold, step, ramp, repeat, sequence, trapezoids } = block;
    if (hold !== undefined) return line(start, start, hold.for_s);
    if (step !== undefined) return line(start, changedLevel(start, step), 0);
    if (ramp !== undefined) return this.#ramp(ramp, [...path, 'ramp'], start);
    if (repeat !== undefined) return this.#repeat(repeat, [...path, 'repeat'], start);
    if (sequence !== undefined) return this.#sequence(sequence, [...path, 'sequence'], start);
    return this.list(trapezoidBlocks(trapezoids!), [...path, 'trapezoids'], start);
  }

  #ramp(ramp: Ramp, path: FieldPath, start: Level): Compiled {
    const end = changedLevel(start, ramp);
    const slope = ramp.slope_W_per_m2_per_s;
    if (slope === undefined) return line(start, end, ramp.for_s!);
    const at = [...path, 'slope_W_per_m2_per_s'];
    const change = irradianceChange(start, end);
    if (change === 0) {
      this.#report(at, {
        code: 'NOTHING_CHANGES',
        message: `a slope must have two levels between them, found ${end.irradiance[0]!} W/m² at both ends.`,
        hint: path.includes('repeat') ? ONE_WAY_IN_A_REPEAT : 'Give for_s, or use hold.',
      });
    }
    const compiled = line(start, end, change / slope);
    this.requireDuration(compiled.piece.duration, at);
    return compiled;
  }

  // The values of a body are absolute: it ends alike from wherever it starts, except in what it
  // does not set, and that is carried through. So the second pass stands for all that follow.
  #repeat({ times, blocks }: Repeat, path: FieldPath, start: Level): Compiled {
    const body = [...path, 'blocks'];
    const first = this.list(blocks, body, start);
    const later = times === 1 ? first : this.list(blocks, body, first.end);
    this.requireDuration(Math.min(first.piece.duration, later.piece.duration), path);
    const piece = new Repetition(first.piece, later.piece, times);
    this.requireDuration(piece.duration, path, [...path, 'times']);
    return { piece, end: first.end };
  }

  #sequence({ name, blocks }: Sequence, path: FieldPath, start: Level): Compiled {
    const inner = this.list(blocks, [...path, 'blocks'], start);
    return name === undefined ? inner : { ...inner, piece: new Span(name, inner.piece) };
  }

  // One for each place, though a body is compiled for its first pass and for the later ones.
  #report(path: FieldPath, problem: Parameters<typeof fieldProblem>[2]): void {
    this.#problems.set(fieldText(path), fieldProblem(this.#document, path, problem));
  }
}

const ONE_WAY_IN_A_REPEAT =
  'A pass starts where the one before it ended: come back inside the repeat, or give for_s.';

const line = (start: Level, end: Level, duration: Seconds): Compiled => ({
  piece: new RampPiece(start, end, duration),
  end,
});
