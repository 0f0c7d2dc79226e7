/** Compiles C of the tests with the compiler of the system, if it has one. */
import { execFileSync, spawnSync } from 'node:child_process';
import { accessSync, constants, existsSync, renameSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import {
  cachePath,
  type CProgram,
  defineFlags,
  draftPath,
  fingerprint,
  includeDirs,
  STRICT_FLAGS,
  writeWhole,
} from './c-program.js';

export interface NativeOptions {
  /** Path of a compiler that understands the options of gcc. Default: {@link nativeCompiler}. */
  readonly compiler?: string;
  /** Stop at a read outside an object and at undefined behaviour. Default: false. */
  readonly sanitize?: boolean;
  /** Further flags. */
  readonly flags?: readonly string[];
}

/** Where a program of this name is on the PATH. */
export function findProgram(...names: readonly string[]): string | undefined {
  const folders = (process.env['PATH'] ?? '').split(delimiter).filter((folder) => folder !== '');
  return names.flatMap((name) => folders.map((folder) => join(folder, name))).find(isProgram);
}

/** The C compiler of the system, or undefined: tests that need it are then skipped by name. */
export const nativeCompiler = findProgram('cc', 'gcc', 'clang', 'clang-14');

const SANITIZER_FLAGS = [
  '-g',
  '-O1',
  '-fno-omit-frame-pointer',
  '-fsanitize=address,undefined',
  '-fno-sanitize-recover=all',
];

/** Whether the compiler of the system has the sanitizers, found by a trial. */
export function canSanitize(): boolean {
  if (nativeCompiler === undefined) return false;
  try {
    const source = cachePath('native-cache', 'empty.c');
    writeWhole(source, Buffer.from('int main(void)\n{\n    return 0;\n}\n'));
    return runNative(compileNative({ sources: [source] }, { sanitize: true })).status === 0;
  } catch {
    return false;
  }
}

/**
 * Compiles and links a program under {@link STRICT_FLAGS}.
 *
 * @returns Path of the program. The same program is compiled once and found again.
 * @throws Error with what the compiler said.
 */
export function compileNative(program: CProgram, options: NativeOptions = {}): string {
  const compiler = options.compiler ?? nativeCompiler;
  if (compiler === undefined) throw new Error('This system has no C compiler.');
  const flags = [
    ...STRICT_FLAGS,
    ...(options.sanitize === true ? SANITIZER_FLAGS : ['-O2']),
    ...(options.flags ?? []),
  ];
  const version = execFileSync(compiler, ['--version'], { encoding: 'utf8' });
  const path = cachePath('native-cache', fingerprint(program, `${compiler} ${version}`, flags));
  if (!existsSync(path)) build(program, compiler, flags, path);
  return path;
}

function build(program: CProgram, compiler: string, flags: readonly string[], path: string): void {
  const draft = draftPath(path);
  const run = spawnSync(
    compiler,
    [
      ...flags,
      ...defineFlags(program),
      ...includeDirs(program).map((folder) => `-I${folder}`),
      ...['-o', draft, ...program.sources],
    ],
    { encoding: 'utf8' },
  );
  if (run.status !== 0) throw new Error(`${compiler} refuses the program:\n${run.stderr}`);
  renameSync(draft, path);
}

/** Runs a program to its end. */
export function runNative(
  path: string,
  args: readonly string[] = [],
): { status: number | null; stdout: string; stderr: string } {
  const { status, stdout, stderr } = spawnSync(path, args, { encoding: 'utf8' });
  return { status, stdout, stderr };
}

function isProgram(path: string): boolean {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
