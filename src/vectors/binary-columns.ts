/** The column table of a vector file. */
import { Parser } from 'binary-parser/dist/binary_parser.js';
import { codeRange, type CodeFormat } from '../fixed/code-format.js';
import type { DirectoryEntry, Refuse } from './binary-head.js';
import {
  COLUMN_NAME_SIZE,
  COLUMN_RECORD_SIZE,
  OVERFLOW_IDS,
  ROUNDING_IDS,
} from './binary-layout.js';
import { quantityOfId, type QuantityName } from './quantity.js';

export interface ReadColumn {
  readonly name: string;
  readonly quantityId: number;
  /** Undefined for a quantity that this version does not know. */
  readonly quantity: QuantityName | undefined;
  readonly group: number;
  readonly format: CodeFormat;
  readonly offset: number;
  readonly storage: number;
}

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

// The parser returns any; this is the shape that it builds.
export interface ColumnRecord {
  readonly tag: string;
  readonly quantity: number;
  readonly group: number;
  readonly signed: number;
  readonly offset: number;
  readonly storage: number;
  readonly bits: number;
  readonly rounding: number;
  readonly overflow: number;
  readonly reserved: number;
  readonly step: number;
  readonly origin: number;
  readonly name: string;
}

const parseColumn = (bytes: Uint8Array): ColumnRecord => columnParser.parse(bytes) as ColumnRecord;

export const readColumnRecords = (
  bytes: Uint8Array,
  { offset, count }: DirectoryEntry,
): ColumnRecord[] =>
  Array.from({ length: count }, (_, index) =>
    parseColumn(bytes.subarray(offset + index * COLUMN_RECORD_SIZE)),
  );

/** What a record of the column table says, if it fits the records of its section. */
export function toColumn(
  record: ColumnRecord,
  section: DirectoryEntry,
  refuse: Refuse,
): ReadColumn {
  const { offset, storage, bits, signed, step, origin } = record;
  const name = withoutPadding(record.name);
  const padding = record.name.slice(name.length);
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
  if (!fits || rounding === undefined || overflow === undefined || !/^\0+$/.test(padding)) {
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
  return {
    ...{ name, group, format, offset, storage },
    quantityId: quantity,
    quantity: quantityOfId(quantity),
  };
}

/** No two columns of a section share a byte, or a quantity and group. */
export function refuseClashes(columns: readonly ReadColumn[], tag: string, refuse: Refuse): void {
  const ordered = columns.toSorted((a, b) => a.offset - b.offset);
  ordered.slice(1).forEach((column, index) => {
    const before = ordered[index]!;
    if (before.offset + before.storage > column.offset) {
      refuse(`columns ${before.name} and ${column.name} overlap.`, `section ${tag}`);
    }
  });
  columns.forEach((column, index) => {
    const twin = columns.findIndex(
      ({ quantityId, group }) => quantityId === column.quantityId && group === column.group,
    );
    if (twin !== index) {
      refuse(`columns ${columns[twin]!.name} and ${column.name} mean the same.`, `section ${tag}`);
    }
  });
}

const withoutPadding = (text: string): string => {
  const end = text.indexOf('\0');
  return end === -1 ? text : text.slice(0, end);
};

const show = (text: string): string => JSON.stringify(text);
