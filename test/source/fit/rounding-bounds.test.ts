import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { fitExactly } from '../../../src/source/fit/exact.js';
import type { FifthChoice } from '../../../src/source/fit/fifth-condition.js';
import {
  roundingOfNumbers,
  type DatasheetRounding,
} from '../../../src/source/fit/printed-rounding.js';
import { roundingBounds, type RoundingBounds } from '../../../src/source/fit/rounding-bounds.js';
import { VILLALVA_DATASHEET } from '../villalva-datasheet.js';

const SHEET: Datasheet = {
  ...VILLALVA_DATASHEET,
  peakPowerCoefficient: -0.0047,
  slopeAtShortCircuit: -0.005,
};
/** Two decimals throughout, which is finer. */
const FINE: Datasheet = {
  ...{ ...SHEET, cellsInSeries: 60, shortCircuitCurrent: 9.22, openCircuitVoltage: 38.12 },
  ...{ peakCurrent: 8.67, peakVoltage: 30.97, openCircuitCoefficient: -0.137 },
};
/** So coarse beside Isc - Imp that some of what prints like it has no shunt path left. */
const COARSE: Datasheet = {
  ...{ ...SHEET, technology: 'mono-si', cellsInSeries: 105 },
  ...{ shortCircuitCurrent: 1.81, peakCurrent: 1.72, openCircuitVoltage: 74.24 },
  ...{ peakVoltage: 63.07, openCircuitCoefficient: -0.25, shortCircuitCoefficient: 0.001 },
};

const PARAMETERS = [
  ...(['photocurrent', 'saturationCurrent', 'ideality'] as const),
  ...(['seriesResistance', 'shuntConductance'] as const),
];
type Extremes = Record<(typeof PARAMETERS)[number], [number, number]>;

/** The extremes of the parameters over datasheets drawn from corners and inside of the box. */
function sampled(
  sheet: Datasheet,
  rounding: DatasheetRounding,
  choice: FifthChoice,
  count: number,
): Extremes {
  const random = new Random(941);
  const extremes = Object.fromEntries(
    PARAMETERS.map((name) => [name, [Infinity, -Infinity]]),
  ) as Extremes;
  for (let draw = 0; draw < count; draw += 1) {
    const share = (): number =>
      draw % 2 === 0 ? random.between(-1, 1) : random.uniform() < 0.5 ? -1 : 1;
    const moved = Object.entries(rounding).map(([key, radius]) => [
      key,
      (sheet[key as keyof DatasheetRounding] ?? 0) + (radius as number) * share(),
    ]);
    const fit = fitExactly({ ...sheet, ...Object.fromEntries(moved) } as Datasheet, choice);
    if (!fit.solved) continue;
    for (const name of PARAMETERS) {
      const value = name === 'ideality' ? fit.ideality : fit.diode[name];
      const [low, high] = extremes[name];
      extremes[name] = [Math.min(low, value), Math.max(high, value)];
    }
  }
  return extremes;
}

function expectAround(bounds: RoundingBounds, extremes: Extremes): void {
  for (const name of PARAMETERS) {
    expect(bounds[name][0]).toBeLessThanOrEqual(extremes[name][0]);
    expect(bounds[name][1]).toBeGreaterThanOrEqual(extremes[name][1]);
  }
}

describe('roundingBounds', () => {
  test.each<[string, Datasheet, FifthChoice, number]>([
    ['one decimal, beta', SHEET, { meet: 'beta' }, 1.1],
    ['one decimal, the slope at short circuit', SHEET, { meet: 'slope-at-isc' }, 1.15],
    ['one decimal, typical A', SHEET, { meet: 'typical' }, 1.1],
    ['two decimals, beta', FINE, { meet: 'beta' }, 1.1],
    ['two decimals, an A asked for', FINE, { ideality: 1.1 }, 1.1],
  ])(
    'encloses every fit of 4000 datasheets that print alike, and hardly more (%s)',
    (_, sheet, choice, widest) => {
      const rounding = roundingOfNumbers(sheet);
      const bounds = roundingBounds(sheet, rounding, choice)!;
      expect(bounds.guaranteed).toBe(true);
      const extremes = sampled(sheet, rounding, choice, 4000);
      expectAround(bounds, extremes);
      for (const name of PARAMETERS) {
        const [low, high] = bounds[name];
        const [least, most] = extremes[name];
        // What is as good as known, an A asked for above all, may be looser: to a thousandth.
        const known = 1e-3 * (name === 'saturationCurrent' ? 30 * most : most);
        expect(high - low).toBeLessThan(widest * (most - least) + known);
      }
    },
  );

  test('holds where part of the box has no shunt path left, up to twice as wide as need be', () => {
    const rounding = roundingOfNumbers(COARSE);
    const bounds = roundingBounds(COARSE, rounding)!;
    expect(bounds.guaranteed).toBe(true);
    expect(bounds.shuntConductance[0]).toBe(0);
    const extremes = sampled(COARSE, rounding, {}, 4000);
    expect(extremes.shuntConductance[0]).toBe(0);
    expectAround(bounds, extremes);
    const width = ([low, high]: readonly [number, number]): number => high - low;
    expect(width(bounds.ideality)).toBeLessThan(2.2 * width(extremes.ideality));
    expect(width(bounds.seriesResistance)).toBeLessThan(2.2 * width(extremes.seriesResistance));
  });

  test('says that it guarantees nothing for gamma, where it tries the corners only', () => {
    const rounding = roundingOfNumbers(FINE);
    const bounds = roundingBounds(FINE, rounding, { meet: 'gamma' })!;
    expect(bounds.guaranteed).toBe(false);
    const { diode, ideality } = fitExactly(FINE, { meet: 'gamma' });
    expect(bounds.ideality[0]).toBeLessThan(ideality);
    expect(bounds.seriesResistance[1]).toBeGreaterThan(diode.seriesResistance);
  });

  test('closes in on the fit as the rounding vanishes', () => {
    const rounding = roundingOfNumbers(FINE);
    const { diode } = fitExactly(FINE);
    const width = (share: number): number => {
      const finer = Object.fromEntries(
        Object.entries(rounding).map(([key, radius]) => [key, share * (radius as number)]),
      ) as unknown as DatasheetRounding;
      const { seriesResistance, guaranteed } = roundingBounds(FINE, finer)!;
      expect(guaranteed).toBe(true);
      expect(seriesResistance[0]).toBeLessThanOrEqual(diode.seriesResistance);
      expect(seriesResistance[1]).toBeGreaterThanOrEqual(diode.seriesResistance);
      return seriesResistance[1] - seriesResistance[0];
    };
    expect(width(0.01) / width(1)).toBeCloseTo(0.01, 3);
    // The allowance for the solver is left: 1e-9 to either side.
    expect(width(0) / diode.seriesResistance).toBeLessThan(5e-9);
  });

  test('is undefined for a datasheet without an exact solution', () => {
    const sheet = { ...SHEET, peakVoltage: 16 };
    expect(roundingBounds(sheet, roundingOfNumbers(sheet))).toBeUndefined();
  });
});
