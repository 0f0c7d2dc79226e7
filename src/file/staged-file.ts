/** One output file: hashed as it is written, so that it is never read back. */
import { createHash } from 'node:crypto';
import { closeSync, fsyncSync, mkdirSync, openSync, writeSync } from 'node:fs';
import { dirname } from 'node:path';
import { worldFault } from './world-fault.js';

/** What was written to one file. */
export interface WrittenFile {
  /** Path inside the folder, with forward slashes. */
  readonly path: string;
  readonly bytes: number;
  readonly sha256: string;
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
