import type { Problem } from '../fault.js';
import type { Quantizer } from '../fixed/quantizer.js';
import type { ReadColumn, ReadSection, VectorFile } from './binary-reader.js';
import type { Column, Product, Section } from './product.js';

/** Tells of a record at fault. */
export type Complain = (section: string, record: number | undefined, message: string) => void;

/** How many codes were compared with the model, and how many of them are wrong. */
export interface Comparison {
  readonly compared: number;
  readonly wrong: number;
}

/**
 * Holds every code of a vector file against the model: within half a step of the model's value
 * (one step for directed rounding), or at the end of the range for what lies beyond it.
 */
export function compareWithModel(
  file: VectorFile,
  product: Product,
  complain: Complain,
  progress?: (done: number, total: number) => void,
): Comparison {
  let compared = 0;
  let wrong = 0;
  const total = product.sections.reduce((sum, { count }) => sum + count, 0);
  for (const section of product.sections) {
    const read = file.sections.find(({ tag }) => tag === section.tag);
    if (read?.count !== section.count) {
      complain(
        section.tag,
        undefined,
        `must have ${section.count} records, found ${read?.count ?? 0}.`,
      );
      continue;
    }
    const columns = matchColumns(section, read, complain);
    if (columns === undefined) continue;
    const values = new Float64Array(section.columns.length);
    for (let record = 0; record < section.count; record++) {
      section.values(record, values);
      for (let index = 0; index < columns.length; index++) {
        const column = section.columns[index]!;
        const code = read.code(columns[index]!, record);
        const complaint = codeComplaint(column, code, values[index]!);
        compared++;
        if (complaint === undefined) continue;
        wrong++;
        complain(section.tag, record, complaint);
      }
      if (record % RECORDS_PER_REPORT === 0) progress?.(record, total);
    }
  }
  return { compared, wrong };
}

const RECORDS_PER_REPORT = 16_384;

function matchColumns(
  section: Section,
  read: ReadSection,
  complain: Complain,
): readonly ReadColumn[] | undefined {
  const matched = section.columns.map((column) => {
    const { bits, signed, step, origin } = column.quantizer.format;
    return read.columns.find(
      ({ name, quantity, group, format, offset, storage }) =>
        name === column.name &&
        quantity === column.quantity &&
        group === column.group &&
        offset === column.offset &&
        storage === column.storage &&
        format.bits === bits &&
        format.signed === signed &&
        format.step === step &&
        format.origin === origin,
    );
  });
  const missing = matched.indexOf(undefined);
  if (missing === -1) return matched as ReadColumn[];
  const { name } = section.columns[missing]!;
  complain(section.tag, undefined, `has no column ${name} of the format that the suite asks for.`);
  return undefined;
}

function codeComplaint(
  { name, quantizer }: Column,
  code: number,
  value: number,
): string | undefined {
  const { minCode, maxCode, step } = quantizer.format;
  const expected = expectedEnd(quantizer, value);
  if (expected !== undefined) {
    return code === expected
      ? undefined
      : `${name}: the model's ${value} is beyond the format, so the code must be ${expected}, found ${code}.`;
  }
  const decoded = quantizer.decode(code);
  const error = Math.abs(decoded - value);
  // The arithmetic of the comparison itself: a few ulp of the values compared.
  const slack = 1e-15 * Math.max(Math.abs(value), Math.abs(decoded)) * 4;
  if (code >= minCode && code <= maxCode && error <= quantizer.errorBound + slack) return undefined;
  const steps = (error / step).toPrecision(4);
  return `${name}: code ${code} stands for ${decoded}, the model says ${value}: off by ${steps} steps.`;
}

/** The code at the end of the range, for values beyond it by half a step or more. */
function expectedEnd(quantizer: Quantizer, value: number): number | undefined {
  const { minCode, maxCode } = quantizer.format;
  if (value < quantizer.lowest - quantizer.errorBound) return minCode;
  if (value > quantizer.highest + quantizer.errorBound) return maxCode;
  return undefined;
}

/** A Problem of a vector file, with section and record as its field. */
export const recordProblem = (
  file: string,
  section: string,
  record: number | undefined,
  message: string,
): Problem => ({
  code: 'RECORD',
  file,
  field: record === undefined ? `section ${section}` : `section ${section}, record ${record}`,
  message,
});
