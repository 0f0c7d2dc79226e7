import type { StagedFile, WrittenFile } from '../file/staged-file.js';
import { StagedFolder } from '../file/staged-folder.js';
import { refuseForeignFolder } from './suite-folder.js';
import { refuseUnfit, sinksFor } from './outputs.js';
import type { Product } from './product.js';
import { pour, type Progress } from './sink.js';
import type { OutputForm } from './suite-definition.js';

/** A file of a product, and the form it is in. */
export type ProductFile = WrittenFile & { readonly form: OutputForm };

/** Writes a product in the given forms to files of a staged folder. */
export function writeProductTo(
  staged: StagedFolder,
  product: Product,
  forms: readonly OutputForm[],
  progress?: Progress,
): ProductFile[] {
  const open: { file: StagedFile; form: OutputForm }[] = [];
  try {
    const sinks = sinksFor(product, forms, (path, form) => {
      const file = staged.file(path);
      open.push({ file, form });
      return (chunk) => {
        file.write(chunk);
      };
    });
    pour(product, sinks, progress);
    return open.map(({ file, form }) => ({ ...file.end(), form }));
  } finally {
    for (const { file } of open) file.close();
  }
}

/**
 * Writes one product, made in code by `curveSet` or `timeline`, to a new or empty folder. Without suite file and manifest
 * there is nothing for `verifySuite` to go by.
 * @throws Fault `NOT_A_SUITE` for a folder that holds something; of a form that cannot hold the product, before anything is written; `DISK`.
 */
export function writeProduct(
  product: Product,
  forms: readonly OutputForm[],
  folder: string,
): ProductFile[] {
  refuseUnfit(product, forms);
  refuseForeignFolder(folder, []);
  const staged = new StagedFolder(folder);
  try {
    const files = writeProductTo(staged, product, forms);
    staged.commit();
    return files;
  } catch (error) {
    staged.abandon();
    throw error;
  }
}
