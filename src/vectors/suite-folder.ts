import { existsSync, readdirSync, readFileSync, realpathSync, statSync } from 'node:fs';
import { isAbsolute, join, relative, resolve, sep } from 'node:path';
import { Fault } from '../fault.js';
import { worldFault } from '../file/world-fault.js';
import { listedFiles, MANIFEST_NAME, parseManifest, type Manifest } from './manifest.js';

/** @throws Fault `NOT_A_SUITE` if there is no manifest, `MANIFEST` if it is not whole. */
export function readManifest(folder: string): Manifest {
  const file = join(folder, MANIFEST_NAME);
  if (!existsSync(file)) {
    const isFolder = existsSync(folder) && statSync(folder).isDirectory();
    throw new Fault(isFolder ? 'check' : 'input', {
      code: 'NOT_A_SUITE',
      file: folder,
      message: isFolder
        ? `holds no ${MANIFEST_NAME}: it is not a suite, or not all of one.`
        : existsSync(folder)
          ? 'is a file; expected the folder of a suite.'
          : 'there is no such folder.',
      hint: 'Build a suite with hillproof emit SUITE --out FOLDER.',
    });
  }
  try {
    return parseManifest(readFileSync(file, 'utf8'), file);
  } catch (error) {
    throw worldFault(error, file);
  }
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
 * A folder is replaced whole, so one that holds anything but a suite is left alone, and so is one
 * around the inputs or the place where the program runs.
 * @param inputs Paths of the input files.
 * @throws Fault `NOT_A_SUITE` naming what is in the way.
 */
export function refuseForeignFolder(folder: string, inputs: readonly string[]): void {
  if (folder === '') {
    throw new Fault('input', {
      code: 'NOT_A_SUITE',
      message: 'the folder to build must have a name, found nothing.',
    });
  }
  for (const path of [process.cwd(), ...inputs.map((file) => resolve(file))]) {
    if (isInside(path, folder)) {
      throw new Fault('input', {
        code: 'NOT_A_SUITE',
        file: folder,
        message: `holds ${path}, and would be replaced whole.`,
        hint: 'Give a folder of its own to the suite, such as --out vectors.',
      });
    }
  }
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
    message: `holds what is not of a suite, such as ${foreign[0]!} (${foreign.length} in all).`,
    hint: 'The folder would be replaced whole: choose an empty one, or clear it first.',
  });
}

function isInside(path: string, folder: string): boolean {
  const way = relative(real(folder), real(path));
  return way === '' || !(isAbsolute(way) || way === '..' || way.startsWith(`..${sep}`));
}

function real(path: string): string {
  try {
    return realpathSync(path);
  } catch {
    return resolve(path);
  }
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
