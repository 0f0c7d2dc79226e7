/**
 * A product is a few integer tables; every output form is a way of writing the same tables. The
 * builders (curve set, timeline) know physics and no file; the writers know files and no physics.
 */
import { storageBits, type CodeFormat } from '../fixed/code-format.js';
import { Quantizer } from '../fixed/quantizer.js';
import type { QuantityName } from './quantity.js';

export type ProductKind = 'curve-set' | 'timeline';

export interface Product {
  /** File name without ending; also the prefix of names in C. */
  readonly name: string;
  readonly kind: ProductKind;
  readonly sections: readonly Section[];
}

/** One table of fixed-size records. */
export interface Section {
  /** Four capitals, as in the file format. */
  readonly tag: string;
  /** Singular noun for one record, lower case: `curve`, `point`, `peak`, `sample`. */
  readonly noun: string;
  readonly columns: readonly Column[];
  readonly recordSize: number;
  readonly count: number;
  /**
   * Writes what the model says for record `index`, as physical values in the order of the columns.
   * Writers encode them and nobody else does. Allocates nothing that grows with the index.
   */
  values(index: number, into: Float64Array): void;
}

export interface Column {
  /** Lower case with underscores; unique in its section; at most 15 characters. */
  readonly name: string;
  readonly quantity: QuantityName;
  /** Shading group, from 0; 0 also for what belongs to the whole source. */
  readonly group: number;
  readonly quantizer: Quantizer;
  /** Place in the record, bytes. */
  readonly offset: number;
  /** Size in the record, bytes. */
  readonly storage: 1 | 2 | 4;
}

export interface ColumnWish {
  readonly name: string;
  readonly quantity: QuantityName;
  readonly group?: number;
  readonly format: CodeFormat;
}

/**
 * Places columns in a record in the given order, each at a multiple of its own size; the record is
 * filled up to a multiple of 4 bytes.
 */
export function layOut(wishes: readonly ColumnWish[]): {
  readonly columns: readonly Column[];
  readonly recordSize: number;
} {
  let end = 0;
  const columns = wishes.map(({ name, quantity, group = 0, format }) => {
    const storage = (storageBits(format.bits) / 8) as Column['storage'];
    const offset = Math.ceil(end / storage) * storage;
    end = offset + storage;
    return { name, quantity, group, quantizer: new Quantizer(format), offset, storage };
  });
  return { columns, recordSize: Math.ceil(end / 4) * 4 };
}

/** The format of counts and indexes: plain 32-bit whole numbers. */
export const INDEX_FORMAT: CodeFormat = {
  bits: 32,
  signed: false,
  step: 1,
  origin: 0,
  minCode: 0,
  maxCode: 0xffff_ffff,
  rounding: 'half-even',
  overflow: 'refuse',
  label: 'index',
};

/** How a suite codes each quantity. */
export interface ProductFormats {
  readonly voltage: CodeFormat;
  readonly current: CodeFormat;
  readonly power: CodeFormat;
  readonly irradiance: CodeFormat;
  /** In degrees Celsius. */
  readonly temperature: CodeFormat;
  readonly time: CodeFormat;
}

/** Irradiance and cell temperature of each shading group, as columns. */
export function conditionColumns(groups: number, formats: ProductFormats): ColumnWish[] {
  return Array.from({ length: groups }, (_, group) => {
    const suffix = groups === 1 ? '' : `_${group}`;
    return [
      { name: `irradiance${suffix}`, quantity: 'irradiance', group, format: formats.irradiance },
      {
        name: `cell_temp${suffix}`,
        quantity: 'cellTemperature',
        group,
        format: formats.temperature,
      },
    ] satisfies ColumnWish[];
  }).flat();
}

/** The columns of Isc and Voc, and of the global peak. */
export function keyPointColumns(formats: ProductFormats): ColumnWish[] {
  return [
    { name: 'isc', quantity: 'shortCircuitCurrent', format: formats.current },
    { name: 'voc', quantity: 'openCircuitVoltage', format: formats.voltage },
  ];
}

export function peakColumns(formats: ProductFormats): ColumnWish[] {
  return [
    { name: 'vmp', quantity: 'peakVoltage', format: formats.voltage },
    { name: 'imp', quantity: 'peakCurrent', format: formats.current },
    { name: 'pmp', quantity: 'peakPower', format: formats.power },
  ];
}
