import { lstatSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Fault, type Problem } from '../fault.js';
import { worldFault } from '../file/world-fault.js';
import { readVectorFile, type VectorFile } from './binary-reader.js';
import type { ListedProduct } from './manifest.js';
import type { Product } from './product.js';
import { compareWithModel, recordProblem, type Comparison, type Complain } from './verify-codes.js';
import { checkCurveRules } from './verify-curves.js';

/**
 * Reads the vector file of a listed product, checks the rules that its kind keeps, and compares
 * its codes with the model, where the inputs gave one.
 */
export function verifyBinary(
  folder: string,
  listed: ListedProduct,
  product: Product | undefined,
  problems: Problem[],
  progress?: (product: string, done: number, total: number) => void,
): Comparison {
  const entry = listed.files.find(({ form }) => form === 'binary');
  if (entry === undefined) return NOTHING_COMPARED;
  const path = join(folder, entry.path);
  const complain = limited((section, record, message) => {
    problems.push(recordProblem(path, section, record, message));
  });
  try {
    const file = readVectors(path, problems);
    if (file.kind === 'curve-set') checkCurveRules(file, complain);
    if (product === undefined) return NOTHING_COMPARED;
    return compareWithModel(file, product, complain, (done, total) =>
      progress?.(product.name, done, total),
    );
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    problems.push(...error.problems);
    return NOTHING_COMPARED;
  }
}

const NOTHING_COMPARED: Comparison = { compared: 0, wrong: 0 };

function readVectors(path: string, problems: Problem[]): VectorFile {
  let bytes: Uint8Array;
  try {
    const { size } = lstatSync(path);
    if (size > LARGEST_READ) {
      throw new Fault('check', {
        code: 'FILE_TOO_LARGE',
        file: path,
        message: `has ${size} bytes: verify compares the codes of files up to ${LARGEST_READ} bytes.`,
      });
    }
    bytes = readFileSync(path);
  } catch (error) {
    throw worldFault(error, path);
  }
  return readVectorFile(bytes, path, (problem) => problems.push(problem));
}

/** What the runtime reads in one piece: 2 GiB less one byte. */
const LARGEST_READ = 0x7fff_ffff;

// A damaged section can have as many complaints as records: the first few tell the story.
function limited(complain: Complain): Complain {
  const counts = new Map<string, number>();
  return (section, record, message) => {
    const count = (counts.get(section) ?? 0) + 1;
    counts.set(section, count);
    if (count <= 5) complain(section, record, message);
  };
}
