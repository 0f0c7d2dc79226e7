import { createHash, type Hash } from 'node:crypto';
import { join } from 'node:path';
import type { Problem } from '../fault.js';
import {
  listProduct,
  MANIFEST_NAME,
  manifestText,
  newManifest,
  type ListedProduct,
  type Manifest,
} from './manifest.js';
import { sinksFor } from './outputs.js';
import type { Product } from './product.js';
import { pour } from './sink.js';
import type { OutputForm } from './suite-definition.js';
import type { PlannedProduct, Suite } from './suite.js';

export interface BuiltProduct {
  readonly planned: PlannedProduct;
  readonly product: Product;
}

/** Builds everything again, the manifest included, and compares byte for byte. */
export function rebuiltProblems(
  folder: string,
  manifest: Manifest,
  suite: Suite,
  products: readonly BuiltProduct[],
): Problem[] {
  const listed = products.map(({ planned, product }) => rebuilt(planned, product));
  const expected = new Map(listed.flatMap(({ files }) => files.map((file) => [file.path, file])));
  const different = manifest.products
    .flatMap(({ files }) => files)
    .filter(({ path, sha256 }) => expected.get(path)?.sha256 !== sha256)
    .map(({ path }) => ({
      code: 'NOT_REPRODUCED',
      file: join(folder, path),
      message: 'the inputs do not give these bytes when built again.',
    }));
  if (different.length > 0) return different;
  const inputs = suite.inputs.flatMap(({ namedAs = null }) =>
    manifest.inputs.filter(({ named_as: named }) => named === namedAs),
  );
  if (manifestText(newManifest(suite.name, inputs, listed)) === manifestText(manifest)) return [];
  return [
    {
      code: 'MANIFEST_DIFFERS',
      file: join(folder, MANIFEST_NAME),
      message: 'does not list what the inputs give when built again.',
    },
  ];
}

function rebuilt({ source, outputs }: PlannedProduct, product: Product): ListedProduct {
  const open: { path: string; form: OutputForm; hash: Hash; bytes: number }[] = [];
  const sinks = sinksFor(product, outputs, (path, form) => {
    const file = { path, form, hash: createHash('sha256'), bytes: 0 };
    open.push(file);
    return (chunk) => {
      file.hash.update(chunk);
      file.bytes += chunk.length;
    };
  });
  pour(product, sinks);
  const files = open.map(({ path, form, hash, bytes }) => ({
    ...{ path, bytes, sha256: hash.digest('hex'), form },
  }));
  return listProduct(product, source, files);
}
