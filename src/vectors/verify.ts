import { createHash, type Hash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Fault, type Problem } from '../fault.js';
import { recoverFolder } from '../file/staged-folder.js';
import { worldFault } from '../file/world-fault.js';
import { VERSION } from '../version.js';
import { readVectorFile, type VectorFile } from './binary-reader.js';
import type { ListedProduct, Manifest } from './manifest.js';
import { sinksFor } from './outputs.js';
import type { Product } from './product.js';
import { pour } from './sink.js';
import { readManifest } from './suite-folder.js';
import { loadSuite, type PlannedProduct, type Suite } from './suite.js';
import { compareWithModel, recordProblem, type Complain } from './verify-codes.js';
import { checkCurveRules } from './verify-curves.js';
import { fileProblems } from './verify-files.js';

export interface Verification {
  readonly folder: string;
  readonly suite: string;
  /** What was checked, in words: how many of it hold, of how many there are. */
  readonly checked: readonly {
    readonly what: string;
    readonly held: number;
    readonly of: number;
  }[];
  /** What failed, most telling first; empty if the suite is whole. */
  readonly problems: readonly Problem[];
}

export interface VerifyOptions {
  readonly progress?: (product: string, done: number, total: number) => void;
}

/**
 * Recomputes everything about a suite that can be recomputed: sizes and hashes of all files, CRCs
 * and structure of the vector files, every code against the model fitted anew from the suite's own
 * copy of its inputs, the rules that curves keep, and, with the tool's own version, every output
 * byte for byte.
 * @throws Fault `NOT_A_SUITE` or `MANIFEST` where there is nothing to verify against; `DISK`.
 */
export function verifySuite(folder: string, options: VerifyOptions = {}): Verification {
  recoverFolder(folder);
  const manifest = readManifest(folder);
  const problems = fileProblems(folder, manifest);
  const outputs = sum(manifest.products.map(({ files }) => files.length));
  const damaged = problems.filter(({ code }) => code !== 'FILE_UNLISTED').length;
  const suite = reloadSuite(folder, manifest, problems);
  let codes = 0;
  const wrongCodes: Problem[] = [];
  const different: Problem[] = [];
  const rebuilds = suite !== undefined && manifest.tool.version === VERSION;
  manifest.products.forEach((listed, index) => {
    const planned = suite?.products[index];
    codes += verifyBinary(folder, listed, planned, wrongCodes, options);
    if (planned !== undefined && rebuilds) {
      different.push(...rebuiltProblems(folder, listed, planned));
    }
  });
  return {
    folder,
    suite: manifest.suite,
    checked: [
      tally('files by size and SHA-256', outputs + manifest.inputs.length, damaged),
      tally('codes against the model', codes, wrongCodes.length),
      tally('output files rebuilt byte for byte', rebuilds ? outputs : 0, different.length),
    ],
    problems: bounded([...problems, ...wrongCodes, ...different]),
  };
}

const tally = (what: string, of: number, failed: number): Verification['checked'][number] => ({
  what,
  held: Math.max(of - failed, 0),
  of,
});

const MOST_PROBLEMS = 50;

function bounded(problems: Problem[]): Problem[] {
  if (problems.length <= MOST_PROBLEMS) return problems;
  const rest = problems.length - MOST_PROBLEMS;
  const message = `${rest} more problems are not shown.`;
  return [...problems.slice(0, MOST_PROBLEMS), { code: 'MORE_PROBLEMS', message }];
}

/** The suite from the copies of its inputs, or undefined where those are damaged. */
function reloadSuite(folder: string, manifest: Manifest, problems: Problem[]): Suite | undefined {
  const byName = new Map(manifest.inputs.map(({ named_as: named, path }) => [named, path]));
  const own = byName.get(null);
  if (own === undefined) return undefined;
  try {
    const suite = loadSuite(join(folder, own), (namedAs) =>
      join(folder, byName.get(namedAs) ?? `inputs/${namedAs}`),
    );
    if (suite.products.length === manifest.products.length) return suite;
    problems.push({
      code: 'INPUTS_DIFFER',
      file: join(folder, own),
      message: `asks for ${suite.products.length} products, the manifest lists ${manifest.products.length}.`,
    });
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    problems.push(...error.problems);
  }
  return undefined;
}

function verifyBinary(
  folder: string,
  listed: ListedProduct,
  planned: PlannedProduct | undefined,
  problems: Problem[],
  { progress }: VerifyOptions,
): number {
  const entry = listed.files.find(({ form }) => form === 'binary');
  if (entry === undefined) return 0;
  const path = join(folder, entry.path);
  const complain = limited((section, record, message) => {
    problems.push(recordProblem(path, section, record, message));
  });
  try {
    const file = readVectors(path, problems);
    if (file.kind === 'curve-set') checkCurveRules(file, complain);
    if (planned === undefined) return 0;
    const product = planned.build();
    return compareWithModel(file, product, complain, (done, total) =>
      progress?.(product.name, done, total),
    );
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    problems.push(...error.problems);
    return 0;
  }
}

function readVectors(path: string, problems: Problem[]): VectorFile {
  let bytes: Uint8Array;
  try {
    bytes = readFileSync(path);
  } catch (error) {
    throw worldFault(error, path);
  }
  return readVectorFile(bytes, path, (problem) => problems.push(problem));
}

// A damaged section can have as many complaints as records: the first few tell the story.
function limited(complain: Complain): Complain {
  const counts = new Map<string, number>();
  return (section, record, message) => {
    const count = (counts.get(section) ?? 0) + 1;
    counts.set(section, count);
    if (count <= 5) complain(section, record, message);
  };
}

function rebuiltProblems(
  folder: string,
  listed: ListedProduct,
  planned: PlannedProduct,
): Problem[] {
  const hashes = new Map<string, Hash>();
  const product: Product = planned.build();
  const sinks = sinksFor(product, planned.outputs, (path) => {
    const hash = createHash('sha256');
    hashes.set(path, hash);
    return (chunk) => hash.update(chunk);
  });
  pour(product, sinks);
  return listed.files
    .filter(({ path, sha256 }) => hashes.get(path)?.digest('hex') !== sha256)
    .map(({ path }) => ({
      code: 'NOT_REPRODUCED',
      file: join(folder, path),
      message: 'the inputs do not give these bytes when built again.',
    }));
}

const sum = (counts: readonly number[]): number =>
  counts.reduce((total, count) => total + count, 0);
