import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { expm1 } from '../../src/numeric/exponential.js';
import { nextDown, nextUp } from '../../src/numeric/neighbours.js';
import { findRoot, findRootWithSlope, type RootOptions } from '../../src/numeric/root.js';

type Search = (
  f: (x: number) => number,
  low: number,
  high: number,
  options?: RootOptions,
) => ReturnType<typeof findRoot>;

/** The slope by central difference: rough, as a caller's may be. */
const withSlope: Search = (f, low, high, options) =>
  findRootWithSlope(f, (x) => (f(x + 1e-6) - f(x - 1e-6)) / 2e-6, low, high, options);

const withoutSense: Search = (f, low, high, options) =>
  findRootWithSlope(f, (x) => (x > 0 ? NaN : 0), low, high, options);

const ALWAYS_ENOUGH = 124;
const finite = fc.double({ noNaN: true, noDefaultInfinity: true });
const ordinary = fc.double({ min: -1e3, max: 1e3, noNaN: true });

/** A sign for every double, from its bits alone: as discontinuous as can be. */
function anySigns(salt: number): (x: number) => number {
  const words = new Uint32Array(new Float64Array(1).buffer);
  const double = new Float64Array(words.buffer);
  return (x) => {
    double[0] = x;
    const hash = Math.imul(words[0]! ^ Math.imul(words[1]!, 0x9e3779b1) ^ salt, 0x85ebca6b);
    return ((hash >>> 15) & 1) === 0 ? 1 : -1;
  };
}

function changesSignNextTo(f: (x: number) => number, root: number): boolean {
  const here = Math.sign(f(root));
  return here === 0 || [nextDown(root), nextUp(root)].some((x) => Math.sign(f(x)) !== here);
}

describe.each([
  ['findRoot', findRoot],
  ['findRootWithSlope', withSlope],
  ['findRootWithSlope, given useless slopes,', withoutSense],
])('%s', (_, search) => {
  // 2, 3 and the golden ratio's minimal polynomial: roots by square root, which rounds correctly.
  test.each([
    ['x² - 2', (x: number) => x * x - 2, 0, 2, Math.SQRT2],
    ['x² - 3', (x: number) => x * x - 3, 1, 10, Math.sqrt(3)],
    ['x² - x - 1', (x: number) => x * x - x - 1, 0, 100, (1 + Math.sqrt(5)) / 2],
    ['1 - x', (x: number) => 1 - x, -1e308, 1.7e308, 1],
  ])('finds the root of %s to one place', (_, f, low, high, root) => {
    const found = search(f, low, high);
    expect(found.status).toBe('converged');
    if (found.status !== 'converged') return;
    expect(found.root).toBeGreaterThanOrEqual(nextDown(root));
    expect(found.root).toBeLessThanOrEqual(nextUp(root));
    expect(found.residual).toBe(f(found.root));
  });

  test('ends at a change of sign in 124 steps at most, whatever the signs are', () => {
    fc.assert(
      fc.property(finite, finite, fc.integer(), (x, y, salt) => {
        const [low, high] = [Math.min(x, y), Math.max(x, y)];
        fc.pre(low < high);
        const inner = anySigns(salt);
        const f = (at: number) => (at === low ? -1 : at === high ? 1 : inner(at));
        const found = search(f, low, high);
        if (found.status !== 'converged') throw new Error(found.status);
        expect(found.iterations).toBeLessThanOrEqual(ALWAYS_ENOUGH);
        expect(found.root >= low && found.root <= high).toBe(true);
        expect(changesSignNextTo(f, found.root)).toBe(true);
      }),
      { seed: 1 },
    );
  });

  test('finds the one place where a step function changes sign', () => {
    fc.assert(
      fc.property(finite, finite, finite, (x, y, z) => {
        const [low, place, high] = [x, y, z].sort((a, b) => a - b) as [number, number, number];
        fc.pre(low < place);
        const found = search((at) => (at < place ? -3 : 2), low, high);
        if (found.status !== 'converged') throw new Error(found.status);
        // Smaller residual of the two doubles between which the sign changes.
        expect(found.root === place).toBe(true);
        expect(found.iterations).toBeLessThanOrEqual(ALWAYS_ENOUGH);
      }),
      { seed: 2 },
    );
  });

  test('comes as near to the root as the tolerance says', () => {
    const tolerance = fc.constantFrom(1, 1e-3, 1e-9);
    fc.assert(
      fc.property(ordinary, tolerance, (root, allowed) => {
        const found = search((x) => expm1((x - root) / 100), -1001, 1001, { tolerance: allowed });
        if (found.status !== 'converged') throw new Error(found.status);
        expect(Math.abs(found.root - root)).toBeLessThanOrEqual(allowed);
      }),
      { seed: 3 },
    );
  });

  test('takes an end that is a root at once', () => {
    const atZero = { status: 'converged', root: 0, residual: 0, iterations: 0 };
    expect(search((x) => x, 0, 1)).toEqual(atZero);
    expect(search((x) => x, -1, 0)).toEqual(atZero);
    expect(search((x) => x, 0, 0)).toEqual(atZero);
  });

  test('says that the ends have one sign, and what the values were', () => {
    const found = search((x) => x * x + 1, -1, 2);
    const values = { valueAtLow: 2, valueAtHigh: 5 };
    expect(found).toEqual({ status: 'no-sign-change', low: -1, high: 2, ...values });
  });

  test('counts infinite values by their sign', () => {
    const found = search((x) => (x > 4 ? Infinity : x < 2 ? -Infinity : x - 3), 0, 1e6);
    expect(found).toMatchObject({ status: 'converged', root: 3, residual: 0 });
  });

  test('says where the function gave NaN', () => {
    const found = search((x) => (x === 0 || x === 1 ? x - 0.25 : NaN), 0, 1);
    expect(found).toEqual({ status: 'not-a-number', at: 0.5, iterations: 1 });
    const atEnd = search((x) => Math.sqrt(x), -1, 1);
    expect(atEnd).toEqual({ status: 'not-a-number', at: -1, iterations: 0 });
  });

  test('stops at the iteration limit with the bracket it has', () => {
    const f = (x: number) => x * x * x - 10;
    const found = search(f, 0, 100, { iterationLimit: 3 });
    if (found.status !== 'iteration-limit') throw new Error(found.status);
    expect(found.iterations).toBe(3);
    expect(f(found.low)).toBeLessThan(0);
    expect(f(found.high)).toBeGreaterThan(0);
    expect([found.low, found.high]).toContain(found.best);
    expect(found.residual).toBe(f(found.best));
    expect(Math.abs(found.residual)).toBe(Math.min(-f(found.low), f(found.high)));
  });

  test('shows a pole by its residual', () => {
    const found = search((x) => 1 / (x - 0.3), 0, 1);
    if (found.status !== 'converged') throw new Error(found.status);
    expect(Math.abs(found.root - 0.3)).toBeLessThanOrEqual(2 ** -54);
    expect(Math.abs(found.residual)).toBeGreaterThan(1e15);
  });

  test.each([
    ['low', NaN, 1, {}],
    ['low', -Infinity, 1, {}],
    ['high', 1, 0, {}],
    ['high', 0, Infinity, {}],
    ['tolerance', 0, 1, { tolerance: -1 }],
    ['tolerance', 0, 1, { tolerance: NaN }],
    ['iterationLimit', 0, 1, { iterationLimit: 0 }],
    ['iterationLimit', 0, 1, { iterationLimit: 1.5 }],
  ])('refuses a bad %s', (field, low, high, options) => {
    const attempt = () => search((x) => x - 0.5, low, high, options);
    expect(attempt).toThrow(Fault);
    expect(attempt).toThrow(field);
  });
});

