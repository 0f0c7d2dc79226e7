import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';

const made: string[] = [];
afterAll(() => {
  for (const folder of made.splice(0)) rmSync(folder, { recursive: true, force: true });
});

/** An empty folder, which goes away when the tests of the file have run. */
export function newFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'hillproof-test-'));
  made.push(folder);
  return folder;
}
