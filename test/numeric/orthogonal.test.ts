import { describe, expect, test } from 'vitest';
import { reduceToTriangle, solveTriangle } from '../../src/numeric/orthogonal.js';
import { Random } from '../../src/numeric/random.js';

describe('reduceToTriangle', () => {
  test('solves a square system whose solution is known', () => {
    // By hand: 2x + y = 5, x - 3y = -1.
    const a = Float64Array.of(2, 1, 1, -3);
    const b = Float64Array.of(5, -1);
    reduceToTriangle(a, 2, 2, b);
    const [x, y] = solveTriangle(a, 2, b);
    expect(x).toBeCloseTo(2, 14);
    expect(y).toBeCloseTo(1, 14);
  });

  test('keeps the length of every column and of the right-hand side', () => {
    const random = new Random(1);
    for (let run = 0; run < 200; run++) {
      const rows = random.integer(1, 12);
      const columns = random.integer(1, 6);
      const a = Float64Array.from({ length: rows * columns }, () => random.normal());
      const b = Float64Array.from({ length: rows }, () => random.normal());
      const lengths = (m: Float64Array, width: number): number[] =>
        Array.from({ length: width }, (_, j) =>
          Math.sqrt(m.reduce((sum, x, at) => (at % width === j ? sum + x * x : sum), 0)),
        );
      const before = [...lengths(a, columns), ...lengths(b, 1)];
      reduceToTriangle(a, rows, columns, b);
      const after = [...lengths(a, columns), ...lengths(b, 1)];
      // Each reflection rounds a few times per entry; columns are about 3 long.
      after.forEach((length, index) => {
        expect(Math.abs(length - before[index]!)).toBeLessThan(1e-14);
      });
    }
  });

  test('leaves zeros below the diagonal, and survives a column of zeros', () => {
    const a = Float64Array.of(0, 1, 0, 2, 0, 3);
    const b = Float64Array.of(1, 1, 1);
    reduceToTriangle(a, 3, 2, b);
    expect([a[0], a[2], a[4], a[5]]).toEqual([0, 0, 0, 0]);
    expect(solveTriangle(a, 2, b).every(Number.isFinite)).toBe(false);
  });

  test('leaves the length of the misfit below the last column', () => {
    // The mean of 1, 2, 6 is 3; the squares of what is left add up to 4 + 1 + 9.
    const b = Float64Array.of(1, 2, 6);
    const a = Float64Array.of(1, 1, 1);
    reduceToTriangle(a, 3, 1, b);
    expect(solveTriangle(a, 1, b)[0]).toBeCloseTo(3, 14);
    expect(b[1]! * b[1]! + b[2]! * b[2]!).toBeCloseTo(14, 13);
  });
});
