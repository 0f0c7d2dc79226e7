import { Fault } from '../fault.js';
import type { Product, Section } from './product.js';

/**
 * One output form of a product being written. A product goes through all its sinks in one pass:
 * each record is computed and encoded once and handed to every sink.
 */
export interface Sink {
  beginSection(section: Section): void;
  /** The codes of the next record; the array is reused. */
  record(codes: Float64Array): void;
  endSection(section: Section): void;
  end(): void;
}

export type Progress = (done: number, total: number) => void;

/**
 * Encodes a product and sends it to its sinks.
 * @throws Fault of a format that refuses, naming record and column; whatever a sink throws.
 */
export function pour(product: Product, sinks: readonly Sink[], progress?: Progress): void {
  const total = product.sections.reduce((sum, section) => sum + section.count, 0);
  let done = 0;
  for (const section of product.sections) {
    for (const sink of sinks) sink.beginSection(section);
    const encode = recordEncoder(section);
    for (let index = 0; index < section.count; index++) {
      const codes = encode(index);
      for (const sink of sinks) sink.record(codes);
      if (++done % RECORDS_PER_REPORT === 0) progress?.(done, total);
    }
    for (const sink of sinks) sink.endSection(section);
  }
  for (const sink of sinks) sink.end();
  progress?.(total, total);
}

const RECORDS_PER_REPORT = 16_384;

/** Computes and encodes records of a section; the array it returns is reused. */
function recordEncoder(section: Section): (index: number) => Float64Array {
  const { columns } = section;
  const values = new Float64Array(columns.length);
  const codes = new Float64Array(columns.length);
  let column = 0;
  return (index) => {
    section.values(index, values);
    try {
      for (column = 0; column < columns.length; column++) {
        codes[column] = columns[column]!.quantizer.encode(values[column]!);
      }
    } catch (error) {
      throw named(error, `${section.noun} ${index}, ${columns[column]!.name}`);
    }
    return codes;
  };
}

// A quantizer knows the value it refuses, but not what it is of.
function named(error: unknown, what: string): unknown {
  if (!(error instanceof Fault)) return error;
  const problems = error.problems.map((problem) => ({
    ...problem,
    message: `${what}: ${problem.message}`,
  }));
  return new Fault(error.kind, problems, { cause: error });
}
