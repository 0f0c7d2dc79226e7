import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { Fault, type Problem } from '../../src/fault.js';
import { emitSuite } from '../../src/vectors/emit.js';
import { listedFiles } from '../../src/vectors/manifest.js';
import { verifySuite } from '../../src/vectors/verify.js';
import { newFolder } from '../new-folder.js';
import { SMALL_SUITE, writeInputs } from './small-suite.js';

// Every output form once, to keep the number of bytes, and so of verifications, near 6,000.
const EACH_FORM_ONCE = SMALL_SUITE.replace('points: 4', 'points: 2')
  .replace('curves:', 'curves:\n  outputs: [binary, c]')
  .replace('{ every_s: 1 }', '{ every_s: 2, outputs: [csv, json] }');

/** The problems that verify finds, whether it reports them or cannot even start. */
function problemsOf(folder: string): readonly Problem[] {
  try {
    return verifySuite(folder).problems;
  } catch (error) {
    if (error instanceof Fault) return error.problems;
    throw error;
  }
}

test('a change of one bit is found in every byte of every file of a suite', () => {
  const inputs = newFolder();
  const folder = join(inputs, 'whole');
  const { manifest } = emitSuite(writeInputs(inputs, { suite: EACH_FORM_ONCE }), folder);
  const paths = ['manifest.json', ...listedFiles(manifest).map(({ path }) => path)];
  let flips = 0;
  for (const path of paths) {
    const file = join(folder, path);
    const bytes = readFileSync(file);
    for (let at = 0; at < bytes.length; at++) {
      const bit = 1 << (at & 7);
      bytes[at]! ^= bit;
      writeFileSync(file, bytes);
      const problems = problemsOf(folder);
      bytes[at]! ^= bit;
      if (problems[0]?.file !== file) {
        expect.fail(`${path}: bit ${at & 7} of byte ${at} was changed and verify did not name it`);
      }
      flips++;
    }
    writeFileSync(file, bytes);
  }
  expect(problemsOf(folder)).toEqual([]);
  console.log(`${flips} single-bit changes, one in every byte of ${paths.length} files, all found`);
}, 600_000);
