/**
 * Compiles C of the tests to WebAssembly with the clang that npm installs, so that no machine
 * lacks a C compiler, and with the targets of small processors to check the sources for them.
 */
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { basename, dirname, join } from 'node:path';
import { commands, Exit, runLLVM, type Tree } from '@yowasp/clang';
import {
  cachePath,
  type CProgram,
  defineFlags,
  fingerprint,
  includeDirs,
  readFolders,
  STRICT_FLAGS,
  writeWhole,
} from './c-program.js';
import { wasm, type WasmModule } from './web-assembly.js';

export interface WasmOptions {
  /** Functions to call from outside. Without them the program is one with a main, see runWasi. */
  readonly exports?: readonly string[];
}

/**
 * For tests that compile, in ms: a first compile takes seconds on an idle machine, but a minute on
 * a busy one.
 */
export const COMPILE_TIMEOUT = 300_000;

const LIBRARY_FLAGS = [
  '--target=wasm32',
  '-ffreestanding',
  '-nostdlib',
  '-mbulk-memory',
  '-Wl,--no-entry',
  '-Wl,--export=__heap_base',
  // An overflow of the stack then runs into address 0 and traps, instead of into data.
  '-Wl,--stack-first',
];
const PROGRAM_FLAGS = ['--target=wasm32-wasip1'];

/**
 * Compiles and links a program under {@link STRICT_FLAGS}.
 *
 * @returns The module. The same program is compiled once and found again.
 * @throws Error with what the compiler said.
 */
export async function compileWasm(
  program: CProgram,
  options: WasmOptions = {},
): Promise<WasmModule> {
  const functions = options.exports ?? [];
  const flags = [
    ...STRICT_FLAGS,
    '-O2',
    ...(functions.length > 0 ? LIBRARY_FLAGS : PROGRAM_FLAGS),
    ...functions.map((name) => `-Wl,--export=${name}`),
  ];
  const path = cachePath('wasm-cache', `${fingerprint(program, clangVersion, flags)}.wasm`);
  const kept = readKept(path);
  if (kept !== undefined) return kept;
  const out = (await clang(program, [...flags, '-o', 'out.wasm']))?.['out.wasm'];
  if (!(out instanceof Uint8Array)) throw new Error('clang has written no module.');
  keep(path, out);
  return new wasm.Module(Uint8Array.from(out));
}

/**
 * Checks the sources of a program under {@link STRICT_FLAGS} for a processor, as far as to the
 * types: clang knows the width of its int, whether or not it could write code for it.
 *
 * @param target As clang names it, such as `msp430`.
 * @param more Further flags.
 * @throws Error with what the compiler said.
 */
export async function checkSyntax(
  program: CProgram,
  target: string,
  more: readonly string[] = [],
): Promise<void> {
  const flags = [...STRICT_FLAGS, `--target=${target}`, ...more, '-ffreestanding', '-fsyntax-only'];
  const passed = cachePath('wasm-cache', `${fingerprint(program, clangVersion, flags)}.passed`);
  if (existsSync(passed)) return;
  await clang(program, flags);
  keep(passed, new Uint8Array());
}

// The package does not export its package.json, so it is read beside the file it does export.
const clangEntry = createRequire(import.meta.url).resolve('@yowasp/clang');
const { version } = JSON.parse(
  readFileSync(join(dirname(clangEntry), '..', 'package.json'), 'utf8'),
) as { version: string };
const clangVersion = `@yowasp/clang ${version}`;

async function clang(program: CProgram, flags: readonly string[]): Promise<Tree | undefined> {
  const folders = readFolders(program);
  const names = new Map([...folders.keys()].map((folder, k) => [folder, `folder${k}`]));
  const tree: Tree = Object.fromEntries(
    [...folders].map(([folder, files]) => [names.get(folder)!, Object.fromEntries(files)]),
  );
  const said: Uint8Array[] = [];
  const hear = (bytes: Uint8Array | null): void => {
    if (bytes !== null) said.push(bytes.slice());
  };
  // Without a listener of its own the first use reports its progress on stdout.
  await runLLVM(undefined, {}, { fetchProgress: () => undefined });
  const outcome = await exitOf(() =>
    commands.clang(
      [
        ...flags,
        ...defineFlags(program),
        ...includeDirs(program).map((folder) => `-I${names.get(folder)!}`),
        ...program.sources.map((source) => `${names.get(dirname(source))!}/${basename(source)}`),
      ],
      tree,
      { stdout: hear, stderr: hear },
    ),
  );
  if (!(outcome instanceof Exit)) return outcome;
  const text = Buffer.concat(said).toString('utf8');
  const shown = text.replaceAll(
    /\bfolder(\d+)\//g,
    (_, k) => `${[...folders.keys()][Number(k)]!}/`,
  );
  throw new Error(`clang refuses the program:\n${shown}`);
}

/** What a command of clang gives, its refusal included. */
async function exitOf<T>(command: () => T): Promise<Awaited<T> | Exit> {
  try {
    return await command();
  } catch (error) {
    if (error instanceof Exit) return error;
    throw error;
  }
}

function readKept(path: string): WasmModule | undefined {
  try {
    return existsSync(path) ? new wasm.Module(readFileSync(path)) : undefined;
  } catch {
    return undefined; // A file damaged on disk: compile anew.
  }
}

function keep(path: string, bytes: Uint8Array): void {
  try {
    writeWhole(path, bytes);
  } catch {
    // A project on a read-only disk compiles at every run.
  }
}
