import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { emitSuite } from '../../src/vectors/emit.js';
import { filesBelow } from '../../src/vectors/suite-folder.js';
import { verifySuite } from '../../src/vectors/verify.js';
import { newFolder } from '../new-folder.js';

const demo = fileURLToPath(new URL('../../vectors/demo/', import.meta.url));
const golden = join(demo, 'golden');

test('building the demo suite gives the committed bytes, file by file', () => {
  const rebuilt = join(newFolder(), 'demo');
  emitSuite(join(demo, 'suite.yaml'), rebuilt);
  expect(filesBelow(rebuilt)).toEqual(filesBelow(golden));
  const different = filesBelow(golden).filter(
    (path) => !readFileSync(join(rebuilt, path)).equals(readFileSync(join(golden, path))),
  );
  // If the change is meant: npm run golden, review the difference, and say in the change log
  // which bytes changed and why.
  expect(different).toEqual([]);
});

test('the committed demo suite is whole', () => {
  expect(verifySuite(golden).problems).toEqual([]);
});
