import { crc32 as zlibCrc32 } from 'node:zlib';

/**
 * CRC-32 of IEEE 802.3 (also named ISO-HDLC): polynomial 04C11DB7 reflected, start and final
 * inversion FFFFFFFF. The nine ASCII digits "123456789" give CBF43926, no bytes give 0, and data
 * followed by its own CRC-32, low byte first, give 2144DF1C.
 *
 * Node's native routine; `crc32-portable.ts` gives the same numbers in a browser.
 *
 * @param bytes Any length.
 * @param previous The CRC-32 of the bytes before these, so that long data go in pieces; 0 at the
 * start.
 * @returns An integer from 0 to 2^32 - 1.
 */
export function crc32(bytes: Uint8Array, previous = 0): number {
  return zlibCrc32(bytes, previous);
}
