/** Reads vector files back, refusing everything that `vectors/FORMAT.md` says a reader must. */
import { Fault, type Problem } from '../fault.js';
import { readColumnRecords, refuseClashes, toColumn, type ReadColumn } from './binary-columns.js';
import { checkSectionCrcs, readHead, type DirectoryEntry, type Refuse } from './binary-head.js';
import { COLUMN_TAG } from './binary-layout.js';
import type { ProductKind } from './product.js';

export type { ReadColumn } from './binary-columns.js';

export interface VectorFile {
  readonly kind: ProductKind;
  readonly sections: readonly ReadSection[];
}

export interface ReadSection {
  readonly tag: string;
  readonly count: number;
  readonly columns: readonly ReadColumn[];
  /** The code of a column in a record. @throws Fault `ARGUMENT` outside the table. */
  code(column: ReadColumn, record: number): number;
}

/**
 * @param file Name for messages.
 * @param onDamage Told of sections whose CRC does not match, so that the caller can look further
 * for the record at fault; without it such a section is refused. The column table never passes.
 * @throws Fault `VECTOR_FILE` saying which part is damaged, with the section in `field`.
 */
export function readVectorFile(
  bytes: Uint8Array,
  file: string,
  onDamage?: (problem: Problem) => void,
): VectorFile {
  const problem = (message: string, field?: string): Problem => ({
    code: 'VECTOR_FILE',
    file,
    ...(field === undefined ? {} : { field }),
    message,
  });
  const refuse: Refuse = (message, field) => {
    throw new Fault('check', problem(message, field));
  };
  const { kind, directory } = readHead(bytes, refuse);
  checkSectionCrcs(bytes, directory, (message, field) => {
    if (onDamage === undefined || field === `section ${COLUMN_TAG}`) refuse(message, field);
    else onDamage(problem(message, field));
  });
  const records = readColumnRecords(bytes, directory[0]!);
  const sections = directory.slice(1).map((entry) => {
    const own = records.filter(({ tag }) => tag === entry.tag);
    const columns = own.map((record) => toColumn(record, entry, refuse));
    return toSection(bytes, entry, columns, refuse);
  });
  const tags = new Set(directory.slice(1).map(({ tag }) => tag));
  const stray = records.find(({ tag }) => !tags.has(tag));
  if (stray !== undefined)
    refuse(`a column belongs to no section: ${JSON.stringify(stray.tag)}.`, 'CHAN');
  return { kind, sections };
}

function toSection(
  bytes: Uint8Array,
  { tag, offset, recordSize, count }: DirectoryEntry,
  columns: readonly ReadColumn[],
  refuse: Refuse,
): ReadSection {
  refuseClashes(columns, tag, refuse);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  return {
    tag,
    count,
    columns,
    code: (column, record) => {
      if (!(record >= 0 && record < count)) refuse(`has no record ${record}.`, `section ${tag}`);
      const at = offset + record * recordSize + column.offset;
      const { storage, format } = column;
      if (storage === 1) return format.signed ? view.getInt8(at) : view.getUint8(at);
      if (storage === 2) return format.signed ? view.getInt16(at, true) : view.getUint16(at, true);
      return format.signed ? view.getInt32(at, true) : view.getUint32(at, true);
    },
  };
}
