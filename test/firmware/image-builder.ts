/**
 * Builds vector files from arrays, field by field after vectors/FORMAT.md. It shares nothing with
 * the writer of the project: it is a second reading of the format, for the tests of its readers.
 */
import { crc32 } from 'node:zlib';

export interface Channel {
  readonly tag: string;
  readonly quantity: number;
  readonly group?: number;
  readonly signed?: boolean;
  readonly offset: number;
  readonly storage: 1 | 2 | 4;
  readonly width?: number;
  readonly rounding?: number;
  readonly overflow?: number;
  readonly step?: number;
  readonly origin?: number;
  readonly name?: string;
}

export interface Section {
  readonly tag: string;
  readonly recordSize: number;
  readonly records: number;
  readonly bytes: Uint8Array;
}

/** A file of any kind: the sections given, after the CHAN section made from the channels. */
export function buildFile(
  kind: number,
  channels: readonly Channel[],
  tables: readonly Section[],
): Uint8Array {
  const sections = [channelSection(channels), ...tables];
  const dataStart = 32 + 16 * sections.length;
  const length = sections.reduce((sum, section) => sum + section.bytes.length + 4, dataStart);
  const file = Buffer.alloc(length);
  file.set([0x48, 0x50, 0x56, 0xb7, 0x0d, 0x0a, 0x1a, 0x00]);
  file.writeUInt16LE(1, 8);
  file.writeUInt16LE(32, 10);
  file.writeUInt32LE(kind, 12);
  file.writeUInt32LE(sections.length, 16);
  file.writeUInt32LE(length, 20);
  let offset = dataStart;
  sections.forEach((section, k) => {
    const entry = 32 + 16 * k;
    file.write(section.tag, entry, 4, 'latin1');
    file.writeUInt32LE(offset, entry + 4);
    file.writeUInt32LE(section.recordSize, entry + 8);
    file.writeUInt32LE(section.records, entry + 12);
    file.set(section.bytes, offset);
    offset += section.bytes.length + 4;
  });
  return seal(file);
}

/**
 * A copy in which every CRC matches again, as far as the directory says where one belongs: for
 * damage that is to get past the CRCs.
 */
export function seal(damaged: Uint8Array): Uint8Array {
  const file = Buffer.from(damaged);
  if (file.length < 32) return file;
  const sections = Math.min(file.readUInt32LE(16), Math.floor((file.length - 32) / 16));
  for (let k = 0; k < sections; k++) {
    const entry = 32 + 16 * k;
    const start = file.readUInt32LE(entry + 4);
    const end = start + file.readUInt32LE(entry + 8) * file.readUInt32LE(entry + 12);
    if (start >= 32 && end + 4 <= file.length)
      file.writeUInt32LE(crc32(file.subarray(start, end)), end);
  }
  const directory = file.subarray(32, 32 + 16 * sections);
  file.writeUInt32LE(crc32(directory, crc32(file.subarray(0, 28))), 28);
  return file;
}

export interface ColumnLayout {
  readonly storage: 1 | 2 | 4;
  readonly signed: boolean;
}

export interface CurveCodes {
  readonly voltage: ArrayLike<number>;
  readonly current: ArrayLike<number>;
  /** Points of the curve that are peaks, and which of these is the global one. */
  readonly peaks?: readonly number[];
  readonly globalPeak?: number;
}

