import { describe, expect, test } from 'vitest';
import { STC_TEMPERATURE, uniformConditions } from '../../src/quantities.js';
import type { Datasheet } from '../../src/source/datasheet.js';
import { fitDatasheet } from '../../src/source/fit/fit.js';
import { Module } from '../../src/source/module.js';
import { population, populationOf, type Spread } from '../../src/source/population.js';
import { faultOf } from './fault-of.js';

const SHEET: Datasheet = {
  name: 'nominal',
  technology: 'poly-si',
  cellsInSeries: 60,
  shortCircuitCurrent: 9.22,
  openCircuitVoltage: 38.1,
  peakCurrent: 8.67,
  peakVoltage: 30.97,
  shortCircuitCoefficient: 0.0046,
  openCircuitCoefficient: -0.137,
};
const NOMINAL = fitDatasheet(SHEET).module;

interface Figures {
  readonly isc: number;
  readonly voc: number;
  readonly pmp: number;
  readonly fill: number;
}

function figuresOf(module: Module): Figures {
  const curve = module.at(uniformConditions(1000, STC_TEMPERATURE));
  const { shortCircuitCurrent: isc, openCircuitVoltage: voc } = curve;
  const pmp = curve.peaks()[0]!.power;
  return { isc, voc, pmp, fill: pmp / (isc * voc) };
}

const COUNT = 4000;
const mean = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;
const deviation = (values: readonly number[]): number => {
  const centre = mean(values);
  return Math.sqrt(mean(values.map((value) => (value - centre) ** 2)));
};
const correlation = (a: readonly number[], b: readonly number[]): number => {
  const [ca, cb] = [mean(a), mean(b)];
  const products = a.map((value, i) => (value - ca) * (b[i]! - cb));
  return mean(products) / (deviation(a) * deviation(b));
};

/** Relative to the nominal module, of 4000 others. */
function statistics(spread: Spread) {
  const nominal = figuresOf(NOMINAL);
  const all = population(NOMINAL, { count: COUNT, seed: 951, spread }).map(figuresOf);
  const of = (name: keyof Figures): number[] => all.map((each) => each[name] / nominal[name]);
  return { isc: of('isc'), voc: of('voc'), pmp: of('pmp'), fill: of('fill') };
}

// Five standard errors: of a mean s / √n, of a standard deviation s / √(2 n).
function expectSpread(values: readonly number[], wanted: number): void {
  expect(Math.abs(mean(values) - 1)).toBeLessThan((5 * wanted) / Math.sqrt(COUNT));
  expect(Math.abs(deviation(values) - wanted)).toBeLessThan((5 * wanted) / Math.sqrt(2 * COUNT));
}

