/** Reads vector files back, refusing everything that `vectors/FORMAT.md` says a reader must. */
import { Parser } from 'binary-parser/dist/binary_parser.js';
import { Fault, type Problem } from '../fault.js';
import { codeRange, type CodeFormat } from '../fixed/code-format.js';
import { crc32 } from '../numeric/crc32.js';
import {
  COLUMN_NAME_SIZE,
  COLUMN_RECORD_SIZE,
  COLUMN_TAG,
  CRC_SIZE,
  DIRECTORY_ENTRY_SIZE,
  FORMAT_VERSION,
  HEADER_CRC_OFFSET,
  HEADER_SIZE,
  KIND_IDS,
  LARGEST_RECORD,
  MAGIC,
  MOST_SECTIONS,
  OVERFLOW_IDS,
  ROUNDING_IDS,
} from './binary-layout.js';
import type { ProductKind } from './product.js';
import { quantityOfId, type QuantityName } from './quantity.js';

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

export interface ReadColumn {
  readonly name: string;
  /** Undefined for a quantity that this version does not know. */
  readonly quantity: QuantityName | undefined;
  readonly group: number;
  readonly format: CodeFormat;
  readonly offset: number;
  readonly storage: number;
}

const headerParser = new Parser()
  .endianness('little')
  .array('magic', { type: 'uint8', length: MAGIC.length })
  .uint16('version')
  .uint16('headerSize')
  .uint32('kind')
  .uint32('sectionCount')
  .uint32('fileLength')
  .uint32('reserved')
  .uint32('crc');

const directoryEntryParser = new Parser()
  .endianness('little')
  .string('tag', { length: 4, encoding: 'latin1' })
  .uint32('offset')
  .uint32('recordSize')
  .uint32('count');

const columnParser = new Parser()
  .endianness('little')
  .string('tag', { length: 4, encoding: 'latin1' })
  .uint16('quantity')
  .uint8('group')
  .uint8('signed')
  .uint16('offset')
  .uint8('storage')
  .uint8('bits')
  .uint8('rounding')
  .uint8('overflow')
  .uint16('reserved')
  .doublele('step')
  .doublele('origin')
  .string('name', { length: COLUMN_NAME_SIZE, encoding: 'latin1' });

type DirectoryEntry = ReturnType<typeof directoryEntryParser.parse>;
type ColumnRecord = ReturnType<typeof columnParser.parse>;

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
  const directory = readHead(bytes, refuse);
  checkSectionCrcs(bytes, directory, (message, field) => {
    if (onDamage === undefined || field === `section ${COLUMN_TAG}`) refuse(message, field);
    else onDamage(problem(message, field));
  });
  const records = readColumnRecords(bytes, directory[0]!);
  const kind = kindOf(headerParser.parse(bytes).kind);
  if (kind === undefined) return refuse('the kind of file is unknown.', 'header');
  const sections = directory.slice(1).map((entry) => {
    const own = records.filter(({ tag }) => tag === entry.tag);
    const columns = own.map((record) => toColumn(record, entry, refuse));
    return toSection(bytes, entry, columns, refuse);
  });
  const tags = new Set(directory.slice(1).map(({ tag }) => tag));
  const stray = records.find(({ tag }) => !tags.has(tag));
  if (stray !== undefined) refuse(`a column belongs to no section: ${show(stray.tag)}.`, 'CHAN');
  return { kind, sections };
}

type Refuse = (message: string, field?: string) => never;

function readHead(bytes: Uint8Array, refuse: Refuse): DirectoryEntry[] {
  if (bytes.length < HEADER_SIZE) {
    refuse(`must have at least ${HEADER_SIZE} bytes, found ${bytes.length}.`, 'header');
  }
  if (MAGIC.some((byte, index) => bytes[index] !== byte)) {
    refuse('does not start with the magic bytes of a vector file.', 'header');
  }
  const header = headerParser.parse(bytes);
  if (header.version !== FORMAT_VERSION || header.headerSize !== HEADER_SIZE) {
    refuse(`must have format version ${FORMAT_VERSION}, found ${header.version}.`, 'header');
  }
  if (header.fileLength !== bytes.length) {
    refuse(`must have ${header.fileLength} bytes by its header, found ${bytes.length}.`, 'header');
  }
  const { sectionCount } = header;
  const directoryEnd = HEADER_SIZE + sectionCount * DIRECTORY_ENTRY_SIZE;
  if (sectionCount < 2 || sectionCount > MOST_SECTIONS || directoryEnd > bytes.length) {
    refuse(`must have 2 to ${MOST_SECTIONS} sections, found ${sectionCount}.`, 'header');
  }
  const before = crc32(bytes.subarray(0, HEADER_CRC_OFFSET));
  if (crc32(bytes.subarray(HEADER_SIZE, directoryEnd), before) !== header.crc) {
    refuse('the CRC of header and directory does not match.', 'header');
  }
  if (header.reserved !== 0) refuse('the reserved bytes must be zero.', 'header');
  const directory = Array.from({ length: sectionCount }, (_, index) =>
    directoryEntryParser.parse(bytes.subarray(HEADER_SIZE + index * DIRECTORY_ENTRY_SIZE)),
  );
  checkDirectory(directory, directoryEnd, bytes.length, refuse);
  return directory;
}

