import type { Problem } from '../fault.js';
import { readInput, type InputDocument } from '../file/document.js';
import { parseDatasheet } from './datasheet-file.js';
import { fitDatasheet, type Fit } from './fit/fit.js';
import { parseModel } from './model-file.js';
import type { Module } from './module.js';

/** A source read from a file, and how it came about. */
export interface SourceReading {
  readonly module: Module;
  /** Present where the file was a datasheet and had to be fitted. */
  readonly fit?: Fit;
  readonly warnings: readonly Problem[];
}

/** Reads a model file, or a datasheet file and fits it. @throws Fault with every error. */
export function loadSource(file: string): SourceReading {
  return parseSource(readInput(file));
}

/** The same from a document already read. A file with a key `model` is a model file. */
export function parseSource(document: InputDocument): SourceReading {
  if (isModel(document.value)) return { module: parseModel(document), warnings: [] };
  const { datasheet, warnings } = parseDatasheet(document);
  const fit = fitDatasheet(datasheet);
  const located = fit.warnings.map((warning) => ({ ...warning, file: document.file }));
  return { module: fit.module, fit, warnings: [...warnings, ...located] };
}

const isModel = (value: unknown): boolean =>
  typeof value === 'object' && value !== null && 'model' in value;
