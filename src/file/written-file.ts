/** Writes one file beside its target and renames it into place; a failure leaves the old one. */
import { renameSync, rmSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { StagedFile, type WrittenFile } from './staged-folder.js';
import { worldFault } from './world-fault.js';

/** @throws Fault `DISK`. */
export function writeWhole(path: string, content: string): WrittenFile {
  const target = resolve(path);
  const beside = join(dirname(target), `.${basename(target)}.partial`);
  let file: StagedFile | undefined;
  try {
    rmSync(beside, { force: true });
    file = new StagedFile(beside, path);
    file.write(Buffer.from(content, 'utf8'));
    const written = file.end();
    renameSync(beside, target);
    return written;
  } catch (error) {
    file?.close();
    discard(beside);
    throw worldFault(error, path);
  }
}

// What went wrong before matters more than that its remains cannot be removed either.
function discard(path: string): void {
  try {
    rmSync(path, { force: true });
  } catch {
    return;
  }
}
