/**
 * The manifest lists all that a suite consists of, and is written last: a folder without a valid
 * manifest is not a suite.
 */
import { createHash } from 'node:crypto';
import { Fault } from '../fault.js';
import { VERSION } from '../version.js';
import { manifestDefinition } from './manifest-definition.js';
import type { Product } from './product.js';
import type { OutputForm } from './suite-definition.js';

export const MANIFEST_NAME = 'manifest.json';
const MANIFEST_VERSION = 1;

export interface ListedFile {
  /** Path inside the suite's folder, with forward slashes. */
  readonly path: string;
  readonly bytes: number;
  readonly sha256: string;
}

export interface ListedInput extends ListedFile {
  /** How the suite file names it; null for the suite file itself. */
  readonly named_as: string | null;
}

export interface ListedProduct {
  readonly name: string;
  readonly kind: string;
  readonly source: string;
  readonly sections: readonly { readonly tag: string; readonly records: number }[];
  /** Values that took the nearest code because none was theirs, by section and column. */
  readonly saturated: readonly {
    readonly column: string;
    readonly low: number;
    readonly high: number;
  }[];
  readonly files: readonly (ListedFile & { readonly form: OutputForm })[];
}

export interface Manifest {
  readonly manifest: number;
  readonly suite: string;
  readonly tool: { readonly name: string; readonly version: string };
  /** Every seed that decided something. Empty: nothing in this suite is random. */
  readonly seeds: Readonly<Record<string, number>>;
  readonly inputs: readonly ListedInput[];
  readonly products: readonly ListedProduct[];
}

export function newManifest(
  suite: string,
  inputs: readonly ListedInput[],
  products: readonly ListedProduct[],
): Manifest {
  const tool = { name: 'hillproof', version: VERSION };
  return { manifest: MANIFEST_VERSION, suite, tool, seeds: {}, inputs, products };
}

/** How a product that has been poured is listed, with what its formats could not hold. */
export function listProduct(
  product: Product,
  source: string,
  files: ListedProduct['files'],
): ListedProduct {
  const { name, kind, sections } = product;
  const saturated = sections.flatMap((section) =>
    section.columns.flatMap(({ name: column, quantizer }) => {
      const { saturatedLow: low, saturatedHigh: high } = quantizer;
      return low + high === 0 ? [] : [{ column: `${section.noun}.${column}`, low, high }];
    }),
  );
  const counts = sections.map(({ tag, count }) => ({ tag, records: count }));
  return { name, kind, source, sections: counts, saturated, files };
}

/**
 * The text of a manifest. Its last key, `seal`, is the SHA-256 of the text with 64 zeros in the
 * seal's place, so that the manifest vouches for itself as it does for the other files.
 */
export function manifestText(manifest: Manifest): string {
  const open = `${JSON.stringify({ ...manifest, seal: OPEN_SEAL }, undefined, 2)}\n`;
  return withSeal(open, sealOf(open));
}

/**
 * @throws Fault `MANIFEST` if the text is not a sealed manifest of this version.
 */
export function parseManifest(text: string, file: string): Manifest {
  const refuse = (message: string, hint?: string): never => {
    throw new Fault('check', {
      code: 'MANIFEST',
      file,
      message,
      ...(hint === undefined ? {} : { hint }),
    });
  };
  const seal = SEAL.exec(text)?.[1];
  if (seal === undefined) return refuse('is not a sealed manifest of a suite.');
  if (sealOf(withSeal(text, OPEN_SEAL)) !== seal) {
    return refuse('has been changed since it was written: the seal does not match.');
  }
  const parsed = manifestDefinition.safeParse(fromJson(text));
  if (!parsed.success) return refuse('is sealed, but is not what emit writes.');
  const { seal: own, ...manifest } = parsed.data;
  if (own !== seal || manifest.manifest !== MANIFEST_VERSION) {
    return refuse(
      `has version ${manifest.manifest}, expected ${MANIFEST_VERSION}.`,
      `It was written by ${manifest.tool.name} ${manifest.tool.version}.`,
    );
  }
  const paths = listedFiles(manifest).map(({ path }) => path);
  if (new Set(paths).size < paths.length) return refuse('lists a file twice.');
  return manifest;
}

function fromJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}

/** Every file of the suite except the manifest. */
export const listedFiles = ({ inputs, products }: Manifest): ListedFile[] => [
  ...inputs,
  ...products.flatMap(({ files }) => files),
];

const OPEN_SEAL = '0'.repeat(64);
const SEAL = /\n {2}"seal": "([0-9a-f]{64})"\n\}\n$/;

const sealOf = (open: string): string => createHash('sha256').update(open, 'utf8').digest('hex');

const withSeal = (text: string, seal: string): string =>
  text.replace(SEAL, `\n  "seal": "${seal}"\n}\n`);