/** A file of kind 1, with one irradiance and cell temperature for each curve. */
export function buildCurveSet(
  curves: readonly CurveCodes[],
  voltage: ColumnLayout,
  current: ColumnLayout,
): Uint8Array {
  const points = curves.flatMap(({ voltage: v, current: i }) =>
    Array.from(v, (code, k) => [code, i[k]!]),
  );
  const peaks = curves.flatMap(({ voltage: v, current: i, peaks: at = [] }) =>
    at.map((k) => [v[k]!, i[k]!, Math.max(0, v[k]! * i[k]!) % 0x1_0000_0000]),
  );
  const tables = [
    table('CURV', curveRows(curves), [
      { quantity: 2, storage: 2, signed: false, step: 0.1, name: 'irradiance' },
      { quantity: 3, storage: 2, signed: true, step: 0.1, name: 'temperature' },
      { quantity: 7, ...current, name: 'isc' },
      { quantity: 8, ...voltage, name: 'voc' },
      { quantity: 16, ...INDEX, name: 'first_point' },
      { quantity: 17, ...INDEX, name: 'points' },
      { quantity: 18, ...INDEX, name: 'first_peak' },
      { quantity: 19, ...INDEX, name: 'peaks' },
      { quantity: 20, ...INDEX, name: 'global_peak' },
    ]),
    table('POIN', points, [
      { quantity: 4, ...voltage, step: 0.0125, origin: -0.25, name: 'voltage' },
      { quantity: 5, ...current, step: 0.0025, name: 'current' },
    ]),
    table('PEAK', peaks, [
      { quantity: 9, ...voltage, name: 'peak_voltage' },
      { quantity: 10, ...current, name: 'peak_current' },
      { quantity: 11, ...INDEX, name: 'peak_power' },
    ]),
  ];
  return buildFile(
    1,
    tables.flatMap(({ channels }) => channels),
    tables.map(({ section }) => section),
  );
}

const INDEX = { storage: 4, signed: false } as const;

function curveRows(curves: readonly CurveCodes[]): number[][] {
  let firstPoint = 0;
  let firstPeak = 0;
  return curves.map(({ voltage, current, peaks = [], globalPeak = 0 }, k) => {
    const spans = [firstPoint, voltage.length, firstPeak, peaks.length];
    const ends = [current[0] ?? 0, voltage[voltage.length - 1] ?? 0];
    const row = [10_000 - k, 250 - 400 * (k % 2), ...ends, ...spans, firstPeak + globalPeak];
    firstPoint += voltage.length;
    firstPeak += peaks.length;
    return row;
  });
}

type ColumnOf = Omit<Channel, 'tag' | 'offset'>;

/** Lays columns out one after the other, each at a multiple of its storage. */
export function table(
  tag: string,
  rows: readonly (readonly number[])[],
  columns: readonly ColumnOf[],
): { channels: Channel[]; section: Section } {
  let end = 0;
  const channels = columns.map((column) => {
    const offset = Math.ceil(end / column.storage) * column.storage;
    end = offset + column.storage;
    return { ...column, tag, offset };
  });
  const recordSize = Math.ceil(end / 4) * 4;
  const bytes = Buffer.alloc(recordSize * rows.length);
  rows.forEach((row, r) => {
    channels.forEach(({ offset, storage }, c) => {
      writeCode(bytes, r * recordSize + offset, storage, row[c]!);
    });
  });
  return { channels, section: { tag, recordSize, records: rows.length, bytes } };
}

function writeCode(bytes: Buffer, at: number, storage: number, code: number): void {
  for (let k = 0; k < storage; k++) bytes[at + k] = (code >> (8 * k)) & 0xff;
}

function channelSection(channels: readonly Channel[]): Section {
  const bytes = Buffer.alloc(48 * channels.length);
  channels.forEach((channel, k) => {
    const at = 48 * k;
    bytes.write(channel.tag, at, 4, 'latin1');
    bytes.writeUInt16LE(channel.quantity, at + 4);
    bytes[at + 6] = channel.group ?? 0;
    bytes[at + 7] = channel.signed === true ? 1 : 0;
    bytes.writeUInt16LE(channel.offset, at + 8);
    bytes[at + 10] = channel.storage;
    bytes[at + 11] = channel.width ?? 8 * channel.storage;
    bytes[at + 12] = channel.rounding ?? 0;
    bytes[at + 13] = channel.overflow ?? 0;
    bytes.writeDoubleLE(channel.step ?? 1, at + 16);
    bytes.writeDoubleLE(channel.origin ?? 0, at + 24);
    bytes.write(channel.name ?? '', at + 32, 15, 'latin1');
  });
  return { tag: 'CHAN', recordSize: 48, records: channels.length, bytes };
}
