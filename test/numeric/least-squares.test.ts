import { Decimal } from 'decimal.js';
import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { exp } from '../../src/numeric/exponential.js';
import { leastSquares } from '../../src/numeric/least-squares.js';
import type { LeastSquaresProblem } from '../../src/numeric/least-squares-problem.js';
import { Random } from '../../src/numeric/random.js';

/**
 * A cosine of 1e-14 counts as a right angle; times residuals about 2 long, over derivatives that
 * are at least 1 long.
 */
const SLANT = 2e-14;

/** Each residual with its derivatives. */
type Row = (p: Float64Array) => readonly [residual: number, ...derivatives: number[]];

const problem = (...rows: Row[]): LeastSquaresProblem => ({
  residualCount: rows.length,
  residuals: (p, into) => {
    into.set(rows.map((row) => row(p)[0]));
  },
  jacobian: (p, into) => {
    into.set(rows.flatMap((row) => row(p).slice(1)));
  },
});

/** y = exp(k x) at x = 0.5, 1, 1.5, 2 with values off by up to 0.6: a minimum far from zero. */
const GROWTH: readonly (readonly [x: number, y: number])[] = [
  [0.5, 1.75],
  [1, 1.5],
  [1.5, 4],
  [2, 6.25],
];
const growth = problem(...GROWTH.map(([x, y]): Row => ([k]) => [exp(k! * x) - y, x * exp(k! * x)]));

/** The root of d/dk Σ (exp(k x) - y)² to 40 digits, by bisection. */
function exactGrowth(): Decimal {
  const D = Decimal.clone({ precision: 50 });
  const slope = (k: Decimal): Decimal =>
    GROWTH.reduce((sum, [x, y]) => {
      const value = k.times(x).exp();
      return sum.plus(value.minus(y).times(value).times(x));
    }, new D(0));
  let [low, high] = [new D(0), new D(2)];
  for (let pass = 0; pass < 140; pass++) {
    const middle = low.plus(high).div(2);
    if (slope(middle).isNegative()) low = middle;
    else high = middle;
  }
  return low;
}

describe('A search without bounds', () => {
  test('solves a linear problem whose solution is a fraction', () => {
    // Normal equations by hand: y = 1, 2, 2 at x = 0, 1, 2 gives 7/6 + x/2.
    const line = [1, 2, 2].map((y, x): Row => ([a, b]) => [a! + b! * x - y, 1, x]);
    const { parameters, isSolution, sumOfSquares } = leastSquares(problem(...line), [40, -7]);
    expect(isSolution).toBe(true);
    expect(parameters[0]).toBeCloseTo(7 / 6, 14);
    expect(parameters[1]).toBeCloseTo(1 / 2, 14);
    expect(sumOfSquares).toBeCloseTo(1 / 6, 14);
  });

  test('walks the bent valley of H. H. Rosenbrock (Computer Journal 3, 1960) to its end', () => {
    const valley = problem(
      ([x, y]) => [10 * (y! - x! * x!), -20 * x!, 10],
      ([x]) => [1 - x!, -1, 0],
    );
    const { parameters, isSolution } = leastSquares(valley, [-1.2, 1]);
    expect(isSolution).toBe(true);
    expect(parameters[0]).toBeCloseTo(1, 14);
    expect(parameters[1]).toBeCloseTo(1, 14);
  });

  test('finds a minimum far from zero to the last digits, not only to their half', () => {
    const { parameters, end } = leastSquares(growth, [0]);
    expect(['stationary', 'rounding']).toContain(end);
    const miss = exactGrowth().minus(new Decimal(parameters[0]!)).abs().toNumber();
    expect(miss).toBeLessThan(SLANT);
  });

  test('survives steps to where the residuals are not finite', () => {
    // log-like wall: the residual is out of reach for p <= 0.
    const wall = problem(([p]) => [p! > 0 ? p! - 1 / p! : NaN, 1 + 1 / (p! * p!)]);
    for (const start of [1e-6, 0.3, 50]) {
      expect(leastSquares(wall, [start]).parameters[0]).toBeCloseTo(1, 13);
    }
  });

  test('settles where there are more parameters than residuals', () => {
    const one = problem(([x, y]) => [x! + 2 * y! - 5, 1, 2]);
    const { parameters, isSolution } = leastSquares(one, [0, 0]);
    expect(isSolution).toBe(true);
    expect(parameters[0]! + 2 * parameters[1]!).toBeCloseTo(5, 13);
  });

  test('gives the same bits every time', () => {
    const [a, b] = [leastSquares(growth, [3]), leastSquares(growth, [3])];
    expect(a).toEqual(b);
  });
});

