/** Vector files with damage, for the tests of their readers. */
import { uniformInt } from 'pure-rand/distribution/uniformInt';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { seal } from './image-builder.js';
import { smallCurveSet, smallTimeline } from './small-files.js';

/**
 * Batches of files with 1 to 8 bytes changed, half of them to values that sizes and indexes turn
 * on. In three of four the CRCs match again, so that the deeper checks have to find the damage.
 */
export function* damagedFiles(count: number, seed: number): Generator<Uint8Array[]> {
  const random = xoroshiro128plus(seed);
  const below = (n: number): number => uniformInt(random, 0, n - 1);
  const telling = [0, 1, 2, 3, 4, 7, 8, 16, 32, 48, 0x7f, 0x80, 0xfc, 0xff];
  const originals = [smallCurveSet(), smallTimeline()];
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