describe('findRoot', () => {
  test('needs few values where the function is smooth', () => {
    // A diode in series with a resistor on a 40 V supply: one knee, steep on one side.
    let calls = 0;
    const found = findRoot(
      (v) => {
        calls += 1;
        return 8 - 1e-9 * expm1(v / 1.5) - v / 300 - (v - 20) / 5;
      },
      0,
      60,
    );
    if (found.status !== 'converged') throw new Error(found.status);
    expect(calls).toBe(found.iterations + 2);
    expect(found.iterations).toBeLessThanOrEqual(16);
  });

  test('crosses many orders of magnitude in a few dozen steps', () => {
    const found = findRoot((x) => (x < 1e-250 ? -1 : 1), 1e-300, 1e300);
    if (found.status !== 'converged') throw new Error(found.status);
    expect(found.root).toBe(1e-250);
    expect(found.iterations).toBeLessThanOrEqual(70);
  });
});

describe('findRootWithSlope', () => {
  const cube = (x: number) => x * x * x - 10;
  const cubeSlope = (x: number) => 3 * x * x;

  test('asks for the slope only where it asked for the value last', () => {
    let last = NaN;
    const found = findRootWithSlope(
      (x) => cube((last = x)),
      (x) => {
        expect(x).toBe(last);
        return cubeSlope(x);
      },
      0,
      100,
    );
    expect(found.status).toBe('converged');
  });

  test('profits from a start near the root', () => {
    const cold = findRootWithSlope(cube, cubeSlope, 0, 100);
    const warm = findRootWithSlope(cube, cubeSlope, 0, 100, { start: 2.15 });
    if (cold.status !== 'converged' || warm.status !== 'converged') throw new Error();
    expect(warm.root).toBe(cold.root);
    // Newton doubles the digits: 2.15 has two of them right, so three steps, and a few to close.
    expect(warm.iterations).toBeLessThanOrEqual(6);
    expect(warm.iterations).toBeLessThan(cold.iterations);
  });

  test('disregards a start outside the bracket', () => {
    const plain = findRootWithSlope(cube, cubeSlope, 0, 100);
    expect(findRootWithSlope(cube, cubeSlope, 0, 100, { start: 101 })).toEqual(plain);
    expect(findRootWithSlope(cube, cubeSlope, 0, 100, { start: NaN })).toEqual(plain);
  });

  test('agrees with findRoot on rising functions', () => {
    const steepness = fc.double({ min: 0.01, max: 50, noNaN: true });
    fc.assert(
      fc.property(ordinary, steepness, (root, k) => {
        const f = (x: number) => expm1(k * (x - root)) + (x - root);
        const slope = (x: number) => k * (expm1(k * (x - root)) + 1) + 1;
        const [a, b] = [findRoot(f, -2e3, 2e3), findRootWithSlope(f, slope, -2e3, 2e3)];
        if (a.status !== 'converged' || b.status !== 'converged') throw new Error();
        expect(a.root === root && b.root === root).toBe(true);
      }),
      { seed: 4 },
    );
  });
});