function checkDirectory(
  directory: readonly DirectoryEntry[],
  start: number,
  fileLength: number,
  refuse: Refuse,
): void {
  let end = start;
  const seen = new Set<string>();
  for (const { tag, offset, recordSize, count } of directory) {
    const field = `section ${show(tag)}`;
    if (!/^[A-Z]{4}$/.test(tag) || seen.has(tag)) refuse('needs a tag of its own.', field);
    if (recordSize < 4 || recordSize > LARGEST_RECORD || recordSize % 4 !== 0) {
      refuse(`has records of ${recordSize} bytes.`, field);
    }
    if (offset !== end) refuse(`must start at byte ${end}, found ${offset}.`, field);
    seen.add(tag);
    end += recordSize * count + CRC_SIZE;
  }
  if (end !== fileLength) refuse(`the sections end at byte ${end} of ${fileLength}.`, 'header');
  const { tag, recordSize } = directory[0]!;
  if (tag !== COLUMN_TAG || recordSize !== COLUMN_RECORD_SIZE) {
    refuse(`the first section must be ${COLUMN_TAG}.`, 'header');
  }
}

function checkSectionCrcs(
  bytes: Uint8Array,
  directory: readonly DirectoryEntry[],
  damaged: (message: string, field: string) => void,
): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (const { tag, offset, recordSize, count } of directory) {
    const end = offset + recordSize * count;
    if (crc32(bytes.subarray(offset, end)) !== view.getUint32(end, true)) {
      damaged('the CRC does not match: the section is damaged.', `section ${tag}`);
    }
  }
}

const readColumnRecords = (bytes: Uint8Array, { offset, count }: DirectoryEntry): ColumnRecord[] =>
  Array.from({ length: count }, (_, index) =>
    columnParser.parse(bytes.subarray(offset + index * COLUMN_RECORD_SIZE)),
  );

function toColumn(record: ColumnRecord, section: DirectoryEntry, refuse: Refuse): ReadColumn {
  const { offset, storage, bits, signed, step, origin } = record;
  const name = record.name.replace(/\0+$/, '');
  const rounding = ROUNDING_IDS[record.rounding];
  const overflow = OVERFLOW_IDS[record.overflow];
  const fits =
    [1, 2, 4].includes(storage) &&
    offset % storage === 0 &&
    offset + storage <= section.recordSize &&
    bits >= 1 &&
    bits <= 8 * storage &&
    signed <= 1 &&
    record.reserved === 0 &&
    step > 0 &&
    step < Infinity &&
    Number.isFinite(origin);
  if (
    !fits ||
    rounding === undefined ||
    overflow === undefined ||
    name.length >= COLUMN_NAME_SIZE
  ) {
    return refuse(
      `column ${show(name)} is not one that fits its record.`,
      `section ${section.tag}`,
    );
  }
  const format: CodeFormat = {
    bits,
    signed: signed === 1,
    step,
    origin,
    ...codeRange(bits, signed === 1),
    rounding,
    overflow,
    label: `${signed === 1 ? 'signed' : 'unsigned'} ${bits} bits`,
  };
  const { quantity, group } = record;
  return { name, quantity: quantityOfId(quantity), group, format, offset, storage };
}

function toSection(
  bytes: Uint8Array,
  { tag, offset, recordSize, count }: DirectoryEntry,
  columns: readonly ReadColumn[],
  refuse: Refuse,
): ReadSection {
  refuseOverlap(columns, tag, refuse);
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

function refuseOverlap(columns: readonly ReadColumn[], tag: string, refuse: Refuse): void {
  const ordered = columns.toSorted((a, b) => a.offset - b.offset);
  ordered.slice(1).forEach((column, index) => {
    const before = ordered[index]!;
    if (before.offset + before.storage > column.offset) {
      refuse(`columns ${before.name} and ${column.name} overlap.`, `section ${tag}`);
    }
  });
}

const kindOf = (id: number): ProductKind | undefined =>
  (Object.keys(KIND_IDS) as ProductKind[]).find((kind) => KIND_IDS[kind] === id);

const show = (text: string): string => JSON.stringify(text);
