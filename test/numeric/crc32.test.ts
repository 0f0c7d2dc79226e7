import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { crc32 } from '../../src/numeric/crc32.js';
import { crc32Portable } from '../../src/numeric/crc32-portable.js';

const anyBytes = fc.uint8Array({ maxLength: 300 });

describe.each([
  ['crc32', crc32],
  ['crc32Portable', crc32Portable],
])('%s', (_, crc) => {
  test('gives the check value of CRC-32/ISO-HDLC for the digits 1 to 9', () => {
    // The check value that catalogues list for this CRC.
    expect(crc(new TextEncoder().encode('123456789'))).toBe(0xcbf43926);
  });

  test('of nothing is 0', () => {
    expect(crc(new Uint8Array())).toBe(0);
  });

  test('of pieces, each starting from the CRC before, is that of the whole', () => {
    fc.assert(
      fc.property(anyBytes, anyBytes, (head, tail) => {
        const whole = Uint8Array.of(...head, ...tail);
        expect(crc(tail, crc(head))).toBe(crc(whole));
      }),
      { seed: 1 },
    );
  });

  test('of data followed by their CRC, low byte first, is 2144DF1C', () => {
    // The polynomial leaves this constant whatever the data: the final inversion, divided.
    fc.assert(
      fc.property(anyBytes, (data) => {
        const sealed = new Uint8Array(data.length + 4);
        sealed.set(data);
        new DataView(sealed.buffer).setUint32(data.length, crc(data), true);
        expect(crc(sealed)).toBe(0x2144df1c);
      }),
      { seed: 2 },
    );
  });

  test('notices every single wrong bit', () => {
    const data = new TextEncoder().encode('one line of a table');
    const right = crc(data);
    for (let bit = 0; bit < 8 * data.length; bit += 1) {
      const damaged = Uint8Array.from(data);
      damaged[bit >> 3]! ^= 1 << (bit & 7);
      expect(crc(damaged)).not.toBe(right);
    }
  });
});

test('both routines agree on any bytes and any start', () => {
  const anyStart = fc.integer({ min: 0, max: 0xffffffff });
  fc.assert(
    fc.property(anyBytes, anyStart, (bytes, start) => {
      expect(crc32Portable(bytes, start)).toBe(crc32(bytes, start));
    }),
    { seed: 3 },
  );
});
