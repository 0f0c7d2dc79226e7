/** The whole way: what emit makes of the demo suite, C code compiled on the spot reads. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { codeCurve, currentCodeAt } from '../../src/table/curve-lookup.js';
import {
  readVectorFile,
  type ReadSection,
  type VectorFile,
} from '../../src/vectors/binary-reader.js';
import { emitSuite } from '../../src/vectors/emit.js';
import { QUANTITIES } from '../../src/vectors/quantity.js';
import { newFolder } from '../new-folder.js';
import { HP, type CLibrary } from './c-library.js';
import type { CProgram } from './c-program.js';
import { compileNative, nativeCompiler, runNative } from './native-build.js';
import { runWasi } from './wasi-run.js';
import { COMPILE_TIMEOUT, compileWasm } from './wasm-build.js';
import { describeEveryWay } from './ways.js';

const suiteFile = fileURLToPath(new URL('../../vectors/demo/suite.yaml', import.meta.url));
const folder = join(newFolder(), 'demo');
emitSuite(suiteFile, folder);

const NAMES = ['demo-roof-curves', 'demo-roof-timeline'];
const bytesOf = (name: string): Uint8Array => readFileSync(join(folder, `${name}.hpv`));
const fileOf = (name: string): VectorFile => readVectorFile(bytesOf(name), name);
const sectionOf = (file: VectorFile, tag: string): ReadSection =>
  file.sections.find((section) => section.tag === tag)!;

function columnCodes(section: ReadSection, index: number): number[] {
  return Array.from({ length: section.count }, (_, row) =>
    section.code(section.columns[index]!, row),
  );
}

describeEveryWay('the C reader', (library) => {
  test.each(NAMES)('accepts the demo file %s', async (name) => {
    expect(await library().open(bytesOf(name))).toBe(HP.OK);
    expect(await library().check()).toBe(HP.OK);
  });

  test.each(NAMES)('reads every code of %s as the reader in TypeScript does', async (name) => {
    await library().open(bytesOf(name));
    let compared = 0;
    for (const section of fileOf(name).sections) {
      for (const [index, column] of section.columns.entries()) {
        const { id } = QUANTITIES[column.quantity!];
        expect((await library().column(section.tag, id, column.group)).result).toBe(HP.OK);
        const rows = Array.from({ length: section.count }, (_, row) => row);
        const words = (await library().read(rows)).map(({ word }) => word);
        expect(words).toEqual(columnCodes(section, index).map((code) => code >>> 0));
        compared += words.length;
      }
    }
    expect(compared).toBeGreaterThan(1000);
  });

  test('looks up every demo curve as the twin does, at every voltage code there is', async () => {
    expect(await everyLookUp(library())).toBe(61_440);
  });
});

/** Compares all curves at all 4,096 codes of the demo's voltage format; counts the look-ups. */
async function everyLookUp(library: CLibrary): Promise<number> {
  const file = fileOf('demo-roof-curves');
  const points = sectionOf(file, 'POIN');
  const [voltage, current] = [columnCodes(points, 0), columnCodes(points, 1)];
  await library.open(bytesOf('demo-roof-curves'));
  const codes = Array.from({ length: 4096 }, (_, code) => code);
  let compared = 0;
  for (let index = 0; index < sectionOf(file, 'CURV').count; index++) {
    const { result, firstPoint, points: count } = await library.curve(index);
    expect(result).toBe(HP.OK);
    const span = [firstPoint!, firstPoint! + count!] as const;
    const twin = codeCurve(
      Uint16Array.from(voltage.slice(...span)),
      Uint16Array.from(current.slice(...span)),
    );
    const found = Array.from(await library.currents(codes));
    expect(found).toEqual(codes.map((code) => currentCodeAt(twin, code)));
    compared += found.length;
  }
  return compared;
}

describe('the C sources of the demo suite', () => {
  // Prints every field of every record, from the arrays alone.
  const program: CProgram = {
    sources: [...NAMES.map((name) => join(folder, `${name}.c`)), printer()],
    includeDirs: [folder],
  };
  const expected = NAMES.flatMap((name) => fileOf(name).sections)
    .flatMap((section) =>
      Array.from({ length: section.count }, (_, row) =>
        section.columns.map((column) => section.code(column, row)).join(' '),
      ),
    )
    .map((line) => `${line}\n`)
    .join('');

  test(
    'compile to WebAssembly and hold the codes of the vector files',
    { timeout: COMPILE_TIMEOUT },
    async () => {
      expect(runWasi(await compileWasm(program))).toEqual({
        status: 0,
        stdout: expected,
        stderr: '',
      });
    },
  );

  test.skipIf(nativeCompiler === undefined)(
    'compile without a warning by the system compiler and hold the codes of the vector files',
    () => {
      expect(runNative(compileNative(program))).toEqual({
        status: 0,
        stdout: expected,
        stderr: '',
      });
    },
  );
});

/** A main file that prints all arrays, one record a line. */
function printer(): string {
  const loops = NAMES.flatMap((name) => {
    const prefix = name.replaceAll('-', '_');
    return fileOf(name).sections.map((section) => {
      const noun = { CURV: 'curve', POIN: 'point', PEAK: 'peak', SAMP: 'sample' }[section.tag]!;
      const fields = section.columns.map(
        (column) => `(long long)${prefix}_${noun}s[row].${column.name}`,
      );
      const format = fields.map(() => '%lld').join(' ');
      const count = `${prefix}_${noun}_count`.toUpperCase();
      return `    for (row = 0u; row < ${count}; row++) {
        printf("${format}\\n", ${fields.join(', ')});
    }`;
    });
  });
  const includes = NAMES.map((name) => `#include "${name}.h"`).join('\n');
  const source = `#include <stdio.h>
${includes}

int main(void)
{
    unsigned long row;
${loops.join('\n')}
    return 0;
}
`;
  const path = join(newFolder(), 'print.c');
  writeFileSync(path, source);
  return path;
}
