import { dirname, isAbsolute, join, normalize } from 'node:path';
import { Fault, type Problem } from '../fault.js';
import { fieldProblem } from '../file/definition.js';
import { kindOf, refuseOtherKinds } from '../file/document-kind.js';
import { readInput, type InputDocument } from '../file/document.js';
import type { Source } from './curve.js';
import { parseDatasheet } from './datasheet-file.js';
import { parseEn50530 } from './en-50530/file.js';
import { fitDatasheet, type Fit } from './fit/fit.js';
import { parseModel } from './model-file.js';
import type { Module } from './module.js';
import { parseArray } from './network/array-file.js';

/** A source read from a file, and how it came about. */
export interface SourceReading {
  readonly source: Source;
  /** The same source where it is a single module. */
  readonly module?: Module;
  /** Present where the file was a datasheet and had to be fitted. */
  readonly fit?: Fit;
  readonly warnings: readonly Problem[];
}

/** A module read from a file. */
interface ModuleReading extends SourceReading {
  readonly module: Module;
}

/** Reads the file that a source file names, by the name it has there. */
export type ReadNamed = (namedAs: string) => InputDocument;

/**
 * Reads a model file, a datasheet file and fits it, or an array file with the module it names.
 * @throws Fault with every error of the file; those of `readInput` and `parseSource`.
 */
export function loadSource(file: string): SourceReading {
  return parseSource(readInput(file));
}

/**
 * The same from a document already read. A file with a key `model` is a model file, one with a key
 * `array` an array file, one with a key `generator` a source patterned on a standard.
 * @param readNamed Left out: names are paths from the folder of the document.
 * @throws Fault with every error of the file; `INFEASIBLE_DATASHEET` where no curve comes near
 * enough to the datasheet to stand for its module; those of `parseArray`.
 */
export function parseSource(
  document: InputDocument,
  readNamed: ReadNamed = (namedAs) => readInput(besideFile(document.file, namedAs)),
): SourceReading {
  refuseOtherKinds(document, 'datasheet', 'model', 'array', 'generator');
  const kind = kindOf(document);
  if (kind === 'generator') return { source: parseEn50530(document), warnings: [] };
  return kind === 'array' ? arrayReading(document, readNamed) : moduleReading(document);
}

/** The path of a file that another one names, from the folder of that one. */
export const besideFile = (file: string, namedAs: string): string =>
  isAbsolute(namedAs) ? namedAs : join(dirname(file), namedAs);

function arrayReading(document: InputDocument, readNamed: ReadNamed): SourceReading {
  const fromModule: Problem[] = [];
  const { array, warnings } = parseArray(document, (namedAs) => {
    const isItself = besideFile(document.file, namedAs) === normalize(document.file);
    if (isItself) throw moduleFault(document, 'NETWORK_LOOP', 'names this very file.');
    const named = readNamed(namedAs);
    if (kindOf(named) === 'array') {
      throw moduleFault(document, 'ARRAY_IN_ARRAY', `${named.file} is an array file.`);
    }
    refuseOtherKinds(named, 'datasheet', 'model');
    const reading = moduleReading(named);
    fromModule.push(...reading.warnings);
    return reading.module;
  });
  return { source: array, warnings: [...fromModule, ...warnings] };
}

const moduleFault = (document: InputDocument, code: string, message: string): Fault =>
  new Fault(
    'input',
    fieldProblem(document, ['module'], {
      code,
      message,
      hint: 'Name a datasheet or model file: an array consists of modules.',
    }),
  );

function moduleReading(document: InputDocument): ModuleReading {
  if (kindOf(document) === 'model') {
    const module = parseModel(document);
    return { source: module, module, warnings: [] };
  }
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
  return { source: fit.module, module: fit.module, fit, warnings: [...warnings, ...located] };
}
