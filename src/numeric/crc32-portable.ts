/** The remainder of each byte, reflected: entry n is n · x^32 modulo the polynomial EDB88320. */
const REMAINDERS = remainders();

/**
 * CRC-32 as in `crc32.ts`, bit for bit, from a table of 256 entries: for places without Node.
 * @param bytes Any length.
 * @param previous The CRC-32 of the bytes before these; 0 at the start.
 * @returns An integer from 0 to 2^32 - 1.
 */
export function crc32Portable(bytes: Uint8Array, previous = 0): number {
  let crc = ~previous;
  for (const byte of bytes) {
    crc = REMAINDERS[(crc ^ byte) & 255]! ^ (crc >>> 8);
  }
  return ~crc >>> 0;
}

function remainders(): Int32Array {
  return Int32Array.from({ length: 256 }, (_, byte) => {
    let remainder = byte;
    for (let bit = 0; bit < 8; bit += 1) {
      remainder = (remainder & 1) === 1 ? (remainder >>> 1) ^ 0xedb88320 : remainder >>> 1;
    }
    return remainder;
  });
}
