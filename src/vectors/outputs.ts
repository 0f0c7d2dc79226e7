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
}

// A product of one table needs one file; of several, one for each.
const csvName = ({ name, sections }: Product, { noun }: Section): string =>
  sections.length === 1 ? `${name}.csv` : `${name}-${noun}s.csv`;
