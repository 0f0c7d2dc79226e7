/**
 * The one way to write output: everything goes to a folder beside the target, and takes the
 * target's place by renaming when it is complete. A run that fails or is killed leaves the target
 * as it was.
 */
import { existsSync, mkdirSync, realpathSync, renameSync, rmSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { Fault } from '../fault.js';
import { lockIsStale, releaseLock, takeLock } from './lock.js';
import { StagedFile, type WrittenFile } from './staged-file.js';
import { worldFault } from './world-fault.js';

export class StagedFolder {
  /** Where the folder will be; a symbolic link is followed, and stays. */
  readonly target: string;
  readonly #beside: Companions;

  /**
   * Opens a staging folder beside `target`, whose parent is made if need be. What an earlier run
   * left when it was killed is cleared away, or put back where it belongs.
   * @throws Fault `BUSY` if another process is writing the same target, `IN_THE_WAY` if the names
   * needed beside it are taken, `DISK`.
   */
  constructor(target: string) {
    this.target = realFolder(target);
    this.#beside = companions(this.target);
    try {
      mkdirSync(dirname(this.target), { recursive: true });
      recoverFolder(this.target);
      takeLock(this.#beside.lock);
    } catch (error) {
      throw worldFault(error, this.target);
    }
    try {
      refuseStrangers(this.#beside);
      mkdirSync(this.#beside.staging);
    } catch (error) {
      releaseLock(this.#beside.lock);
      throw worldFault(error, this.#beside.staging);
    }
  }

  /** Starts a file; `path` is relative to the folder, with forward slashes. */
  file(path: string): StagedFile {
    return new StagedFile(join(this.#beside.staging, path), path);
  }

  /** Writes a small file whole. */
  write(path: string, content: string | Uint8Array): WrittenFile {
    const file = this.file(path);
    try {
      file.write(typeof content === 'string' ? Buffer.from(content, 'utf8') : content);
      return file.end();
    } finally {
      file.close();
    }
  }

  /** Puts the staged folder in the place of the target, which it replaces whole. */
  commit(): void {
    const { staging, previous, lock } = this.#beside;
    try {
      if (existsSync(this.target)) renameSync(this.target, previous);
      renameSync(staging, this.target);
    } catch (error) {
      if (existsSync(previous) && !existsSync(this.target)) renameSync(previous, this.target);
      throw worldFault(error, this.target);
    }
    // The new folder is in place: that the old one cannot be removed is no failure. Without the
    // lock it would count as somebody else's, so the lock stays with it.
    if (removed(previous)) releaseLock(lock);
  }

  /** Removes what was staged; the target stays as it was. */
  abandon(): void {
    if (removed(this.#beside.staging)) releaseLock(this.#beside.lock);
  }
}

interface Companions {
  /** Exists exactly while the other two are ours, and names the process that writes. */
  readonly lock: string;
  readonly staging: string;
  readonly previous: string;
}

function companions(target: string): Companions {
  const beside = (suffix: string): string =>
    join(dirname(target), `.${basename(target)}.${suffix}`);
  return { lock: beside('lock'), staging: beside('partial'), previous: beside('previous') };
}

function realFolder(target: string): string {
  try {
    return realpathSync(target);
  } catch {
    return resolve(target);
  }
}

/**
 * Mends whatever state a killed run has left: the old folder is put back if the new one is not in
 * place, and removed if it is. Does nothing while the run that holds the lock is alive, or where
 * there is no lock. Readers of a folder call this first.
 */
export function recoverFolder(target: string): void {
  const { lock, staging, previous } = companions(realFolder(target));
  if (!lockIsStale(lock)) return;
  if (existsSync(previous) && !existsSync(target)) renameSync(previous, target);
  if (removed(previous) && removed(staging)) releaseLock(lock);
}

// The lock is fresh, so what bears these names already belongs to somebody else.
function refuseStrangers({ staging, previous }: Companions): void {
  const stranger = [staging, previous].find((path) => existsSync(path));
  if (stranger === undefined) return;
  throw new Fault('world', {
    code: 'IN_THE_WAY',
    file: stranger,
    message: 'bears a name that is needed for writing.',
    hint: 'Move it elsewhere.',
  });
}

function removed(folder: string): boolean {
  try {
    rmSync(folder, { recursive: true, force: true });
    return true;
  } catch {
    return false;
  }
}
