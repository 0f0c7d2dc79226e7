/** The constants of the vector file. `vectors/FORMAT.md` says what each byte means. */
import { ROUNDINGS } from '../fixed/rounding.js';
import { OVERFLOWS } from '../fixed/code-format.js';
import type { ProductKind } from './product.js';

export const MAGIC = Uint8Array.of(0x48, 0x50, 0x56, 0xb7, 0x0d, 0x0a, 0x1a, 0x00);
export const FORMAT_VERSION = 1;
export const HEADER_SIZE = 32;
export const DIRECTORY_ENTRY_SIZE = 16;
export const COLUMN_RECORD_SIZE = 48;
export const COLUMN_NAME_SIZE = 16;
export const CRC_SIZE = 4;
/** Offset of the CRC over the header before it and the directory. */
export const HEADER_CRC_OFFSET = 28;
export const COLUMN_TAG = 'CHAN';
export const LARGEST_FILE = 0xffff_ffff;
export const MOST_SECTIONS = 16;
export const LARGEST_RECORD = 1024;

export const KIND_IDS: Readonly<Record<ProductKind, number>> = { 'curve-set': 1, timeline: 2 };
/** The order is part of the format. */
export const ROUNDING_IDS = ROUNDINGS;
export const OVERFLOW_IDS = OVERFLOWS;

export interface SectionExtent {
  readonly tag: string;
  readonly offset: number;
  readonly recordSize: number;
  readonly count: number;
}

/** Where each section lies, the column table first, and how long the file is. */
export function extents(
  columnCount: number,
  sections: readonly {
    readonly tag: string;
    readonly recordSize: number;
    readonly count: number;
  }[],
): { readonly extents: readonly SectionExtent[]; readonly length: number } {
  const all = [
    { tag: COLUMN_TAG, recordSize: COLUMN_RECORD_SIZE, count: columnCount },
    ...sections,
  ];
  let offset = HEADER_SIZE + DIRECTORY_ENTRY_SIZE * all.length;
  const placed = all.map(({ tag, recordSize, count }) => {
    const extent = { tag, offset, recordSize, count };
    offset += recordSize * count + CRC_SIZE;
    return extent;
  });
  return { extents: placed, length: offset };
}
