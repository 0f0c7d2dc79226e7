/**
 * One number that stands for a million results of the elementary functions, for engines to be
 * compared by. The arguments are made by integer arithmetic and exact scaling only; none of the
 * results is NaN, whose bits the language leaves open.
 */
import { crc32Portable } from '../../src/numeric/crc32-portable.js';
import { exp, expm1 } from '../../src/numeric/exponential.js';
import { log, log1p } from '../../src/numeric/logarithm.js';
import { POWERS_OF_TWO } from '../../src/numeric/powers-of-two.js';
import { Random } from '../../src/numeric/random.js';

const PER_FUNCTION = 250_000;

/**
 * CRC-32 of the million results as little-endian doubles, recorded when the functions had been
 * held against arbitrary precision. It changes only when a result does: then every golden file
 * has to be made anew.
 */
export const GOLDEN_CHECKSUM = 0xb1f4c5a0;

export function checksumOfAMillionResults(): number {
  let checksum = checksumOfResults(exp, exponents, new Random(1), 0);
  checksum = checksumOfResults(expm1, exponents, new Random(2), checksum);
  checksum = checksumOfResults(log, positives, new Random(3), checksum);
  return checksumOfResults(log1p, aboveMinusOne, new Random(4), checksum);
}

type Arguments = (kind: number, random: Random) => number;

function checksumOfResults(
  f: (x: number) => number,
  argument: Arguments,
  random: Random,
  previous: number,
): number {
  const results = new DataView(new ArrayBuffer(8 * PER_FUNCTION));
  for (let i = 0; i < PER_FUNCTION; i += 1) {
    const result = f(argument(i & 3, random));
    if (Number.isNaN(result)) throw new Error('A NaN has no fixed bits.');
    results.setFloat64(8 * i, result, true);
  }
  return crc32Portable(new Uint8Array(results.buffer), previous);
}

/** From beyond underflow to beyond overflow. */
function exponents(kind: number, random: Random): number {
  switch (kind) {
    case 0:
      return scaled(random.integer(-750 * 2 ** 40, 715 * 2 ** 40), -40);
    case 1:
      return scaled(random.integer(-8 * 2 ** 48, 8 * 2 ** 48), -48);
    case 2:
      return anySign(random, anyMantissa(random, -1022, 9));
    default:
      return random.integer(0, 1) === 0
        ? scaled(random.integer(-746 * 2 ** 40, -707 * 2 ** 40), -40)
        : scaled(random.integer(709 * 2 ** 40, 710 * 2 ** 40), -40);
  }
}

/** Normal numbers of every size, subnormal ones, and the neighbourhood of 1. */
function positives(kind: number, random: Random): number {
  switch (kind) {
    case 0:
      return anyMantissa(random, -1022, 1023);
    case 1:
      return scaled(random.integer(1, 100 * 2 ** 46), -46);
    case 2:
      return 1 + anySign(random, anyMantissa(random, -52, -4));
    default:
      return scaled(random.integer(1, 2 ** 52), -1022) * scaled(1, -52);
  }
}

function aboveMinusOne(kind: number, random: Random): number {
  switch (kind) {
    case 0:
      return anyMantissa(random, -1, 1023);
    case 1:
      return scaled(random.integer(1 - 2 ** 46, 2 ** 50), -46);
    case 2:
      return anySign(random, anyMantissa(random, -1022, -1));
    default:
      return -1 + anyMantissa(random, -53, -1);
  }
}

/** A mantissa of 53 random bits and an exponent from a range. */
function anyMantissa(random: Random, lowest: number, highest: number): number {
  return scaled(scaled(random.integer(2 ** 52, 2 ** 53 - 1), -52), random.integer(lowest, highest));
}

function anySign(random: Random, magnitude: number): number {
  return random.integer(0, 1) === 0 ? magnitude : -magnitude;
}

/** x · 2^exponent, exact as long as the result is normal. */
function scaled(x: number, exponent: number): number {
  return x * POWERS_OF_TWO[exponent + 1023]!;
}
