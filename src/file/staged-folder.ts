/**
 * The one way to write output: everything goes to a folder beside the target, and takes the
 * target's place by renaming when it is complete. A run that fails or is killed leaves the target
 * as it was.
 */
import { createHash } from 'node:crypto';
import {
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
  writeSync,
} from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { Fault } from '../fault.js';
import { worldFault } from './world-fault.js';

/** What was written to one file. */
export interface WrittenFile {
  /** Path inside the folder, with forward slashes. */
  readonly path: string;
  readonly bytes: number;
  readonly sha256: string;
}

export class StagedFolder {
  readonly target: string;
  readonly #staging: string;
  readonly #previous: string;

  /**
   * Opens a staging folder beside `target`, whose parent is made if need be. What an earlier run
   * left when it was killed is cleared away, or put back where it belongs.
   * @throws Fault `BUSY` if another process is writing the same target, `DISK`.
   */
  constructor(target: string) {
    this.target = resolve(target);
    const { staging, previous } = companions(this.target);
    this.#staging = staging;
    this.#previous = previous;
    try {
      mkdirSync(dirname(this.target), { recursive: true });
      recoverFolder(this.target);
      claim(staging);
    } catch (error) {
      throw worldFault(error, staging);
    }
  }

  /** Starts a file; `path` is relative to the folder, with forward slashes. */
  file(path: string): StagedFile {
    return new StagedFile(join(this.#staging, path), path);
  }

  /** Writes a small file whole. */
  write(path: string, content: string | Uint8Array): WrittenFile {
    const file = this.file(path);
    try {
      file.write(typeof content === 'string' ? Buffer.from(content, 'utf8') : content);
      return file.end();
    } catch (error) {
      file.close();
      throw error;
    }
  }

  /** Puts the staged folder in the place of the target, which it replaces whole. */
  commit(): void {
    try {
      if (existsSync(this.target)) {
        writeFileSync(join(this.target, SET_ASIDE), '');
        renameSync(this.target, this.#previous);
      }
      rmSync(join(this.#staging, OWNER));
      renameSync(this.#staging, this.target);
    } catch (error) {
      restore(this.target, this.#previous);
      throw worldFault(error, this.target);
    }
    removeQuietly(this.#previous);
  }

  /** Removes what was staged; the target stays as it was. */
  abandon(): void {
    removeQuietly(this.#staging);
  }
}

/** One file being written: hashed as it goes, so that it is never read back. */
export class StagedFile {
  readonly #descriptor: number;
  readonly #hash = createHash('sha256');
  readonly #fullPath: string;
  readonly #path: string;
  #bytes = 0;
  #open = true;

  constructor(fullPath: string, path: string) {
    this.#fullPath = fullPath;
    this.#path = path;
    try {
      mkdirSync(dirname(fullPath), { recursive: true });
      this.#descriptor = openSync(fullPath, 'wx');
    } catch (error) {
      throw worldFault(error, fullPath);
    }
  }

  /** Appends `chunk`; it may be reused by the caller afterwards. @throws Fault `DISK`. */
  write(chunk: Uint8Array): void {
    this.#hash.update(chunk);
    this.#bytes += chunk.length;
    try {
      // A short write is legal; what is left is offered again, and an error then says why.
      for (let done = 0; done < chunk.length;) {
        done += writeSync(this.#descriptor, chunk, done, chunk.length - done);
      }
    } catch (error) {
      throw worldFault(error, this.#fullPath);
    }
  }

  /** Brings the file to the disk and closes it. */
  end(): WrittenFile {
    try {
      fsyncSync(this.#descriptor);
    } catch (error) {
      throw worldFault(error, this.#fullPath);
    } finally {
      this.close();
    }
    return { path: this.#path, bytes: this.#bytes, sha256: this.#hash.digest('hex') };
  }

  /** Closes without finishing. Safe to call twice. */
  close(): void {
    if (this.#open) closeSync(this.#descriptor);
    this.#open = false;
  }
}

/** Marks a staging folder, and names the process that writes it. */
const OWNER = '.owner';
/** Marks a folder that is being replaced. */
const SET_ASIDE = '.set-aside';

const companions = (target: string): { staging: string; previous: string } => {
  const beside = (suffix: string): string =>
    join(dirname(target), `.${basename(target)}.${suffix}`);
  return { staging: beside('partial'), previous: beside('previous') };
};

/**
 * Mends what a kill between two renames can leave: the old folder set aside and the new one not yet
 * in place, or in place and the old one not yet gone. Readers of a folder call this first. Folders
 * of the same names that are not ours are left alone.
 */
export function recoverFolder(target: string): void {
  const { previous } = companions(resolve(target));
  const ours = existsSync(join(previous, SET_ASIDE));
  if (ours && existsSync(target)) removeQuietly(previous);
  else if (ours || existsSync(join(target, SET_ASIDE))) restore(resolve(target), previous);
}

function restore(target: string, previous: string): void {
  if (existsSync(join(previous, SET_ASIDE)) && !existsSync(target)) renameSync(previous, target);
  rmSync(join(target, SET_ASIDE), { force: true });
}

// What was to be done is done, or has failed for a reason that matters more.
function removeQuietly(folder: string): void {
  try {
    rmSync(folder, { recursive: true, force: true });
  } catch {
    return;
  }
}

function claim(staging: string): void {
  if (existsSync(staging)) {
    const owner = readOwner(staging);
    if (owner === undefined) {
      throw new Fault('world', {
        code: 'BUSY',
        file: staging,
        message: 'is in the way: it is needed for writing, and holds something else.',
        hint: 'Move it elsewhere.',
      });
    }
    if (owner !== process.pid && isAlive(owner)) {
      throw new Fault('world', {
        code: 'BUSY',
        file: staging,
        message: `process ${owner} is writing this folder.`,
        hint: 'Wait for it, or remove the folder if that process is another program.',
      });
    }
    rmSync(staging, { recursive: true });
  }
  mkdirSync(staging);
  writeFileSync(join(staging, OWNER), `${process.pid}\n`);
}

function readOwner(staging: string): number | undefined {
  try {
    return Number(readFileSync(join(staging, OWNER), 'utf8'));
  } catch {
    return undefined;
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
}
