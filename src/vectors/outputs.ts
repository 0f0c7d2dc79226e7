import { Fault } from '../fault.js';
import { extents, LARGEST_FILE } from './binary-layout.js';
import { binarySink, type ByteWriter } from './binary-sink.js';
import { cSink, refuseLargeObjects } from './c-sink.js';
import { csvSink } from './csv-sink.js';
import { jsonSink } from './json-sink.js';
import type { Product, Section } from './product.js';
import type { Sink } from './sink.js';
import type { OutputForm } from './suite-definition.js';

/** Opens a file of an output form for writing. */
export type OpenFile = (path: string, form: OutputForm) => ByteWriter;

/** The sinks that write a product in the forms asked for. */
export function sinksFor(product: Product, forms: readonly OutputForm[], open: OpenFile): Sink[] {
  const { name } = product;
  const makers: Readonly<Record<OutputForm, () => Sink>> = {
    binary: () => binarySink(product, open(`${name}.hpv`, 'binary')),
    c: () => cSink(product, open(`${name}.h`, 'c'), open(`${name}.c`, 'c')),
    csv: () => csvSink((section) => open(csvName(product, section), 'csv')),
    json: () => jsonSink(product, open(`${name}.json`, 'json')),
  };
  return [...new Set(forms)].map((form) => makers[form]());
}

/** Refuses what a form cannot hold, before anything is written. @throws Fault. */
export function refuseUnfit(product: Product, forms: readonly OutputForm[]): void {
  if (forms.includes('c')) refuseLargeObjects(product);
  if (forms.includes('binary')) refuseLargeFile(product);
  for (const section of product.sections) refuseLongTime(section);
}

function refuseLargeFile({ name, sections }: Product): void {
  const columns = sections.reduce((sum, section) => sum + section.columns.length, 0);
  const { length } = extents(columns, sections);
  if (length <= LARGEST_FILE) return;
  throw new Fault('input', {
    code: 'FILE_TOO_LARGE',
    message: `${name} would take ${length} bytes; a vector file holds 4 GiB.`,
    hint: 'Lengthen the sampling period, or split the weather.',
  });
}

// The last record has the latest time: that one tells whether all of them fit.
function refuseLongTime(section: Section): void {
  const column = section.columns.findIndex(({ quantity }) => quantity === 'time');
  if (column === -1 || section.count === 0) return;
  const values = new Float64Array(section.columns.length);
  section.values(section.count - 1, values);
  const { highest, format } = section.columns[column]!.quantizer;
  if (values[column]! <= highest) return;
  throw new Fault('input', {
    code: 'VALUE_OUT_OF_RANGE',
    message: `the last time is ${values[column]!} s, and ${format.label} ends at ${highest} s.`,
    hint: `Give formats.time a longer step, such as { step: ${format.step * 10}, bits: 32 }.`,
  });
}

// A product of one table needs one file; of several, one for each.
const csvName = ({ name, sections }: Product, { noun }: Section): string =>
  sections.length === 1 ? `${name}.csv` : `${name}-${noun}s.csv`;
