import { beforeAll, expect, test } from 'vitest';
import type { CLibrary } from './c-library.js';
import { HP } from './c-library.js';
import { damagedFiles } from './damaged-files.js';
import { smallCurveSet, smallTimeline } from './small-files.js';
import { COMPILE_TIMEOUT } from './wasm-build.js';
import { describeEveryWay } from './ways.js';
import { openWasmLibrary } from './wasm-port.js';

const files = { 'a curve set': smallCurveSet(), 'a timeline': smallTimeline() };

let reference: CLibrary;
beforeAll(async () => {
  reference = await openWasmLibrary();
}, COMPILE_TIMEOUT);

describeEveryWay('the reader', (library) => {
  for (const [name, file] of Object.entries(files)) {
    test(`accepts ${name} as it was written`, async () => {
      expect(await library().inspect(file)).toMatchObject({ open: HP.OK, check: HP.OK });
    });

    test(`refuses ${name} cut at any length`, async () => {
      const cuts = Array.from({ length: file.length }, (_, length) => file.subarray(0, length));
      const opened = await Promise.all(cuts.map((cut) => library().open(cut)));
      expect(opened.map((result) => result === HP.LENGTH)).not.toContain(false);
    });

    test(`refuses ${name} with bytes behind its end`, async () => {
      const longer = [1, 4, 1000].map((more) => Buffer.concat([file, Buffer.alloc(more)]));
      expect(await Promise.all(longer.map((bytes) => library().open(bytes)))).toEqual(
        longer.map(() => HP.LENGTH),
      );
    });

    test(`refuses ${name} with any one byte changed`, async () => {
      const damaged = [0x01, 0x80, 0xff].flatMap((mask) => flips(file, mask));
      const found = await Promise.all(damaged.map((bytes) => library().inspect(bytes)));
      expect(found.filter(({ open, check }) => open === HP.OK && check === HP.OK)).toEqual([]);
    });
  }

  test('reads nothing outside 10 000 damaged files, and answers what WebAssembly answers', async () => {
    for (const batch of damagedFiles(10_000, 42)) {
      const [found, expected] = await Promise.all([
        inspectAll(library(), batch),
        inspectAll(reference, batch),
      ]);
      expect(found).toEqual(expected);
    }
  });
});

test('the damaged files reach every check of the reader', async () => {
  const reached = new Set<number>();
  for (const batch of damagedFiles(10_000, 42)) {
    for (const { open, check } of await inspectAll(reference, batch)) reached.add(open || check);
  }
  expect([...reached].sort((a, b) => b - a)).toEqual(VERDICTS);
});

/** What hp_open and hp_check return between them, as `enum hp_result` lists it. */
const VERDICTS: readonly number[] = [
  ...[HP.OK, HP.LENGTH, HP.MAGIC, HP.VERSION, HP.HEADER_CRC, HP.DIRECTORY],
  ...[HP.CHANNEL, HP.SECTION_CRC, HP.NOT_FOUND, HP.INDEX, HP.ORDER],
];

const inspectAll = (
  library: CLibrary,
  batch: readonly Uint8Array[],
): Promise<{ open: number; check: number; walk: number }[]> =>
  Promise.all(batch.map((file) => library.inspect(file)));

const flips = (file: Uint8Array, mask: number): Uint8Array[] =>
  Array.from(file, (_, at) => {
    const copy = Uint8Array.from(file);
    copy[at]! ^= mask;
    return copy;
  });
