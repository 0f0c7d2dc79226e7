import { Fault, type Problem } from '../fault.js';
import type { ByteWriter } from './binary-sink.js';
import { physicalText } from './physical-text.js';
import type { Column, Product, Section } from './product.js';
import { QUANTITIES } from './quantity.js';
import type { Sink } from './sink.js';
import { TextWriter } from './text-writer.js';

/**
 * A C99 header and source: a structure and a constant array for each section, with the physical
 * values beside the codes. Plain data: nothing but <stdint.h> is needed to use it.
 *
 * Constants are written so that they have the same value where int has 16 bits: unsigned ones in
 * hexadecimal with a suffix, and the lowest negative numbers as differences.
 * @throws Fault `C_OBJECT_TOO_LARGE` before anything is written, if an array would pass the 65,535
 * bytes that C99 promises for one object (5.2.4.1).
 */
export function cSink(product: Product, writeHeader: ByteWriter, writeSource: ByteWriter): Sink {
  refuseLargeObjects(product);
  const prefix = cIdentifier(product.name);
  const header = new TextWriter(writeHeader);
  const source = new TextWriter(writeSource);
  header.write(headerText(product, prefix));
  source.write(`/* ${PROVENANCE} */\n#include "${product.name}.h"\n`);
  let entries: readonly ((code: number) => string)[] = [];
  let comments: readonly ((code: number) => string)[] = [];
  return {
    beginSection(section) {
      entries = section.columns.map(constantFor);
      comments = section.columns.map(commentFor);
      source.write(`\n${declaration(prefix, section)} = {\n`);
      if (section.count === 0) source.write('    { 0 },\n');
    },
    record(codes) {
      const fields = entries.map((entry, column) => entry(codes[column]!)).join(', ');
      const physical = comments.map((comment, column) => comment(codes[column]!)).join('  ');
      source.write(`    { ${fields} }, /* ${physical.trimEnd()} */\n`);
    },
    endSection() {
      source.write('};\n');
    },
    end() {
      header.flush();
      source.flush();
    },
  };
}

const PROVENANCE = 'Written by hillproof emit. Do not edit: change the suite and emit again.';
const LARGEST_OBJECT = 65_535;

/** Lower-case letters, digits and underscores. */
const cIdentifier = (name: string): string => name.toLowerCase().replace(/[^a-z0-9]/g, '_');

/** @throws Fault `C_OBJECT_TOO_LARGE`. */
export function refuseLargeObjects(product: Product): void {
  const problem = unfitForC(product);
  if (problem !== undefined) throw new Fault('input', problem);
}

/** Why a product cannot be written as C, if it cannot. */
export function unfitForC({ name, sections }: Product): Problem | undefined {
  const large = sections.find(({ recordSize, count }) => recordSize * count > LARGEST_OBJECT);
  if (large === undefined) return undefined;
  const { noun, recordSize, count } = large;
  return {
    code: 'C_OBJECT_TOO_LARGE',
    message:
      `the ${count} ${noun}s of ${name} would be a C array of ${recordSize * count} bytes; ` +
      `C99 promises ${LARGEST_OBJECT} for one object, which is ` +
      `${Math.floor(LARGEST_OBJECT / recordSize)} ${noun}s.`,
    hint: 'Leave c out of the outputs here, or ask for fewer records.',
  };
}

function headerText(product: Product, prefix: string): string {
  const guard = `${prefix.toUpperCase()}_H`;
  const sections = product.sections.map((section) => sectionText(prefix, section)).join('\n');
  return (
    `/* ${PROVENANCE}\n *\n` +
    ` * physical value = origin + code * step, with the figures beside each field. */\n` +
    `#ifndef ${guard}\n#define ${guard}\n\n#include <stdint.h>\n\n${sections}\n#endif\n`
  );
}

function sectionText(prefix: string, section: Section): string {
  const macro = `${prefix}_${section.noun}_count`.toUpperCase();
  return (
    `struct ${prefix}_${section.noun} {\n${fieldLines(section)}};\n\n` +
    `#define ${macro} ${section.count}${section.count > 32_767 ? 'UL' : 'u'}\n` +
    `extern ${declaration(prefix, section)};\n`
  );
}

function fieldLines({ columns }: Section): string {
  const declared = columns.map((column) => `${cType(column)} ${column.name};`);
  const width = Math.max(...declared.map((text) => text.length));
  return columns
    .map((column, index) => `    ${declared[index]!.padEnd(width)} /* ${meaning(column)} */\n`)
    .join('');
}

function meaning({ quantity, quantizer }: Column): string {
  const { unit } = QUANTITIES[quantity];
  if (unit === '') return 'plain number';
  const { label, origin, step } = quantizer.format;
  return `${label}: ${unit} = ${origin === 0 ? '' : `${origin} + `}code * ${step}`;
}

// An empty array does not exist in C: one element of zeros stands for none.
const declaration = (prefix: string, { noun, count }: Section): string =>
  `const struct ${prefix}_${noun} ${prefix}_${noun}s[${Math.max(count, 1)}]`;

const cType = ({ storage, quantizer }: Column): string =>
  `${quantizer.format.signed ? 'int' : 'uint'}${storage * 8}_t`;

function constantFor({ storage, quantizer }: Column): (code: number) => string {
  const { signed, bits, minCode } = quantizer.format;
  const suffix = storage === 4 ? 'UL' : 'u';
  if (!signed) {
    const digits = storage * 2;
    return (code) => `0x${code.toString(16).toUpperCase().padStart(digits, '0')}${suffix}`;
  }
  const long = storage === 4 ? 'L' : '';
  const width = String(minCode).length + long.length;
  const lowest = bits === 32 ? -2_147_483_648 : bits === 16 ? -32_768 : NaN;
  return (code) =>
    code === lowest ? `(${code + 1}${long} - 1)` : `${code}${long}`.padStart(width);
}

function commentFor(column: Column): (code: number) => string {
  const { unit } = QUANTITIES[column.quantity];
  if (unit === '') return () => '';
  const physical = physicalText(column.quantizer.format);
  return (code) => `${physical(code)} ${unit}`;
}
