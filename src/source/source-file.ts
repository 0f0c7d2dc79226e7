import { Fault, type Problem } from '../fault.js';
import { kindOf, refuseOtherKinds } from '../file/document-kind.js';
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

/**
 * Reads a model file, or a datasheet file and fits it.
 * @throws Fault with every error of the file; those of `readInput` and `parseSource`.
 */
export function loadSource(file: string): SourceReading {
  return parseSource(readInput(file));
}

/**
 * The same from a document already read. A file with a key `model` is a model file.
 * @throws Fault with every error of the file; `INFEASIBLE_DATASHEET` where no curve comes near
 * enough to the datasheet to stand for its module.
 */
export function parseSource(document: InputDocument): SourceReading {
  refuseOtherKinds(document, 'datasheet', 'model');
  if (kindOf(document) === 'model') return { module: parseModel(document), warnings: [] };
  const { file } = document;
  const { datasheet, warnings } = parseDatasheet(document);
  const fit = fitDatasheet(datasheet);
  if (!fit.solved) {
    throw new Fault('input', {
      code: 'INFEASIBLE_DATASHEET',
      file,
      message:
        `no single-diode curve meets this datasheet: ${fit.account}` +
        `${fit.advice === undefined ? '' : `; ${fit.advice}`}.`,
      hint:
        'Correct it, or take the nearest curve as it is: ' +
        `\`hillproof fit ${file} -o MODEL\` writes that as a model file, to use in its place.`,
    });
  }
  const located = fit.warnings.map((warning) => ({ ...warning, file }));
  return { module: fit.module, fit, warnings: [...warnings, ...located] };
}