describe('A search in a box', () => {
  const twoLines = problem(
    ([x, y]) => [x! + y! - 3, 1, 1],
    ([x, y]) => [x! - y! - 1, 1, -1],
  );

  test('moves along a bound to the best point on it', () => {
    // Unbounded: (2, 1). With x held at 1: (y - 2)² + y² is least at y = 1.
    const { parameters, held } = leastSquares(twoLines, [0, 5], { upper: [1, Infinity] });
    expect(parameters[0]).toBe(1);
    expect(Math.abs(parameters[1]! - 1)).toBeLessThan(SLANT);
    expect(held).toEqual([true, false]);
  });

  test('ends in a corner where both bounds hold', () => {
    const { parameters, held, end } = leastSquares(twoLines, [0, 0], { upper: [1, 0.5] });
    expect([...parameters]).toEqual([1, 0.5]);
    expect(held).toEqual([true, true]);
    expect(end).toBe('stationary');
  });

  test('leaves a bound that it started at if the slope points inside', () => {
    const { parameters, held } = leastSquares(twoLines, [0, 0], { lower: [0, 0] });
    expect(parameters[0]).toBeCloseTo(2, 14);
    expect(parameters[1]).toBeCloseTo(1, 14);
    expect(held).toEqual([false, false]);
  });

  test('brings a start outside into the box, and fixes a parameter whose bounds are equal', () => {
    const { parameters } = leastSquares(twoLines, [9, 9], { lower: [0.5, 0], upper: [0.5, 9] });
    expect(parameters[0]).toBe(0.5);
    // (y - 2.5)² + (y + 0.5)²
    expect(Math.abs(parameters[1]! - 1)).toBeLessThan(SLANT);
  });

  test('ends at a point with no way down, for random problems', () => {
    const random = new Random(5);
    for (let run = 0; run < 300; run++) {
      const n = random.integer(1, 5);
      const rows = Array.from({ length: random.integer(n, 9) }, (): Row => {
        const c = Array.from({ length: n }, () => random.normal());
        const target = random.normal();
        return (p) => {
          const s = c.reduce((sum, share, j) => sum + share * p[j]!, 0);
          return [exp(0.3 * s) - target, ...c.map((share) => 0.3 * share * exp(0.3 * s))];
        };
      });
      const lower = Array.from({ length: n }, () => random.between(-2, 0));
      const upper = lower.map((low) => low + random.between(0, 2));
      const result = leastSquares(problem(...rows), lower, { lower, upper, iterationLimit: 2000 });
      expect(result.isSolution, `${run}: ${result.end}`).toBe(true);
      // Free directions stand at right angles to the residuals, held ones point outwards.
      expect(result.cosine).toBeLessThan(1e-7);
      result.held.forEach((isHeld, j) => {
        const slope = rows.reduce((sum, _, i) => {
          return sum + result.jacobian[i * n + j]! * result.residuals[i]!;
        }, 0);
        if (!isHeld) return;
        expect(result.parameters[j] === lower[j] ? slope >= 0 : slope <= 0).toBe(true);
      });
    }
  });
});

describe('A search that finds no solution says how it ended', () => {
  test('iteration-limit, with the best so far', () => {
    const { end, isSolution, iterations, sumOfSquares } = leastSquares(growth, [3], {
      iterationLimit: 3,
    });
    expect([end, isSolution, iterations]).toEqual(['iteration-limit', false, 3]);
    expect(sumOfSquares).toBeLessThan(
      leastSquares(growth, [3], { iterationLimit: 1 }).sumOfSquares,
    );
  });

  test('not-a-number, at a start out of reach', () => {
    expect(
      leastSquares(
        problem(() => [NaN, 1]),
        [0],
      ).end,
    ).toBe('not-a-number');
    expect(
      leastSquares(
        problem(() => [1, NaN]),
        [0],
      ).end,
    ).toBe('not-a-number');
  });

  test('stuck, where the derivative has the wrong sign', () => {
    expect(
      leastSquares(
        problem(([x]) => [x! - 1, -1]),
        [0],
      ).end,
    ).toBe('stuck');
  });
});

describe('Arguments that make no sense are refused by name', () => {
  const one = problem(([x]) => [x! - 1, 1]);

  test.each([
    ['no parameters', () => leastSquares(one, []), 'start'],
    ['bounds of another number', () => leastSquares(one, [0], { lower: [0, 0] }), 'lower'],
    ['bounds that cross', () => leastSquares(one, [0], { lower: [1], upper: [0] }), 'upper[0]'],
    ['no residuals', () => leastSquares({ ...one, residualCount: 0 }, [0]), 'residualCount'],
  ])('%s', (_, action, field) => {
    try {
      action();
      expect.unreachable();
    } catch (error) {
      expect((error as Fault).problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    }
  });
});
