import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { HP } from './c-library.js';
import { libraryIncludeDir, librarySources, STRICT_FLAGS } from './c-program.js';
import { canSanitize, compileNative, findProgram } from './native-build.js';
import { driverProgram, openNativeLibrary } from './native-port.js';
import { COMPILE_TIMEOUT } from './wasm-build.js';
import { smallCurveSet } from './small-files.js';

const header = readFileSync(join(libraryIncludeDir, 'hillproof.h'), 'utf8');
const run = (program: string, args: readonly string[]): { status: number | null; said: string } => {
  const { status, stdout, stderr } = spawnSync(program, args, { encoding: 'utf8' });
  return { status, said: stdout + stderr };
};

describe('the C library', { timeout: COMPILE_TIMEOUT }, () => {
  for (const names of [['gcc'], ['clang', 'clang-14']]) {
    const compiler = findProgram(...names);
    test.skipIf(compiler === undefined)(`compiles without a warning: ${names[0]!}`, () => {
      for (const level of ['-O0', '-Os', '-O3']) {
        compileNative(driverProgram, { compiler: compiler!, flags: [level] });
      }
    });
  }

  const cppCompiler = findProgram('g++', 'clang++', 'clang++-14');
  test.skipIf(cppCompiler === undefined)('has a header that C++ takes without a warning', () => {
    const flags = ['-std=c++11', ...STRICT_FLAGS.slice(1), '-x', 'c++', '-fsyntax-only'];
    const found = run(cppCompiler!, [...flags, join(libraryIncludeDir, 'hillproof.h')]);
    // A header given as the main file is no mistake here.
    expect(found.said.replace(/^.*#pragma once in main file.*$/gm, '')).toBe('');
    expect(found.status).toBe(0);
  });

  const cppcheck = findProgram('cppcheck');
  test.skipIf(cppcheck === undefined).each(['unix64', 'avr8'])(
    'gives cppcheck nothing to say for the platform %s',
    (platform) => {
      const found = run(cppcheck!, [
        ...['--enable=all', '--inconclusive', '--error-exitcode=1', '--quiet', '--std=c99'],
        // The library calls no function of its own that only firmware needs.
        ...['--suppress=unusedFunction', '--suppress=missingIncludeSystem', '-UHP_CONFIG'],
        ...[`--platform=${platform}`, `-I${libraryIncludeDir}`, ...librarySources],
      ]);
      expect(found).toEqual({ status: 0, said: '' });
    },
  );

  const clangTidy = findProgram('clang-tidy', 'clang-tidy-14');
  test.skipIf(clangTidy === undefined)(
    'gives clang-tidy nothing to say where an int has 16 bits',
    () => {
      // Of the families below, only what asks for names of parameters that cannot be swapped.
      const checks = '-*,bugprone-*,cert-*,clang-analyzer-*,-bugprone-easily-swappable-parameters';
      const flags = ['--target=msp430', '-ffreestanding', '-std=c99', `-I${libraryIncludeDir}`];
      const found = run(clangTidy!, [
        ...['--quiet', `--checks=${checks}`, '--warnings-as-errors=*', ...librarySources],
        ...['--', ...flags],
      ]);
      expect(found.said.split('\n').filter((line) => /: (warning|error):/.test(line))).toEqual([]);
      expect(found.status).toBe(0);
    },
  );

  const compiler = findProgram('gcc');
  const nm = findProgram('nm');
  test.skipIf(compiler === undefined || nm === undefined)(
    'has no variable, calls nothing from outside, and names all it shows hp_',
    () => {
      const object = compileNative(
        { sources: librarySources, includeDirs: [libraryIncludeDir] },
        // Joined into one object, so that calls from file to file are inside.
        { compiler: compiler!, flags: ['-r', '-nostdlib', '-ffreestanding', '-fno-pic'] },
      );
      const symbols = run(nm!, [object]).said.trim().split('\n');
      const kinds = symbols.map(
        (line) => /^[0-9a-f ]{16} (?<kind>.) (?<name>.*)$/.exec(line)!.groups!,
      );
      const shown = kinds.filter(({ kind }) => kind === 'T').map(({ name }) => name!);
      expect(kinds.filter(({ kind }) => !/[Ttr]/.test(kind!))).toEqual([]);
      expect(shown.filter((name) => !name.startsWith('hp_'))).toEqual([]);
      expect(shown.length).toBeGreaterThan(10);
    },
  );

  test('names every macro and every constant HP_ and every type and function hp_', () => {
    const code = header.replaceAll(/\/\*.*?\*\//gs, '');
    const macros = [...code.matchAll(/^#define (\w+)/gm)].map(([, name]) => name!);
    const types = [...code.matchAll(/\b(?:struct|enum) (\w+)/g)].map(([, name]) => name!);
    const functions = [...code.matchAll(/^\w[\w ]* \*?(\w+)\(/gm)].map(([, name]) => name!);
    expect(functions).toContain('hp_curve_current');
    expect(macros.filter((name) => !/^(HP_|HILLPROOF_H$)/.test(name))).toEqual([]);
    expect([...types, ...functions].filter((name) => !name.startsWith('hp_'))).toEqual([]);
  });

  test('numbers its errors as these tests know them', () => {
    const listed = [...header.matchAll(/^ {4}HP_(?:ERR_)?(\w+) = (0|-\d+)\b/gm)];
    expect(Object.fromEntries(listed.map(([, name, code]) => [name, Number(code)]))).toEqual(HP);
  });

  test.skipIf(!canSanitize())('reads every byte of a file through HP_LOAD_BYTE', async () => {
    const plain = openNativeLibrary();
    // The driver stores each byte as b ^ A5, and the configured load undoes it.
    const scrambled = openNativeLibrary({ HP_CONFIG: '"scramble.h"', PROBE_SCRAMBLE: '0xA5U' });
    const expected = await plain.inspect(smallCurveSet());
    expect(await scrambled.inspect(smallCurveSet())).toEqual(expected);
    expect(expected).toMatchObject({ open: HP.OK, check: HP.OK });
    await Promise.all([plain.close(), scrambled.close()]);
  });
});
