import { join } from 'node:path';
import { Fault, type Problem } from '../fault.js';
import { recoverFolder } from '../file/staged-folder.js';
import { VERSION } from '../version.js';
import { MANIFEST_NAME, type Manifest } from './manifest.js';
import { readManifest } from './suite-folder.js';
import { loadSuite, type Suite } from './suite.js';
import { verifyBinary } from './verify-binary.js';
import { fileProblems } from './verify-files.js';
import { rebuiltProblems } from './verify-rebuild.js';

export interface Verification {
  readonly folder: string;
  readonly suite: string;
  /** What was checked, in words: how many of it hold, of how many there are. */
  readonly checked: readonly Tally[];
  /** What could not be checked, and why; absent where everything was. */
  readonly remark?: string;
  /** What failed: files first, then codes, then what does not come out when built again. */
  readonly problems: readonly Problem[];
}

interface Tally {
  readonly what: string;
  readonly held: number;
  readonly of: number;
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
  const outputs = manifest.products.reduce((sum, { files }) => sum + files.length, 0);
  const damaged = problems.filter(({ code }) => code !== 'FILE_UNLISTED').length;
  const suite = reloadSuite(folder, manifest, problems);
  const products = suite?.products.map((planned) => ({ planned, product: planned.build() })) ?? [];
  const codes = { compared: 0, wrong: 0 };
  manifest.products.forEach((listed, index) => {
    const found = verifyBinary(
      folder,
      listed,
      products[index]?.product,
      problems,
      options.progress,
    );
    codes.compared += found.compared;
    codes.wrong += found.wrong;
  });
  const checked = [
    tally('files by size and SHA-256', outputs + manifest.inputs.length, damaged),
    tally('codes against the model', codes.compared, codes.wrong),
  ];
  const whole = { folder, suite: manifest.suite };
  const { version } = manifest.tool;
  if (suite === undefined || version !== VERSION) {
    const remark =
      suite === undefined
        ? 'The inputs are damaged, so nothing was built again.'
        : `Written by version ${version}, read by ${VERSION}: outputs other than codes were checked ` +
          'by their hashes alone.';
    return { ...whole, checked, remark, problems: bounded(problems) };
  }
  const different = rebuiltProblems(folder, manifest, suite, products);
  checked.push(tally('output files rebuilt byte for byte', outputs, different.length));
  return { ...whole, checked, problems: bounded([...problems, ...different]) };
}

const tally = (what: string, of: number, failed: number): Tally => ({
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
  const differ = (message: string): void => {
    problems.push({ code: 'INPUTS_DIFFER', file: join(folder, MANIFEST_NAME), message });
  };
  const own = byName.get(null);
  if (own === undefined) {
    differ('lists no suite file among the inputs.');
    return undefined;
  }
  try {
    const suite = loadSuite(join(folder, own), (namedAs) =>
      join(folder, byName.get(namedAs) ?? `inputs/${namedAs}`),
    );
    const asked = suite.products.length;
    if (asked === manifest.products.length) return suite;
    differ(`lists ${manifest.products.length} products, the suite file asks for ${asked}.`);
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    problems.push(...error.problems);
    return undefined;
  }
}
