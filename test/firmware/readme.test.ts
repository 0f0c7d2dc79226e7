import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, describe, expect, test } from 'vitest';
import { HP } from './c-library.js';
import {
  cachePath,
  type CProgram,
  filesIn,
  firmwareFolder,
  libraryIncludeDir,
  librarySources,
  writeWhole,
} from './c-program.js';
import { buildCurveSet } from './image-builder.js';
import { compileNative, findProgram, nativeCompiler, runNative } from './native-build.js';
import { runWasi } from './wasi-run.js';
import { COMPILE_TIMEOUT, compileWasm } from './wasm-build.js';

const readme = readFileSync(join(firmwareFolder, 'README.md'), 'utf8');
const blocks = [...readme.matchAll(/^```c\n(.*?)^```$/gms)].map(([, code]) => code!);

describe('the example of the README', () => {
  const expected = { status: 0, stdout: '1 of 2 curves lost\n-7\n-2\n', stderr: '' };

  test(
    'compiles and runs as WebAssembly, and tells a damaged file',
    { timeout: COMPILE_TIMEOUT },
    async () => {
      expect(runWasi(await compileWasm(exampleProgram()))).toEqual(expected);
    },
  );

  test.skipIf(nativeCompiler === undefined)('compiles and runs natively', () => {
    expect(runNative(compileNative(exampleProgram()))).toEqual(expected);
  });

  test('of a configuration for AVR is the one that the emulated AVR runs', () => {
    const config = join(fileURLToPath(new URL('.', import.meta.url)), 'avr-config.h');
    const directives = (text: string): string[] => text.match(/^#.*$/gm) ?? [];
    expect(directives(blocks[0]!)).toEqual(directives(readFileSync(config, 'utf8')));
  });
});

describe('the tables of the README', () => {
  test('list every error with its number', () => {
    const rows = tableRows(/^HP_/).map(([name, code]) => [
      name!.replace(/^HP_(ERR_)?/, ''),
      Number(code),
    ]);
    expect(Object.fromEntries(rows)).toEqual(HP);
  });

  test('list every source file', () => {
    const names = tableRows(/\.c$/).map(([name]) => name!);
    expect(names.sort()).toEqual(librarySources.map((path) => basename(path)));
  });

  const clang = findProgram('clang-14', 'clang');
  const size = findProgram('llvm-size-14', 'llvm-size');
  const measured =
    clang !== undefined &&
    size !== undefined &&
    execFileSync(clang, ['--version'], { encoding: 'utf8' }).includes('clang version 14.0.6');
  describe.skipIf(!measured)('are what clang 14.0.6 makes:', () => {
    const folder = mkdtempSync(join(tmpdir(), 'hillproof-'));
    afterAll(() => {
      rmSync(folder, { recursive: true });
    });

    test('code', () => {
      const columns = TARGETS.map((target) => compileFor(target, folder).sizes(size!));
      const rows = tableRows(/\.o$/);
      expect(rows).toEqual(
        rows.map(([name]) => [name, ...columns.map((sizes) => String(sizes.get(name!)))]),
      );
      expect(rows.length).toBe(librarySources.length);
    });

    test('stack', () => {
      const frames = TARGETS.slice(0, 2).map((target) => compileFor(target, folder).frames());
      const rows = tableRows(/^hp_\w+$/);
      expect(rows).toEqual(
        Object.entries(DEEPEST).map(([name, calls]) => [
          name,
          ...frames.map((frame) =>
            String([name, ...calls].reduce((sum, callee) => sum + frame.get(callee)!, 0)),
          ),
        ]),
      );
    });
  });

  function compileFor(
    flags: readonly string[],
    folder: string,
  ): {
    sizes: (size: string) => Map<string, number>;
    frames: () => Map<string, number>;
  } {
    const common = ['-std=c99', '-Os', '-ffreestanding', '-fstack-usage', `-I${libraryIncludeDir}`];
    for (const source of librarySources) {
      const object = join(folder, basename(source).replace(/c$/, 'o'));
      execFileSync(clang!, [...common, ...flags, '-c', '-o', object, source]);
    }
    const sizeOf = (size: string, object: string): [string, number] => {
      const [, line] = execFileSync(size, [object], { encoding: 'utf8' }).split('\n');
      return [basename(object), parseInt(line!, 10)];
    };
    return {
      sizes: (size) => new Map(filesIn(folder, /\.o$/).map((object) => sizeOf(size, object))),
      frames: () =>
        new Map(
          filesIn(folder, /\.su$/)
            .flatMap((file) => readFileSync(file, 'utf8').trim().split('\n'))
            .map((line) => line.split(/[:\t]/).slice(-3))
            .map(([name, bytes]) => [name!, Number(bytes)]),
        ),
    };
  }
});

/** Flags for the columns of the table of code sizes, in order. */
const TARGETS = [
  ['--target=thumbv6m-none-eabi'],
  ['--target=riscv32', '-march=rv32imc'],
  ['--target=msp430'],
  ['--target=avr', '-mmcu=atmega328p'],
];

/** The calls below each function where its stack is deepest, read off the sources. */
const DEEPEST: Record<string, readonly string[]> = {
  hp_open: ['hp_find_table', 'hp_table_at'],
  hp_check: ['hp_find_curves', 'hp_find_column', 'hp_find_table', 'hp_table_at'],
  hp_find_curves: ['hp_find_column', 'hp_find_table', 'hp_table_at'],
  hp_find_column: ['hp_find_table', 'hp_table_at'],
  hp_curve_at: ['hp_load_row'],
  hp_curve_current: ['hp_interpolate'],
};

/** Cells of the rows whose first cell is code that matches, without its quotes. */
function tableRows(first: RegExp): string[][] {
  const rows = readme.split('\n').filter((line) => line.startsWith('| `'));
  return rows
    .map((row) =>
      row
        .split('|')
        .slice(1, -1)
        .map((cell) => cell.trim().replaceAll('`', '')),
    )
    .filter(([name]) => first.test(name!));
}

/** The example, a tracker that climbs by one code a step, and a main that prints the verdict. */
function exampleProgram(): CProgram {
  const file = buildCurveSet(
    [
      // One peak; and two, of which a tracker that comes from 0 V finds the lower one.
      { voltage: [0, 200, 300], current: [500, 480, 0], peaks: [1] },
      {
        voltage: [0, 100, 140, 260, 300],
        current: [500, 480, 250, 245, 0],
        peaks: [1, 3],
        globalPeak: 1,
      },
    ],
    { storage: 2, signed: false },
    { storage: 2, signed: false },
  );
  const source = cachePath('readme', 'example.c');
  writeWhole(
    source,
    Buffer.from(`${blocks[1]!}
#include <stdio.h>

uint16_t tracker_step(uint16_t voltage, uint16_t current)
{
    static uint32_t last_power;
    static int upwards = 1;
    const uint32_t power = (uint32_t)voltage * current;

    if (voltage == 0) {
        upwards = 1;
    } else if (power < last_power) {
        upwards = !upwards;
    }
    last_power = power;
    return (uint16_t)(upwards ? voltage + 1 : voltage - 1);
}

int main(void)
{
    static uint8_t file[] = {${file.join(',')}};

    printf("%d of 2 curves lost\\n", (int)tracker_self_test(file, sizeof file));
    file[sizeof file - 1] ^= 1;
    printf("%d\\n", (int)tracker_self_test(file, sizeof file));
    file[0] = 0;
    printf("%d\\n", (int)tracker_self_test(file, sizeof file));
    return 0;
}
`),
  );
  return { sources: [...librarySources, source], includeDirs: [libraryIncludeDir] };
}
