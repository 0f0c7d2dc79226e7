/** Writes one file beside its target and renames it into place; a failure leaves the old one. */
import { existsSync, realpathSync, renameSync, rmSync, statSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { Fault } from '../fault.js';
import { StagedFile, type WrittenFile } from './staged-file.js';
import { worldFault } from './world-fault.js';

/**
 * A symbolic link stays, and what it points to is replaced.
 * @throws Fault `FILE_MISSING` where the folder is not there, `NOT_A_FILE` for a folder or device,
 * `DISK`.
 */
export function writeWhole(path: string, content: string): WrittenFile {
  const target = realTarget(path);
  const beside = join(dirname(target), `.${basename(target)}.partial`);
  let file: StagedFile | undefined;
  try {
    // Asked for its error alone: a missing folder is not made, for it is likely a slip.
    statSync(dirname(target));
    rmSync(beside, { force: true });
    file = new StagedFile(beside, path);
    file.write(Buffer.from(content, 'utf8'));
    const written = file.end();
    renameSync(beside, target);
    return written;
  } catch (error) {
    file?.close();
    discard(beside);
    throw worldFault(
      error instanceof Fault && error.cause !== undefined ? error.cause : error,
      path,
    );
  }
}

function realTarget(path: string): string {
  try {
    if (!existsSync(path)) return resolve(path);
    if (statSync(path).isFile()) return realpathSync(path);
  } catch (error) {
    throw worldFault(error, path);
  }
  throw new Fault('input', {
    code: 'NOT_A_FILE',
    file: path,
    message: 'is a folder or a device; expected the name of a file to write.',
  });
}

// What went wrong before matters more than that its remains cannot be removed either.
function discard(path: string): void {
  try {
    rmSync(path, { force: true });
  } catch {
    return;
  }
}
