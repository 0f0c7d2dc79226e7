import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { crc32 } from '../../src/numeric/crc32.js';
import { binarySink } from '../../src/vectors/binary-sink.js';
import { readVectorFile } from '../../src/vectors/binary-reader.js';
import type { Product } from '../../src/vectors/product.js';
import { pour } from '../../src/vectors/sink.js';
import { anyProduct } from './any-product.js';

export function bytesOf(product: Product): Buffer {
  const chunks: Buffer[] = [];
  pour(product, [binarySink(product, (chunk) => chunks.push(Buffer.from(chunk)))]);
  return Buffer.concat(chunks);
}

function example(): { bytes: Buffer; product: Product } {
  const samples = fc.sample(anyProduct, { seed: 7, numRuns: 20 });
  const { product } = samples.find(({ codes }) => codes.length > 3)!;
  return { product, bytes: bytesOf(product) };
}

describe('a vector file', () => {
  test('gives back every code of every table that was written to it', () => {
    fc.assert(
      fc.property(anyProduct, ({ product, codes }) => {
        const { kind, sections } = readVectorFile(bytesOf(product), 'any.hpv');
        expect(kind).toBe('timeline');
        const [section] = sections;
        const read = codes.map((_, record) =>
          section!.columns.map((column) => section!.code(column, record)),
        );
        expect(read).toEqual(codes);
      }),
      { seed: 1, numRuns: 300 },
    );
  });

  test('gives back what each column means', () => {
    fc.assert(
      fc.property(anyProduct, ({ product }) => {
        const [section] = readVectorFile(bytesOf(product), 'any.hpv').sections;
        product.sections[0]!.columns.forEach((column, index) => {
          const { step, origin, bits, signed, minCode, maxCode } = column.quantizer.format;
          expect(section!.columns[index]).toMatchObject({
            ...{ name: column.name, quantity: column.quantity, group: column.group },
            format: { step, origin, bits, signed, minCode, maxCode },
          });
        });
      }),
      { seed: 2, numRuns: 100 },
    );
  });

  test('has header fields, offsets and CRCs where the format description puts them', () => {
    const { bytes, product } = example();
    const [section] = product.sections;
    const columns = section!.columns.length;
    expect(bytes.subarray(0, 8).toString('hex')).toBe('485056b70d0a1a00');
    expect([bytes.readUInt16LE(8), bytes.readUInt16LE(10)]).toEqual([1, 32]);
    expect([bytes.readUInt32LE(12), bytes.readUInt32LE(16)]).toEqual([2, 2]);
    expect(bytes.readUInt32LE(20)).toBe(bytes.length);
    const directory = bytes.subarray(32, 64);
    expect(bytes.readUInt32LE(28)).toBe(crc32(Buffer.concat([bytes.subarray(0, 28), directory])));
    expect(directory.subarray(0, 4).toString()).toBe('CHAN');
    expect([4, 8, 12].map((at) => directory.readUInt32LE(at))).toEqual([64, 48, columns]);
    const second = 64 + 48 * columns + 4;
    expect(directory.subarray(16, 20).toString()).toBe('SAMP');
    expect([20, 24, 28].map((at) => directory.readUInt32LE(at))).toEqual([
      second,
      section!.recordSize,
      section!.count,
    ]);
    const end = second + section!.recordSize * section!.count;
    expect(bytes.readUInt32LE(end)).toBe(crc32(bytes.subarray(second, end)));
    expect(bytes.length).toBe(end + 4);
    expect([bytes[64 + 10], bytes.readDoubleLE(64 + 16)]).toEqual([
      section!.columns[0]!.storage,
      section!.columns[0]!.quantizer.format.step,
    ]);
  });

  test('is refused at every shorter length, and with a byte too many', () => {
    const { bytes } = example();
    for (let length = 0; length < bytes.length; length++) {
      expect(() => readVectorFile(bytes.subarray(0, length), 'cut.hpv'), `${length}`).toThrow();
    }
    expect(() => readVectorFile(Buffer.concat([bytes, Buffer.alloc(1)]), 'long.hpv')).toThrow(
      /must have \d+ bytes by its header/,
    );
  });

  test('is refused after any change of a byte, with the part that is damaged', () => {
    const { bytes } = example();
    const changed = Buffer.from(bytes);
    for (let at = 0; at < bytes.length; at++) {
      changed[at] = bytes[at]! ^ 0x10;
      expect(() => readVectorFile(changed, 'bad.hpv'), `byte ${at}`).toThrow(
        /^bad\.hpv: (header|section [A-Z]{4}): /,
      );
      changed[at] = bytes[at]!;
    }
  });

  test('with hostile sizes is refused without reading outside it, though all CRCs agree', () => {
    const { bytes } = example();
    for (const [at, name] of [
      [36, 'offset'],
      [40, 'record size'],
      [44, 'count'],
      [56, 'record size'],
      [60, 'count'],
      [16, 'sections'],
    ] as const) {
      for (const value of [0, 1, 3, 5, 0x7fffffff, 0xffffffff, 0xfffffffc]) {
        const hostile = Buffer.from(bytes);
        if (hostile.readUInt32LE(at) === value) continue;
        hostile.writeUInt32LE(value, at);
        const head = crc32(hostile.subarray(32, 64), crc32(hostile.subarray(0, 28)));
        hostile.writeUInt32LE(head, 28);
        expect(() => readVectorFile(hostile, 'hostile.hpv'), `${name} ${value}`).toThrow(
          /^hostile\.hpv: /,
        );
      }
    }
  });
});
