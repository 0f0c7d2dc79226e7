/** Header and directory of a vector file, and the CRCs of its sections. */
import { Parser } from 'binary-parser/dist/binary_parser.js';
import { crc32 } from '../numeric/crc32.js';
import {
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
} from './binary-layout.js';
import type { ProductKind } from './product.js';

/** Ends the reading with the reason, and the part at fault as field. */
export type Refuse = (message: string, field?: string) => never;

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

// The parser returns any; these are the shapes that it builds.
interface Header {
  readonly magic: readonly number[];
  readonly version: number;
  readonly headerSize: number;
  readonly kind: number;
  readonly sectionCount: number;
  readonly fileLength: number;
  readonly reserved: number;
  readonly crc: number;
}

export interface DirectoryEntry {
  readonly tag: string;
  readonly offset: number;
  readonly recordSize: number;
  readonly count: number;
}

export interface Head {
  readonly kind: ProductKind;
  /** The column table first. */
  readonly directory: readonly DirectoryEntry[];
}

/** Everything about header and directory that a reader must refuse is refused. */
export function readHead(bytes: Uint8Array, refuse: Refuse): Head {
  if (bytes.length < HEADER_SIZE) {
    refuse(`must have at least ${HEADER_SIZE} bytes, found ${bytes.length}.`, 'header');
  }
  if (MAGIC.some((byte, index) => bytes[index] !== byte)) {
    refuse('does not start with the magic bytes of a vector file.', 'header');
  }
  const header = headerParser.parse(bytes) as Header;
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
  const directory = Array.from({ length: sectionCount }, (_, index) => {
    const entry = bytes.subarray(HEADER_SIZE + index * DIRECTORY_ENTRY_SIZE);
    return directoryEntryParser.parse(entry) as DirectoryEntry;
  });
  checkDirectory(directory, directoryEnd, bytes.length, refuse);
  const kind = kindOf(header.kind);
  return kind === undefined
    ? refuse('the kind of file is unknown.', 'header')
    : { kind, directory };
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

/** Tells of every section whose CRC does not match. */
export function checkSectionCrcs(
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

const kindOf = (id: number): ProductKind | undefined =>
  (Object.keys(KIND_IDS) as ProductKind[]).find((kind) => KIND_IDS[kind] === id);

const show = (text: string): string => JSON.stringify(text);
