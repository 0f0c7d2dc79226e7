/**
 * What a C program of the tests is made of, and its fingerprint, by which compiled programs are
 * kept from one run to the next.
 */
import { createHash } from 'node:crypto';
import { mkdirSync, readFileSync, readdirSync, renameSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { threadId } from 'node:worker_threads';

export interface CProgram {
  /** Paths of C files. Headers beside them are found. */
  readonly sources: readonly string[];
  /** Folders of headers. */
  readonly includeDirs?: readonly string[];
  /** Macros and their values. */
  readonly defines?: Readonly<Record<string, string>>;
}

const root = fileURLToPath(new URL('../../', import.meta.url));

/** The folder `firmware-fixtures/` of the project. */
export const firmwareFolder = join(root, 'firmware-fixtures');

/** The firmware library: every C file of it, and the folder of its header. */
export const librarySources = filesIn(join(firmwareFolder, 'src'), /\.c$/);
export const libraryIncludeDir = join(firmwareFolder, 'include');

/** The library behind the probe, without a main. */
export const probeProgram: CProgram = {
  sources: [...librarySources, join(root, 'test/firmware/probe.c')],
  includeDirs: [libraryIncludeDir],
};

/** The flags that all C of the project compiles under. */
export const STRICT_FLAGS = [
  '-std=c99',
  '-Wall',
  '-Wextra',
  '-Wpedantic',
  '-Wconversion',
  '-Wsign-conversion',
  '-Werror',
] as const;

/** Files of a folder whose name matches, in order of name, as paths. */
export function filesIn(folder: string, pattern: RegExp): string[] {
  const names = readdirSync(folder).filter((name) => pattern.test(name));
  return names.sort().map((name) => join(folder, name));
}

/** The C files and headers that a program can see, by folder; folders in order of mention. */
export function readFolders(program: CProgram): Map<string, Map<string, string>> {
  const folders = [...program.sources.map((source) => dirname(source)), ...includeDirs(program)];
  return new Map(
    [...new Set(folders)].map((folder) => [
      folder,
      new Map(
        filesIn(folder, /\.[ch]$/).map((path) => [basename(path), readFileSync(path, 'utf8')]),
      ),
    ]),
  );
}

export function includeDirs(program: CProgram): readonly string[] {
  return program.includeDirs ?? [];
}

export function defineFlags(program: CProgram): string[] {
  return Object.entries(program.defines ?? {}).map(([name, value]) => `-D${name}=${value}`);
}

/** SHA-256 of everything that decides what a compiler makes of a program. */
export function fingerprint(program: CProgram, compiler: string, flags: readonly string[]): string {
  const folders = [...readFolders(program)].map(([folder, files]) => [folder, [...files]]);
  const all = { compiler, flags, sources: program.sources, defines: defineFlags(program), folders };
  return createHash('sha256').update(JSON.stringify(all)).digest('hex');
}

/** Where a compiled program is kept: a file below `build/`, which git ignores. */
export function cachePath(kind: string, name: string): string {
  return join(root, 'build', kind, name);
}

/** Writes a file: another process sees the whole of it or none. */
export function writeWhole(path: string, bytes: Uint8Array): void {
  const draft = draftPath(path);
  writeFileSync(draft, bytes);
  renameSync(draft, path);
}

/** A name beside a file that only this process uses, for a draft that is then moved into place. */
export function draftPath(path: string): string {
  mkdirSync(dirname(path), { recursive: true });
  return `${path}.${process.pid}.${threadId}.${drafts++}`;
}
let drafts = 0;
