import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { uniformInt } from 'pure-rand/distribution/uniformInt';
import { xoroshiro128plusFromState } from 'pure-rand/generator/xoroshiro128plus';
import { argumentFault } from '../fault.js';
import { log } from './logarithm.js';

/** The first 128 bits of the fraction of pi: a start that nobody chose. */
const PI_FRACTION = [0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344] as const;
/** Outside the range of UTF-16 code units, so no label can imitate it. */
const END_OF_LABEL = 0x10000;

type Key = readonly [number, number, number, number];

/**
 * A stream of random numbers that a seed determines for ever: the same on every machine.
 *
 * The generator is xoroshiro128+ (D. Blackman and S. Vigna, ACM TOMS 47, 2021). A stream is named
 * by a key of 128 bits. The seed gives the first key; a parent's key and a label give a child's,
 * whatever either stream has already drawn. A key comes from its input by absorbing 32-bit words,
 * one after the other; see `absorb`.
 *
 * @example new Random(7).split('wind').uniform() // unaffected by new Random(7).split('cloud')
 */
export class Random {
  readonly #key: Key;
  readonly #generator: ReturnType<typeof xoroshiro128plusFromState>;
  #spare = NaN;

  /**
   * @param seed An integer from -(2^53 - 1) to 2^53 - 1; streams split off pass their key.
   * @throws Fault ARGUMENT.
   */
  constructor(seed: number | Key) {
    this.#key = typeof seed === 'number' ? keyOfSeed(seed) : seed;
    const [a, b, c, d] = this.#key;
    // A state of zeros would stay there.
    this.#generator = xoroshiro128plusFromState([a, b, c, d === 0 ? 1 : d]);
  }

  /** A multiple of 2^-53 in [0, 1), each with the same chance. */
  uniform(): number {
    return uniformFloat64(this.#generator);
  }

  /**
   * A number in [low, high), spread evenly; low itself if both are equal.
   * @throws Fault ARGUMENT unless low <= high and their difference is finite.
   */
  between(low: number, high: number): number {
    const width = high - low;
    if (!(width >= 0 && width < Infinity)) {
      throw argumentFault('high', `a finite number of at least ${low}`, high);
    }
    const value = low + width * this.uniform();
    // The sum may round up to high, which is outside.
    return value < high ? value : low;
  }

  /**
   * An integer from low to high, both included, each with exactly the same chance.
   * @throws Fault ARGUMENT unless both are safe integers and low <= high.
   */
  integer(low: number, high: number): number {
    if (!Number.isSafeInteger(low)) throw argumentFault('low', 'a safe integer', low);
    if (!Number.isSafeInteger(high) || high < low) {
      throw argumentFault('high', `a safe integer of at least ${low}`, high);
    }
    return uniformInt(this.#generator, low, high);
  }

  /**
   * A normally distributed number of mean 0 and standard deviation 1, by the polar method of
   * Marsaglia and Bray (SIAM Review 6, 1964, 260-264), which needs no sine. No result exceeds 12.1
   * in magnitude, because uniform numbers are multiples of 2^-53.
   */
  normal(): number {
    const spare = this.#spare;
    if (!Number.isNaN(spare)) {
      this.#spare = NaN;
      return spare;
    }
    // Each round succeeds with a chance of pi/4.
    for (;;) {
      const x = 2 * this.uniform() - 1;
      const y = 2 * this.uniform() - 1;
      const square = x * x + y * y;
      if (square < 1 && square > 0) {
        const stretch = Math.sqrt((-2 * log(square)) / square);
        this.#spare = y * stretch;
        return x * stretch;
      }
    }
  }

  /**
   * The child stream of that name. It depends on this stream's seed and labels alone: not on what
   * was drawn from it, nor on what else was split off.
   */
  split(label: string): Random {
    let key = this.#key;
    for (let i = 0; i < label.length; i += 1) key = absorb(key, label.charCodeAt(i));
    return new Random(absorb(key, END_OF_LABEL));
  }
}

function keyOfSeed(seed: number): Key {
  if (!Number.isSafeInteger(seed)) throw argumentFault('seed', 'a safe integer', seed);
  // Low and high 32 bits of the seed in two's complement.
  return absorb(absorb(PI_FRACTION, seed | 0), Math.floor(seed / 0x100000000));
}

/**
 * The next key: each quarter of it depends on the word and on all four quarters of the last one,
 * and different keys stay different under the same word.
 */
function absorb([a, b, c, d]: Key, word: number): Key {
  const nextA = scrambled((a ^ word) + d);
  const nextB = scrambled(b + nextA);
  const nextC = scrambled(c + nextB);
  return [nextA, nextB, nextC, scrambled(d + nextC)];
}

/** The finaliser of MurmurHash3 (A. Appleby, public domain), a one-to-one map of 32-bit words. */
function scrambled(word: number): number {
  let h = word;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return h ^ (h >>> 16);
}
