import { crc32 } from '../numeric/crc32.js';
import {
  COLUMN_NAME_SIZE,
  COLUMN_RECORD_SIZE,
  DIRECTORY_ENTRY_SIZE,
  extents,
  FORMAT_VERSION,
  HEADER_CRC_OFFSET,
  HEADER_SIZE,
  KIND_IDS,
  MAGIC,
  OVERFLOW_IDS,
  ROUNDING_IDS,
  type SectionExtent,
} from './binary-layout.js';
import type { Column, Product, Section } from './product.js';
import { QUANTITIES } from './quantity.js';
import type { Sink } from './sink.js';

export type ByteWriter = (chunk: Uint8Array) => void;

/**
 * Writes a vector file in one pass and constant memory, as `vectors/FORMAT.md` describes it.
 * The product must be one that `refuseUnfit` lets pass.
 */
export function binarySink(product: Product, write: ByteWriter): Sink {
  const head = headBytes(product);
  let buffer = new ByteBuffer(write);
  write(head);
  let setters: readonly Setter[] = [];
  let recordSize = 0;
  return {
    beginSection(section) {
      setters = section.columns.map(setterFor);
      recordSize = section.recordSize;
      buffer = new ByteBuffer(write);
    },
    record(codes) {
      const at = buffer.reserve(recordSize);
      for (let column = 0; column < setters.length; column++) {
        setters[column]!(buffer.view, at, codes[column]!);
      }
    },
    endSection() {
      write(littleEndian(buffer.finish()));
    },
    end: () => undefined,
  };
}

type Setter = (view: DataView, at: number, code: number) => void;

function setterFor({ offset, storage }: Column): Setter {
  // The setters of DataView take any integer modulo their width: two's complement by itself.
  switch (storage) {
    case 1:
      return (view, at, code) => {
        view.setUint8(at + offset, code);
      };
    case 2:
      return (view, at, code) => {
        view.setUint16(at + offset, code, true);
      };
    case 4:
      return (view, at, code) => {
        view.setUint32(at + offset, code, true);
      };
  }
}

/** Collects records, passes them on in large pieces, and keeps the CRC of what passed. */
class ByteBuffer {
  readonly #bytes = new Uint8Array(PIECE);
  readonly view = new DataView(this.#bytes.buffer);
  readonly #write: ByteWriter;
  #used = 0;
  #crc = 0;

  constructor(write: ByteWriter) {
    this.#write = write;
  }

  /** Offset in `view` of `size` zeroed bytes. */
  reserve(size: number): number {
    if (this.#used + size > PIECE) this.#pass();
    const at = this.#used;
    this.#used += size;
    return at;
  }

  finish(): number {
    this.#pass();
    return this.#crc;
  }

  #pass(): void {
    const piece = this.#bytes.subarray(0, this.#used);
    this.#crc = crc32(piece, this.#crc);
    this.#write(piece);
    piece.fill(0);
    this.#used = 0;
  }
}

const PIECE = 65_536;

/** Header, directory and column table with its CRC. */
function headBytes(product: Product): Uint8Array {
  const columns = product.sections.flatMap((section) =>
    section.columns.map((column) => ({ section, column })),
  );
  const { extents: places, length } = extents(columns.length, product.sections);
  const head = new Uint8Array(places[1]!.offset);
  const view = new DataView(head.buffer);
  head.set(MAGIC);
  view.setUint16(8, FORMAT_VERSION, true);
  view.setUint16(10, HEADER_SIZE, true);
  view.setUint32(12, KIND_IDS[product.kind], true);
  view.setUint32(16, places.length, true);
  view.setUint32(20, length, true);
  places.forEach((place, index) => {
    setDirectoryEntry(view, HEADER_SIZE + index * DIRECTORY_ENTRY_SIZE, place);
  });
  const tableAt = places[0]!.offset;
  const directory = head.subarray(HEADER_SIZE, tableAt);
  view.setUint32(
    HEADER_CRC_OFFSET,
    crc32(directory, crc32(head.subarray(0, HEADER_CRC_OFFSET))),
    true,
  );
  columns.forEach(({ section, column }, index) => {
    setColumnRecord(view, tableAt + index * COLUMN_RECORD_SIZE, section, column);
  });
  const tableEnd = tableAt + columns.length * COLUMN_RECORD_SIZE;
  view.setUint32(tableEnd, crc32(head.subarray(tableAt, tableEnd)), true);
  return head;
}

function setDirectoryEntry(view: DataView, at: number, place: SectionExtent): void {
  setAscii(view, at, place.tag);
  view.setUint32(at + 4, place.offset, true);
  view.setUint32(at + 8, place.recordSize, true);
  view.setUint32(at + 12, place.count, true);
}

function setColumnRecord(view: DataView, at: number, section: Section, column: Column): void {
  const { format } = column.quantizer;
  setAscii(view, at, section.tag);
  view.setUint16(at + 4, QUANTITIES[column.quantity].id, true);
  view.setUint8(at + 6, column.group);
  view.setUint8(at + 7, format.signed ? 1 : 0);
  view.setUint16(at + 8, column.offset, true);
  view.setUint8(at + 10, column.storage);
  view.setUint8(at + 11, format.bits);
  view.setUint8(at + 12, ROUNDING_IDS.indexOf(format.rounding));
  view.setUint8(at + 13, OVERFLOW_IDS.indexOf(format.overflow));
  view.setFloat64(at + 16, format.step, true);
  view.setFloat64(at + 24, format.origin, true);
  setAscii(view, at + 32, column.name.slice(0, COLUMN_NAME_SIZE - 1));
}

function setAscii(view: DataView, at: number, text: string): void {
  for (let index = 0; index < text.length; index++) {
    view.setUint8(at + index, text.charCodeAt(index));
  }
}

function littleEndian(word: number): Uint8Array {
  const bytes = new Uint8Array(4);
  new DataView(bytes.buffer).setUint32(0, word, true);
  return bytes;
}