describe('population', () => {
  test('spreads Isc, Voc and Pmp as asked, about the nominal module', () => {
    const { isc, voc, pmp, fill } = statistics({
      shortCircuitCurrent: 0.01,
      openCircuitVoltage: 0.005,
      peakPower: 0.02,
    });
    expectSpread(isc, 0.01);
    expectSpread(voc, 0.005);
    expectSpread(pmp, 0.02);
    // What is left for the fill factor: 0.02² - 0.01² - 0.005².
    expectSpread(fill, Math.sqrt(0.0004 - 0.0001 - 0.000025));
    for (const [a, b] of [
      [isc, voc],
      [isc, fill],
      [voc, fill],
    ] as const) {
      expect(Math.abs(correlation(a, b))).toBeLessThan(5 / Math.sqrt(COUNT));
    }
  });

  test('lets power follow Isc and Voc where nothing is said of it, at an unchanged fill factor', () => {
    const { isc, pmp, fill } = statistics({ shortCircuitCurrent: 0.02 });
    expectSpread(isc, 0.02);
    expectSpread(pmp, 0.02);
    expect(deviation(fill)).toBeLessThan(1e-8);
  });

  test('makes modules sorted by power: Isc and Voc spread more than Pmp', () => {
    const { isc, voc, pmp, fill } = statistics({
      shortCircuitCurrent: 0.01,
      openCircuitVoltage: 0.01,
      peakPower: 0.005,
    });
    expectSpread(isc, 0.01);
    expectSpread(voc, 0.01);
    expectSpread(pmp, 0.005);
    expect(correlation(isc, fill)).toBeLessThan(-0.6);
  });

  test('makes modules that are: no parameter below zero, the nominal A wherever it is feasible', () => {
    const spread = { shortCircuitCurrent: 0.03, openCircuitVoltage: 0.02, peakPower: 0.05 };
    const modules = population(NOMINAL, { count: 1000, seed: 952, spread });
    let nominalIdeality = 0;
    for (const { reference } of modules) {
      expect(Object.values(reference).every((value) => Number.isFinite(value))).toBe(true);
      expect(reference.seriesResistance).toBeGreaterThanOrEqual(0);
      expect(reference.shuntConductance).toBeGreaterThanOrEqual(0);
      expect(reference.saturationCurrent).toBeGreaterThan(0);
      const ratio = reference.idealityVoltage / NOMINAL.reference.idealityVoltage;
      if (Math.abs(ratio - 1) < 1e-9) nominalIdeality += 1;
      else expect(ratio).toBeLessThan(1);
    }
    expect(nominalIdeality).toBeGreaterThan(500);
  });

  test('gives module k whatever the count, and another for another seed', () => {
    const spread = { shortCircuitCurrent: 0.02, peakPower: 0.03 };
    const few = population(NOMINAL, { count: 3, seed: 7, spread });
    const many = population(NOMINAL, { count: 50, seed: 7, spread });
    expect(many.slice(0, 3)).toEqual(few);
    expect(populationOf(NOMINAL, { seed: 7, spread })(2)).toEqual(few[2]);
    expect(few.map(({ name }) => name)).toEqual(['nominal #0', 'nominal #1', 'nominal #2']);
    expect(few[0]!.reference).not.toEqual(few[1]!.reference);
    const [other] = population(NOMINAL, { count: 1, seed: 8, spread });
    expect(other!.reference).not.toEqual(few[0]!.reference);
  });

  test('without spread and age is the nominal module, over and over', () => {
    for (const { reference } of population(NOMINAL, { count: 3, seed: 1 })) {
      const { photocurrent, idealityVoltage, seriesResistance } = NOMINAL.reference;
      expect(reference.photocurrent / photocurrent).toBeCloseTo(1, 12);
      expect(reference.idealityVoltage / idealityVoltage).toBeCloseTo(1, 12);
      expect(reference.seriesResistance / seriesResistance).toBeCloseTo(1, 9);
    }
    expect(population(NOMINAL, { count: 0, seed: 1 })).toEqual([]);
  });

  test('ages: loses power at a rate that spreads about the mean asked for', () => {
    const ageing = { years: 20, yearlyLoss: 0.007, lossSpread: 0.3, seriesResistanceGrowth: 0.005 };
    const nominal = figuresOf(NOMINAL);
    const modules = population(NOMINAL, { count: COUNT, seed: 953, ageing });
    const losses = modules.map((module) => 1 - (figuresOf(module).pmp / nominal.pmp) ** (1 / 20));
    expectSpread(
      losses.map((loss) => loss / 0.007),
      0.3,
    );
    const growth = modules[0]!.reference.seriesResistance / NOMINAL.reference.seriesResistance;
    expect(growth).toBeCloseTo(1.005 ** 20, 8);
  });

  test('keeps the coefficients relative to each module’s own Isc and Voc, under either translation', () => {
    const spread = { shortCircuitCurrent: 0.05, openCircuitVoltage: 0.03 };
    const villalva = new Module('villalva', 60, NOMINAL.reference, {
      translation: 'villalva-2009',
      technology: 'poly-si',
      shortCircuitCoefficient: 0.0046,
      openCircuitCoefficient: -0.137,
      shortCircuitCurrent: 9.22,
      openCircuitVoltage: 38.1,
    });
    for (const nominal of [NOMINAL, villalva]) {
      const ratio = (module: Module): number[] => {
        const [stc, hot] = [STC_TEMPERATURE, STC_TEMPERATURE + 40].map((temperature) =>
          module.at(uniformConditions(1000, temperature)),
        );
        return [
          hot!.shortCircuitCurrent / stc!.shortCircuitCurrent,
          hot!.openCircuitVoltage / stc!.openCircuitVoltage,
        ];
      };
      const [current, voltage] = ratio(nominal);
      for (const module of population(nominal, { count: 20, seed: 954, spread })) {
        expect(ratio(module)[0]! / current!).toBeCloseTo(1, 4);
        // Under De Soto's rules Voc/T, and so its coefficient, moves a little with Voc itself.
        expect(Math.abs(ratio(module)[1]! / voltage! - 1)).toBeLessThan(0.03);
      }
    }
  });

  test.each([
    [{ count: -1, seed: 1 }, 'count: must be a whole number from 0 to 1000000, found -1.'],
    [
      { count: 1, seed: 1, spread: { peakPower: 0.3 } },
      'peakPower: must be from 0 to 0.2, found 0.3.',
    ],
    [
      { count: 1, seed: 1, ageing: { years: 1, yearlyLoss: 0.1, lossSpread: 3 } },
      'lossSpread: must be from 0 to 2, found 3.',
    ],
    [
      { count: 0, seed: 1, ageing: { years: 200, yearlyLoss: 0 } },
      'years: must be from 0 to 100, found 200.',
    ],
  ])('refuses %j', (plan, message) => {
    expect(faultOf(() => population(NOMINAL, plan)).message).toBe(message);
  });

  test('takes nominal modules at the very end of what is feasible', () => {
    const { reference, behaviour } = NOMINAL;
    for (const idealityVoltage of [0.18, 1.2, 2]) {
      const square = { ...reference, seriesResistance: 0, shuntConductance: 0, idealityVoltage };
      const saturationCurrent = reference.photocurrent / Math.expm1(38 / idealityVoltage);
      const ideal = new Module('ideal', 60, { ...square, saturationCurrent }, behaviour);
      const spread = { peakPower: 0.05 };
      expect(population(ideal, { count: 20, seed: 955, spread })).toHaveLength(20);
    }
  });

  test('refuses a nominal module that gives nothing', () => {
    const { reference, behaviour } = NOMINAL;
    const dark = new Module('dark', 60, { ...reference, photocurrent: 0 }, behaviour);
    const { problems } = faultOf(() => population(dark, { count: 1, seed: 1 }));
    expect(problems[0]).toMatchObject({
      code: 'NO_FEASIBLE_MODULE',
      message: '100 draws around dark gave no module that can be.',
    });
  });
});
