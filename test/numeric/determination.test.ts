import { describe, expect, test } from 'vitest';
import { determination } from '../../src/numeric/determination.js';

/** Rows of a straight line a + b x at x = 0 … 4. */
const LINE = Float64Array.of(1, 0, 1, 1, 1, 2, 1, 3, 1, 4);

describe('The covariance of a straight line through x = 0, 1, 2, 3, 4', () => {
  const { covariance, isDetermined, leverage } = determination(LINE, 2);

  test('is that of the textbook: 1/m + mean²/Sxx, -mean/Sxx, 1/Sxx with Sxx = 10', () => {
    [0.6, -0.2, -0.2, 0.1].forEach((value, at) => {
      expect(covariance[at]).toBeCloseTo(value, 14);
    });
    expect(isDetermined).toEqual([true, true]);
  });

  test('gives each point the leverage 1/m + (x - mean)²/Sxx', () => {
    [0.6, 0.3, 0.2, 0.3, 0.6].forEach((value, at) => {
      expect(leverage[at]).toBeCloseTo(value, 14);
    });
  });

  test('takes unequal errors of the points into account', () => {
    // X = (JᵀJ)⁻¹Jᵀ has the second row (x - mean)/Sxx = -0.2, -0.1, 0, 0.1, 0.2.
    const spread = Float64Array.of(1, 2, 3, 4, 5);
    const variance = 0.04 * 1 + 0.01 * 4 + 0.01 * 16 + 0.04 * 25;
    expect(determination(LINE, 2, spread).covariance[3]).toBeCloseTo(variance, 14);
  });

  test('does not depend on the unit of a parameter but by its scale', () => {
    const scaled = LINE.map((value, at) => (at % 2 === 1 ? value * 1e-9 : value));
    const other = determination(scaled, 2);
    expect(other.covariance[3]! * 1e-18).toBeCloseTo(0.1, 13);
    expect(other.isDetermined).toEqual([true, true]);
  });
});

describe('Parameters that the residuals do not determine', () => {
  test('are those whose columns depend on each other; the others keep their covariance', () => {
    // The third column is twice the second.
    const rows = [0, 1, 2, 3, 4].flatMap((x) => [1, x, 2 * x]);
    const { covariance, isDetermined, leverage } = determination(Float64Array.from(rows), 3);
    expect(isDetermined).toEqual([true, false, false]);
    expect(covariance[0]).toBeCloseTo(0.6, 13);
    expect(covariance[4]).toBeNaN();
    expect(leverage.reduce((sum, share) => sum + share, 0)).toBeCloseTo(2, 13);
  });

  test('are those without any effect', () => {
    const rows = [0, 1, 2].flatMap((x) => [1, 0, x]);
    expect(determination(Float64Array.from(rows), 3).isDetermined).toEqual([true, false, true]);
  });

  test('are all of them where there are fewer residuals than parameters in one direction', () => {
    expect(determination(Float64Array.of(1, 1), 2).isDetermined).toEqual([false, false]);
  });
});
