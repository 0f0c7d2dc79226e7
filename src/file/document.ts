/** The one way to read an input file: YAML 1.2 (and so JSON), with the place of every value. */
import { readFileSync, statSync } from 'node:fs';
import { isMap, isPair, isScalar, isSeq, LineCounter, parseDocument, type ParsedNode } from 'yaml';
import { Fault, type Place } from '../fault.js';
import { worldFault } from './world-fault.js';

export type FieldPath = readonly PropertyKey[];

/** A parsed document: plain data, and where each piece of it stands in the text. */
export interface InputDocument {
  readonly file: string;
  readonly text: string;
  readonly value: unknown;
  /** Place of the value at `path`, or of its nearest parent if it is absent. */
  place(path: FieldPath): Place;
  /** Place of the key of the entry at `path`. */
  placeOfKey(path: FieldPath): Place;
}

// Input files are written by people; what is larger is a mistake, or a log (which is CSV).
const LARGEST_DOCUMENT_BYTES = 8 * 1024 * 1024;

/** @throws Fault `FILE_MISSING`, `FILE_TOO_LARGE`, `DISK`, or the Faults of `parseInput`. */
export function readInput(file: string): InputDocument {
  const text = readText(file);
  return parseInput(text, file);
}

/**
 * @param file Name for messages.
 * @throws Fault `YAML_SYNTAX` with every error of the text, or `EMPTY_FILE`.
 */
export function parseInput(text: string, file: string): InputDocument {
  const lines = new LineCounter();
  const document = parsed(text, file, lines);
  if (document.errors.length > 0) {
    throw new Fault(
      'input',
      document.errors.map((error) => {
        const { line, col } = lines.linePos(error.pos[0]);
        const message = YAML_MESSAGES[error.code] ?? asSentence(error.message);
        return { code: 'YAML_SYNTAX', file, line, column: col, message };
      }),
    );
  }
  const root = document.contents;
  const value = root === null ? null : toData(() => document.toJS({ maxAliasCount: 100 }), file);
  if (root === null || value === null) {
    throw new Fault('input', { code: 'EMPTY_FILE', file, message: 'the file holds no data.' });
  }
  return {
    file,
    text,
    value,
    place: (path) => placeOf(valueNode(root, path), path, file, lines),
    placeOfKey: (path) => placeOf(keyNode(root, path) ?? valueNode(root, path), path, file, lines),
  };
}

// What users meet most, in their words instead of a parser's.
const YAML_MESSAGES: Readonly<Record<string, string>> = {
  DUPLICATE_KEY: 'the key stands a second time in the same group.',
  MULTIPLE_DOCS: 'a second document starts here: keep one in a file.',
  MULTILINE_IMPLICIT_KEY:
    'the line is not "key: value": look for a missing colon, a missing space behind it, or indentation.',
  TAB_AS_INDENT: 'indentation is by spaces, found a tab.',
  BAD_ALIAS: 'an alias (*name) needs its anchor (&name) before it.',
};

function parsed(text: string, file: string, lineCounter: LineCounter) {
  try {
    return parseDocument(text, { lineCounter, prettyErrors: false });
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    throw new Fault('input', {
      code: 'YAML_SYNTAX',
      file,
      message: 'groups and lists are nested too deeply to be read.',
    });
  }
}

function readText(file: string): string {
  try {
    const { size } = statSync(file);
    if (size > LARGEST_DOCUMENT_BYTES) {
      throw new Fault('input', {
        code: 'FILE_TOO_LARGE',
        file,
        message: `an input file has at most ${LARGEST_DOCUMENT_BYTES} bytes, found ${size}.`,
      });
    }
    return decoded(readFileSync(file), file);
  } catch (error) {
    throw worldFault(error, file);
  }
}

function decoded(bytes: Uint8Array, file: string): string {
  try {
    return new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw new Fault('input', {
      code: 'NOT_TEXT',
      file,
      message: 'is not text in UTF-8.',
      hint: 'Save it as UTF-8 in your editor; a file of another kind may have been given by mistake.',
    });
  }
}

// Aliases can expand without bound; the parser stops them and says so by throwing.
function toData(convert: () => unknown, file: string): unknown {
  try {
    return convert();
  } catch (error) {
    const message = error instanceof Error ? asSentence(error.message) : 'cannot be expanded.';
    throw new Fault('input', { code: 'YAML_SYNTAX', file, message });
  }
}

function valueNode(root: ParsedNode, path: FieldPath): ParsedNode {
  let node = root;
  for (const step of path) {
    const next = child(node, step);
    if (next === undefined) break;
    node = next;
  }
  return node;
}

function child(node: ParsedNode, step: PropertyKey): ParsedNode | undefined {
  if (isSeq(node)) return node.items[Number(step)];
  if (!isMap(node)) return undefined;
  // Keys may be numbers, which data shows as text.
  const pair = node.items.find(({ key }) => scalarText(key) === String(step));
  return pair?.value ?? undefined;
}

function keyNode(root: ParsedNode, path: FieldPath): ParsedNode | undefined {
  const parent = valueNode(root, path.slice(0, -1));
  const last = path.at(-1);
  if (!isMap(parent) || last === undefined) return undefined;
  const pair = parent.items.find((item) => isPair(item) && scalarText(item.key) === String(last));
  return pair?.key;
}

const scalarText = (node: unknown): string | undefined =>
  isScalar(node) ? String(node.value) : undefined;

function placeOf(node: ParsedNode, path: FieldPath, file: string, lines: LineCounter): Place {
  const { line, col } = lines.linePos(node.range[0]);
  const field = fieldText(path);
  return { file, line, column: col, ...(field === '' ? {} : { field }) };
}

/** `['curves', 2, 'irradiance']` as `curves[2].irradiance`. */
export function fieldText(path: FieldPath): string {
  return path
    .map((step, index) =>
      typeof step === 'number' ? `[${step}]` : `${index === 0 ? '' : '.'}${String(step)}`,
    )
    .join('');
}

const asSentence = (message: string): string => {
  const firstLine = message.split('\n', 1)[0]!.trim();
  return firstLine.endsWith('.') ? firstLine : `${firstLine}.`;
};
