import { beforeAll, describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { readVectorFile, type VectorFile } from '../../src/vectors/binary-reader.js';
import type { CLibrary } from './c-library.js';
import { HP } from './c-library.js';
import { damagedFiles } from './damaged-files.js';
import { smallCurveSet, smallTimeline, timelineRows, twoCurves } from './small-files.js';
import { COMPILE_TIMEOUT } from './wasm-build.js';
import { openWasmLibrary } from './wasm-port.js';

describe('the reader in TypeScript', () => {
  let library: CLibrary;
  beforeAll(async () => {
    library = await openWasmLibrary();
  }, COMPILE_TIMEOUT);

  test('reads from a file built by hand after the format what was put in', () => {
    expect(codesOf(readVectorFile(smallTimeline(), 'timeline'), 'SAMP')).toEqual(
      // The last column is signed, and was given in the words of its storage.
      timelineRows.map((row) => [...row.slice(0, 4), row[4] | 0]),
    );
    expect(codesOf(readVectorFile(smallCurveSet(), 'curves'), 'POIN')).toEqual(
      twoCurves.curves.flatMap(({ voltage, current }) => voltage.map((v, k) => [v, current[k]])),
    );
  });

  // It refuses more: descriptions of columns that the C library has no use for.
  test('accepts no damaged file that the C library refuses to open or whose CRCs do not match', async () => {
    let accepted = 0;
    for (const batch of damagedFiles(10_000, 43)) {
      for (const file of batch.filter(isAccepted)) {
        const { open, check } = await library.inspect(file);
        expect({ open, damaged: check === HP.SECTION_CRC }).toEqual({
          open: HP.OK,
          damaged: false,
        });
        accepted++;
      }
    }
    expect(accepted).toBeGreaterThan(1000);
  });
});

const codesOf = (file: VectorFile, tag: string): number[][] => {
  const section = file.sections.find((candidate) => candidate.tag === tag)!;
  return Array.from({ length: section.count }, (_, row) =>
    section.columns.map((column) => section.code(column, row)),
  );
};

function isAccepted(file: Uint8Array): boolean {
  try {
    readVectorFile(file, 'damaged');
    return true;
  } catch (error) {
    if (error instanceof Fault) return false;
    throw error;
  }
}
