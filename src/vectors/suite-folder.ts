import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join, relative, sep } from 'node:path';
import { Fault } from '../fault.js';
import { worldFault } from '../file/world-fault.js';
import { listedFiles, MANIFEST_NAME, parseManifest, type Manifest } from './manifest.js';

/** @throws Fault `NOT_A_SUITE` if there is no manifest, `MANIFEST` if it is not whole. */
export function readManifest(folder: string): Manifest {
  const file = join(folder, MANIFEST_NAME);
  if (!existsSync(file)) {
    throw new Fault('check', {
      code: 'NOT_A_SUITE',
      file: folder,
      message: existsSync(folder)
        ? `holds no ${MANIFEST_NAME}: it is not a suite, or not all of one.`
        : 'there is no such folder.',
      hint: 'Build it with hillproof emit.',
    });
  }
  return parseManifest(readFileSync(file, 'utf8'), file);
}

/** Every file below a folder, as sorted paths with forward slashes. */
export function filesBelow(folder: string): string[] {
  try {
    return readdirSync(folder, { recursive: true, withFileTypes: true })
      .filter((entry) => !entry.isDirectory())
      .map((entry) => relative(folder, join(entry.parentPath, entry.name)).split(sep).join('/'))
      .sort();
  } catch (error) {
    throw worldFault(error, folder);
  }
}

/**
 * A folder is replaced whole, so one that holds anything but a suite is left alone.
 * @throws Fault `NOT_A_SUITE` naming what is in the way.
 */
export function refuseForeignFolder(folder: string): void {
  if (!existsSync(folder)) return;
  if (!statSync(folder).isDirectory()) {
    throw new Fault('input', {
      code: 'NOT_A_SUITE',
      file: folder,
      message: 'is a file; a suite is written to a folder.',
    });
  }
  const present = filesBelow(folder);
  if (present.length === 0) return;
  const own = ownFiles(folder);
  const foreign = present.filter((path) => !own.has(path));
  if (foreign.length === 0) return;
  throw new Fault('input', {
    code: 'NOT_A_SUITE',
    file: folder,
    message: `holds ${foreign.length} files that are not of a suite, such as ${foreign[0]!}.`,
    hint: 'The folder would be replaced whole: choose an empty one, or clear it first.',
  });
}

function ownFiles(folder: string): ReadonlySet<string> {
  try {
    const manifest = readManifest(folder);
    return new Set([MANIFEST_NAME, ...listedFiles(manifest).map(({ path }) => path)]);
  } catch (error) {
    if (error instanceof Fault) return new Set();
    throw error;
  }
}
