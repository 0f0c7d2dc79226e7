import { Fault } from '../fault.js';
import type { InputDocument } from './document.js';

/** Kinds of input files, and the key by which each is told. */
const TELLTALES = {
  model: 'model',
  array: 'array',
  generator: 'generator',
  suite: 'suite',
  weather: 'blocks',
  datasheet: 'isc_A',
} as const;

export type DocumentKind = keyof typeof TELLTALES;

/** The kind of a document, if it has the key of one. */
export function kindOf({ value }: InputDocument): DocumentKind | undefined {
  if (typeof value !== 'object' || value === null) return undefined;
  return (Object.keys(TELLTALES) as DocumentKind[]).find((kind) => TELLTALES[kind] in value);
}

/**
 * One sentence for a file given in the place of another, instead of a page of unknown keys.
 * @throws Fault `OTHER_KIND`.
 */
export function refuseOtherKinds(
  document: InputDocument,
  ...expected: readonly [DocumentKind, ...DocumentKind[]]
): void {
  const kind = kindOf(document);
  if (kind === undefined || expected.includes(kind)) return;
  throw new Fault('input', {
    code: 'OTHER_KIND',
    file: document.file,
    message: `is a ${kind} file; expected a ${expected.join(' or ')} file.`,
  });
}
