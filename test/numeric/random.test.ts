import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { nextUp } from '../../src/numeric/neighbours.js';
import { Random } from '../../src/numeric/random.js';

/*
 * The draws are fixed by their seeds, so these tests cannot fail by chance. Bounds on statistics
 * are those that a fair generator exceeds once in ten thousand seeds: 3.9 standard deviations, and
 * the 0.01 % and 99.99 % points of chi-square from its tables.
 */
const SIGMAS = 3.9;
const CHI_SQUARE = {
  7: [0.3, 29.9],
  9: [0.66, 33.7],
  63: [29.5, 113.5],
} as const;

function draw(count: number, next: () => number): number[] {
  return Array.from({ length: count }, next);
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** How far counts are from equal shares. */
function expectEvenCounts(counts: readonly number[], freedom: keyof typeof CHI_SQUARE): void {
  expect(counts).toHaveLength(freedom + 1);
  const share = mean(counts);
  const statistic = counts.reduce((sum, count) => sum + (count - share) ** 2 / share, 0);
  const [least, most] = CHI_SQUARE[freedom];
  expect(statistic).toBeGreaterThan(least);
  expect(statistic).toBeLessThan(most);
}

function counted(values: readonly number[], classes: number, classOf: (value: number) => number) {
  const counts = new Array<number>(classes).fill(0);
  for (const value of values) counts[classOf(value)]! += 1;
  return counts;
}

describe('a stream', () => {
  // Recorded when the generator was written: a change here changes every seeded result.
  test('of seed 42 begins as it always has', () => {
    const random = new Random(42);
    expect(random.uniform()).toBe(0.3598806713269701);
    expect(random.uniform()).toBe(0.5385468291606654);
    expect(random.integer(1, 6)).toBe(1);
    expect(random.integer(-1_000_000, 1_000_000)).toBe(-890384);
    expect(random.between(-2, 5)).toBe(2.3084959358329087);
    expect(random.normal()).toBe(0.1851671652544551);
    expect(random.normal()).toBe(0.84351102364765);
    expect(random.normal()).toBe(0.3546615695983577);
  });

  test.each([
    [0, 0.7922427227993462],
    [-1, 0.2398845050625672],
    [Number.MAX_SAFE_INTEGER, 0.800450140611068],
  ])('of seed %d begins as it always has', (seed, first) => {
    expect(new Random(seed).uniform()).toBe(first);
  });

  test('is the same for the same seed and another for another', () => {
    const seed = fc.maxSafeInteger();
    fc.assert(
      fc.property(seed, seed, (one, other) => {
        const first = draw(4, bound(new Random(one)));
        expect(draw(4, bound(new Random(one)))).toEqual(first);
        if (one !== other) expect(draw(4, bound(new Random(other)))).not.toEqual(first);
      }),
      { seed: 1 },
    );
  });

  test('of one seed tells nothing about that of the next', () => {
    const firsts = Array.from({ length: 64_000 }, (_, seed) => new Random(seed).uniform());
    expectEvenCounts(
      counted(firsts, 64, (value) => Math.floor(value * 64)),
      63,
    );
    expect(Math.abs(correlation(firsts.slice(1), firsts.slice(0, -1)))).toBeLessThan(
      SIGMAS / Math.sqrt(firsts.length),
    );
  });

  test.each([0.5, NaN, Infinity, 2 ** 53])('refuses the seed %d', (seed) => {
    expect(() => new Random(seed)).toThrow(Fault);
  });
});

describe('uniform', () => {
  const values = draw(100_000, bound(new Random(11)));

  test('gives multiples of 2^-53 in [0, 1)', () => {
    const isFair = (value: number) => value >= 0 && value < 1 && Number.isInteger(value * 2 ** 53);
    expect(values.filter((value) => !isFair(value))).toEqual([]);
  });

  test('has mean 1/2 and variance 1/12', () => {
    expect(Math.abs(mean(values) - 1 / 2)).toBeLessThan(SIGMAS * Math.sqrt(1 / 12 / values.length));
    // The fourth central moment is 1/80, so one square has variance 1/80 - 1/144 = 1/180.
    const variance = mean(values.map((value) => (value - 1 / 2) ** 2));
    expect(Math.abs(variance - 1 / 12)).toBeLessThan(SIGMAS * Math.sqrt(1 / 180 / values.length));
  });

  test('fills 64 equal classes evenly', () => {
    expectEvenCounts(
      counted(values, 64, (value) => Math.floor(value * 64)),
      63,
    );
  });

  test('fills the 8 x 8 classes of pairs in sequence evenly', () => {
    const pairs = values.map(
      (value, i) => 8 * Math.floor(8 * value) + Math.floor(8 * (values[i + 1] ?? 0)),
    );
    const apart = pairs.filter((_, i) => i % 2 === 0);
    expectEvenCounts(
      counted(apart, 64, (pair) => pair),
      63,
    );
  });
});

describe('between', () => {
  test('stays in [low, high), even if the two are neighbours', () => {
    const random = new Random(12);
    const finite = fc.double({ min: -1e300, max: 1e300, noNaN: true });
    fc.assert(
      fc.property(finite, finite, (x, y) => {
        const [low, high] = [Math.min(x, y), Math.max(x, y)];
        fc.pre(low < high);
        const value = random.between(low, high);
        expect(value >= low && value < high).toBe(true);
      }),
      { seed: 2 },
    );
    expect(draw(100, () => random.between(1, nextUp(1)))).toEqual(new Array(100).fill(1));
  });

  test('of equal ends gives that end', () => {
    expect(new Random(12).between(3, 3)).toBe(3);
  });

  test.each([
    [1, 0],
    [NaN, 1],
    [0, NaN],
    [0, Infinity],
    [-1e308, 1e308],
  ])('refuses %d to %d', (low, high) => {
    expect(() => new Random(1).between(low, high)).toThrow(Fault);
  });
});

describe('integer', () => {
  test('gives each of ten digits its share', () => {
    const random = new Random(13);
    const digits = draw(50_000, () => random.integer(0, 9));
    expectEvenCounts(
      counted(digits, 10, (digit) => digit),
      9,
    );
  });

  test('stays within any safe ends and reaches both', () => {
    const random = new Random(14);
    fc.assert(
      fc.property(fc.maxSafeInteger(), fc.maxSafeInteger(), (x, y) => {
        const [low, high] = [Math.min(x, y), Math.max(x, y)];
        const value = random.integer(low, high);
        expect(Number.isSafeInteger(value) && value >= low && value <= high).toBe(true);
      }),
      { seed: 3 },
    );
    expect(new Set(draw(100, () => random.integer(-1, 1)))).toEqual(new Set([-1, 0, 1]));
    expect(random.integer(7, 7)).toBe(7);
  });

  test.each([
    [0.5, 2],
    [0, 1.5],
    [2, 1],
    [0, 2 ** 53],
    [NaN, 1],
  ])('refuses %d to %d', (low, high) => {
    expect(() => new Random(1).integer(low, high)).toThrow(Fault);
  });
});

describe('normal', () => {
  const random = new Random(15);
  const values = draw(100_000, () => random.normal());
  const count = values.length;

  test('has mean 0, variance 1, no skew and a fourth moment of 3', () => {
    // Variances of x, x², x³ and x⁴ from the even moments 1, 3, 15, 105.
    expect(Math.abs(mean(values))).toBeLessThan(SIGMAS * Math.sqrt(1 / count));
    expect(Math.abs(mean(values.map((x) => x ** 2)) - 1)).toBeLessThan(
      SIGMAS * Math.sqrt(2 / count),
    );
    expect(Math.abs(mean(values.map((x) => x ** 3)))).toBeLessThan(SIGMAS * Math.sqrt(15 / count));
    expect(Math.abs(mean(values.map((x) => x ** 4)) - 3)).toBeLessThan(
      SIGMAS * Math.sqrt(96 / count),
    );
  });

  test('fills the eight octiles evenly', () => {
    // Quantiles of the standard normal distribution for 1/8 to 7/8, from its tables.
    const octiles = [-1.1503494, -0.6744898, -0.3186394, 0, 0.3186394, 0.6744898, 1.1503494];
    expectEvenCounts(
      counted(values, 8, (x) => octiles.filter((edge) => x > edge).length),
      7,
    );
  });

  test('gives pairs that are not correlated', () => {
    const [even, odd] = [0, 1].map((parity) => values.filter((_, i) => i % 2 === parity));
    expect(Math.abs(correlation(even!, odd!))).toBeLessThan(SIGMAS / Math.sqrt(count / 2));
  });
});

describe('split', () => {
  // Recorded when the generator was written, as above.
  test('gives the child streams of seed 42 that it always has', () => {
    const cloud = new Random(42).split('cloud');
    expect(cloud.split('edge').uniform()).toBe(0.2292664650504197);
    expect(cloud.uniform()).toBe(0.8470431245276766);
    expect(cloud.uniform()).toBe(0.9700458249561037);
    expect(cloud.normal()).toBe(-1.6458850836806809);
  });

  test('depends on the label alone, not on draws, siblings or order', () => {
    fc.assert(
      fc.property(fc.maxSafeInteger(), fc.string(), fc.string(), (seed, label, other) => {
        const expected = draw(4, bound(new Random(seed).split(label)));
        const parent = new Random(seed);
        parent.uniform();
        parent.normal();
        parent.split(other).uniform();
        expect(draw(4, bound(parent.split(label)))).toEqual(expected);
        if (other !== label) expect(draw(4, bound(parent.split(other)))).not.toEqual(expected);
      }),
      { seed: 4 },
    );
  });

  test('leaves the parent stream as it was', () => {
    const parent = new Random(16);
    parent.split('child').uniform();
    expect(draw(4, bound(parent))).toEqual(draw(4, bound(new Random(16))));
  });

  test('keeps apart labels that read the same when joined', () => {
    const root = new Random(17);
    const firsts = [
      root,
      root.split(''),
      root.split('').split(''),
      root.split('ab'),
      root.split('a').split('b'),
      root.split('b').split('a'),
      root.split('ba'),
    ].map((stream) => stream.uniform());
    expect(new Set(firsts).size).toBe(firsts.length);
  });

  test('gives children whose streams are not correlated', () => {
    const count = 10_000;
    const root = new Random(18);
    const streams = [root, ...['a', 'b', 'c', 'aa', '0', '1'].map((label) => root.split(label))];
    const draws = streams.map((stream) => draw(count, bound(stream)));
    for (const [i, one] of draws.entries()) {
      for (const other of draws.slice(i + 1)) {
        expect(Math.abs(correlation(one, other))).toBeLessThan(SIGMAS / Math.sqrt(count));
      }
    }
  });

  test('gives numbered children whose first values spread evenly', () => {
    const root = new Random(19);
    const firsts = Array.from({ length: 64_000 }, (_, i) => root.split(String(i)).uniform());
    expect(new Set(firsts).size).toBe(firsts.length);
    expectEvenCounts(
      counted(firsts, 64, (value) => Math.floor(value * 64)),
      63,
    );
  });
});

function bound(random: Random): () => number {
  return () => random.uniform();
}

function correlation(xs: readonly number[], ys: readonly number[]): number {
  const [meanX, meanY] = [mean(xs), mean(ys)];
  const products = mean(xs.map((x, i) => (x - meanX) * (ys[i]! - meanY)));
  const squares = (values: readonly number[], centre: number) =>
    mean(values.map((value) => (value - centre) ** 2));
  return products / Math.sqrt(squares(xs, meanX) * squares(ys, meanY));
}
