import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { advanceLag, laggedTemperature } from '../../src/weather/thermal-lag.js';
import { faultOf } from '../source/fault-of.js';

const irradiance = fc.double({ min: 0, max: 1500, noNaN: true });
/** From a millisecond to a day. */
const duration = fc.double({ min: -3, max: 5, noNaN: true }).map((power) => Math.pow(10, power));
const timeConstant = fc.double({ min: 1, max: 3000, noNaN: true });

const Exact = Decimal.clone({ precision: 50 });
/** A double as it is, not as its shortest decimal. */
function exact(value: number): Decimal {
  let whole = value;
  let halvings = 0;
  for (; !Number.isInteger(whole); whole *= 2) halvings++;
  return new Exact(BigInt(whole).toString()).div(new Exact(2).pow(halvings));
}

/** The solution as textbooks have it, in 50 digits. */
function reference(x0: number, g0: number, g1: number, time: number, tau: number): number {
  const [x, from, to, h, t] = [x0, g0, g1, time, tau].map(exact) as [
    Decimal,
    Decimal,
    Decimal,
    Decimal,
    Decimal,
  ];
  const ramp = to.minus(from).div(h).times(t);
  const decay = h.div(t).negated().exp();
  return to.minus(ramp).plus(x.minus(from).plus(ramp).times(decay)).toNumber();
}

describe('advanceLag', () => {
  test('agrees with 50-digit arithmetic within 1e-15 of the largest irradiance', () => {
    fc.assert(
      fc.property(
        irradiance,
        irradiance,
        irradiance,
        duration,
        timeConstant,
        (state, start, end, time, tau) => {
          const found = advanceLag(state, start, end, time, tau);
          const miss = Math.abs(found - reference(state, start, end, time, tau));
          expect(miss).toBeLessThanOrEqual(1e-15 * Math.max(state, start, end));
        },
      ),
      { seed: 641, numRuns: 2000 },
    );
  });

  test('reaches the same state in one step as in two', () => {
    fc.assert(
      fc.property(
        irradiance,
        irradiance,
        irradiance,
        duration,
        fc.double({ min: 0, max: 1, noNaN: true }),
        (state, start, end, time, part) => {
          const middle = start + (end - start) * part;
          const half = advanceLag(state, start, middle, time * part, 300);
          const twice = advanceLag(half, middle, end, time * (1 - part), 300);
          const once = advanceLag(state, start, end, time, 300);
          // Three steps of 1e-15 each, and the roundings of the middle.
          expect(Math.abs(twice - once)).toBeLessThanOrEqual(6e-15 * Math.max(state, start, end));
        },
      ),
      { seed: 642, numRuns: 1000 },
    );
  });

  test('stays between the irradiances that it has seen', () => {
    fc.assert(
      fc.property(irradiance, irradiance, irradiance, duration, (state, start, end, time) => {
        const found = advanceLag(state, start, end, time, 300);
        const slack = 1e-15 * Math.max(state, start, end);
        expect(found).toBeGreaterThanOrEqual(Math.min(state, start, end) - slack);
        expect(found).toBeLessThanOrEqual(Math.max(state, start, end) + slack);
      }),
      { seed: 643 },
    );
  });

  test('trails a long ramp by tau times its slope', () => {
    // 0.05 W/m²/s for 20000 s, of which e^(-66) of the start is left.
    expect(advanceLag(0, 0, 1000, 20_000, 300)).toBeCloseTo(1000 - 300 * 0.05, 11);
  });

  test('takes no time: a step of irradiance leaves the state', () => {
    expect(advanceLag(412.5, 0, 1000, 0, 300)).toBe(412.5);
    expect(advanceLag(412.5, 0, 1000, 0, 0)).toBe(412.5);
    expect(advanceLag(412.5, 0, 1000, 5e-324, 300)).toBe(412.5);
  });

  test('keeps a state at rest exactly', () => {
    fc.assert(
      fc.property(irradiance, duration, (state, time) => {
        expect(advanceLag(state, state, state, time, 300)).toBe(state);
      }),
      { seed: 644 },
    );
  });

  test('without a time constant, or after an endless time, is the irradiance at the end', () => {
    expect(advanceLag(7, 300, 800, 60, 0)).toBe(800);
    expect(advanceLag(7, 800, 800, Infinity, 300)).toBe(800);
  });

  test.each<[string, Parameters<typeof advanceLag>]>([
    ['state', [NaN, 0, 0, 1, 300]],
    ['start', [0, Infinity, 0, 1, 300]],
    ['end', [0, 0, NaN, 1, 300]],
    ['duration', [0, 0, 0, -1, 300]],
    ['duration', [0, 0, 0, NaN, 300]],
    ['timeConstant', [0, 0, 0, 1, -300]],
    ['timeConstant', [0, 0, 0, 1, Infinity]],
  ])('refuses a %s out of range: %o', (field, numbers) => {
    const fault = faultOf(() => advanceLag(...numbers));
    expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field });
  });
});

test('laggedTemperature takes constants other than those of the standard', () => {
  const lag = { offset: 0, coefficient: 0.025, timeConstant: 600 };
  expect(laggedTemperature(290, 800, lag)).toBe(310);
});
