import { uniformInt } from 'pure-rand/distribution/uniformInt';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { expect, test } from 'vitest';
import type { CLibrary } from './c-library.js';
import { HP } from './c-library.js';
import { seal } from './image-builder.js';
import { smallCurveSet, smallTimeline } from './small-files.js';
import { describeEveryWay } from './ways.js';
import { openWasmLibrary } from './wasm-port.js';

const files = { 'a curve set': smallCurveSet(), 'a timeline': smallTimeline() };

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
    const reference = await openWasmLibrary();
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
  const library = await openWasmLibrary();
  const reached = new Set<number>();
  for (const batch of damagedFiles(10_000, 42)) {
    for (const { open, check } of await inspectAll(library, batch)) reached.add(open || check);
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

/**
 * Batches of files with 1 to 8 bytes changed, half of them to values that sizes and indexes turn
 * on. In three of four the CRCs match again, so that the deeper checks have to find the damage.
 */
function* damagedFiles(count: number, seed: number): Generator<Uint8Array[]> {
  const random = xoroshiro128plus(seed);
  const below = (n: number): number => uniformInt(random, 0, n - 1);
  const telling = [0, 1, 2, 3, 4, 7, 8, 16, 32, 48, 0x7f, 0x80, 0xfc, 0xff];
  const originals = Object.values(files);
  for (let done = 0; done < count; done += 500) {
    yield Array.from({ length: 500 }, () => {
      const copy = Uint8Array.from(originals[below(3) === 0 ? 1 : 0]!);
      for (let left = 1 + below(8); left > 0; left--) {
        // Behind the fields that are compared with a constant, mostly.
        const at = below(16) === 0 ? below(copy.length) : 12 + below(copy.length - 12);
        copy[at] = below(2) === 0 ? telling[below(telling.length)]! : below(256);
      }
      return below(4) === 0 ? copy : seal(copy);
    });
  }
}
