import { basename } from 'node:path';
import { Fault } from '../fault.js';
import { recoverFolder, StagedFolder } from '../file/staged-folder.js';
import { refuseForeignFolder } from './suite-folder.js';
import {
  listProduct,
  MANIFEST_NAME,
  manifestText,
  newManifest,
  type ListedInput,
  type ListedProduct,
  type Manifest,
} from './manifest.js';
import { refuseUnfit } from './outputs.js';
import { writeProductTo } from './write-product.js';
import { loadSuite, type PlannedProduct, type Suite, type SuiteInput } from './suite.js';

export interface EmitOptions {
  /** Called now and then with the product being written and how far it is. */
  readonly progress?: (product: string, done: number, total: number) => void;
}

export interface Emission {
  readonly folder: string;
  readonly manifest: Manifest;
  readonly suite: Suite;
}

/**
 * Builds the suite that a suite file describes into a folder, which it replaces whole.
 *
 * Everything is checked before anything is written, and written beside the folder before the
 * folder is touched: a run that fails or is killed leaves the folder as it was. Memory does not
 * grow with the length of a timeline.
 * @throws Fault `NOT_A_SUITE` if the folder holds other things; Faults of the inputs; `DISK`.
 */
export function emitSuite(suiteFile: string, folder: string, options: EmitOptions = {}): Emission {
  const suite = loadSuite(suiteFile);
  if (folder !== '') recoverFolder(folder);
  refuseForeignFolder(
    folder,
    suite.inputs.map(({ file }) => file),
  );
  for (const planned of suite.products) {
    inPlace(planned, () => {
      refuseUnfit(planned.build(), planned.outputs);
    });
  }
  const staged = new StagedFolder(folder);
  try {
    const inputs = writeInputs(staged, suite.inputs);
    const products = suite.products.map((planned) =>
      inPlace(planned, () => emitProduct(staged, planned, options)),
    );
    const manifest = newManifest(suite.name, inputs, products);
    staged.write(MANIFEST_NAME, manifestText(manifest));
    staged.commit();
    return { folder: staged.target, manifest, suite };
  } catch (error) {
    staged.abandon();
    throw error;
  }
}

// A copy of every input goes with the suite, so that it can be verified by itself.
function writeInputs(staged: StagedFolder, inputs: readonly SuiteInput[]): ListedInput[] {
  const taken = new Set<string>();
  return inputs.map(({ namedAs, file, text }) => {
    let path = `inputs/${basename(file)}`;
    for (let copy = 2; taken.has(path); copy++) path = `inputs/${copy}-${basename(file)}`;
    taken.add(path);
    return { ...staged.write(path, text), named_as: namedAs ?? null };
  });
}

function emitProduct(
  staged: StagedFolder,
  { build, outputs, source }: PlannedProduct,
  { progress }: EmitOptions,
): ListedProduct {
  const product = build();
  const files = writeProductTo(staged, product, outputs, (done, total) =>
    progress?.(product.name, done, total),
  );
  return listProduct(product, source, files);
}

/** Faults without a place are about what the suite file asked for. */
function inPlace<T>({ place }: PlannedProduct, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    throw new Fault(
      error.kind,
      error.problems.map((problem) =>
        problem.file === undefined ? { ...problem, ...place } : problem,
      ),
      { cause: error },
    );
  }
}
