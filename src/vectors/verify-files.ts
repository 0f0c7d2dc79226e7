import { createHash } from 'node:crypto';
import { closeSync, existsSync, lstatSync, openSync, readSync } from 'node:fs';
import { join } from 'node:path';
import type { Problem } from '../fault.js';
import { worldFault } from '../file/world-fault.js';
import { listedFiles, MANIFEST_NAME, type Manifest } from './manifest.js';
import { filesBelow } from './suite-folder.js';

/** Every listed file present with its size and SHA-256, and no file that is not listed. */
export function fileProblems(folder: string, manifest: Manifest): Problem[] {
  const listed = listedFiles(manifest);
  const damaged = listed.flatMap(({ path, bytes, sha256 }): Problem[] => {
    const file = join(folder, path);
    if (!existsSync(file)) return [{ code: 'FILE_ABSENT', file, message: 'is listed but absent.' }];
    const found = digest(file);
    if (found === undefined) {
      return [{ code: 'FILE_CHANGED', file, message: 'is not a plain file.' }];
    }
    if (found.bytes !== bytes) {
      const message = `must have ${bytes} bytes, found ${found.bytes}.`;
      return [{ code: 'FILE_CHANGED', file, message }];
    }
    if (found.sha256 === sha256) return [];
    return [{ code: 'FILE_CHANGED', file, message: 'has been changed: the SHA-256 differs.' }];
  });
  const known = new Set([MANIFEST_NAME, ...listed.map(({ path }) => path)]);
  const strangers = filesBelow(folder)
    .filter((path) => !known.has(path))
    .map((path) => ({
      code: 'FILE_UNLISTED',
      file: join(folder, path),
      message: 'is not listed in the manifest.',
    }));
  return [...damaged, ...strangers];
}

function digest(file: string): { readonly bytes: number; readonly sha256: string } | undefined {
  // Neither a folder nor a pipe, which would wait for ever.
  if (!lstatSync(file).isFile()) return undefined;
  const hash = createHash('sha256');
  const piece = Buffer.alloc(PIECE);
  let bytes = 0;
  try {
    const descriptor = openSync(file, 'r');
    try {
      for (let got = -1; got !== 0; bytes += got) {
        got = readSync(descriptor, piece, 0, PIECE, null);
        hash.update(piece.subarray(0, got));
      }
    } finally {
      closeSync(descriptor);
    }
  } catch (error) {
    throw worldFault(error, file);
  }
  return { bytes, sha256: hash.digest('hex') };
}

const PIECE = 1_048_576;
