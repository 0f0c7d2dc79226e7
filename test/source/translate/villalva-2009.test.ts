import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { expm1 } from '../../../src/numeric/exponential.js';
import { Random } from '../../../src/numeric/random.js';
import {
  fromCelsius,
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  uniformConditions,
} from '../../../src/quantities.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { fitSimultaneously } from '../../../src/source/fit/simultaneous.js';
import { Module } from '../../../src/source/module.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';
import { behaviourOf, translate } from '../../../src/source/translation.js';
import type { VillalvaBehaviour } from '../../../src/source/translate/villalva-2009.js';
import { anyModule } from '../any-diode.js';
import { faultOf } from '../fault-of.js';

const modules = fc.integer({ min: 0, max: 1e9 }).map((seed) => anyModule(new Random(seed)));
const irradiances = fc.double({ min: 0, max: 2000, noNaN: true });
const temperatures = fc.double({ min: -60, max: 120, noNaN: true }).map(fromCelsius);

/** The behaviour of a diode whose datasheet says what its own curve does at STC. */
function behaviour(diode: SingleDiode, betaShare = -0.0035): VillalvaBehaviour {
  const { shortCircuitCurrent, openCircuitVoltage } = new SingleDiodeCurve(diode);
  return {
    translation: 'villalva-2009',
    technology: 'mono-si',
    shortCircuitCoefficient: 0.0005 * shortCircuitCurrent,
    openCircuitCoefficient: betaShare * openCircuitVoltage,
    shortCircuitCurrent,
    openCircuitVoltage,
  };
}

describe('Translation after villalva-2009', () => {
  test('changes nothing at STC, to the last bit', () => {
    fc.assert(
      fc.property(modules, ({ diode }) => {
        const there = translate(diode, behaviour(diode), STC_IRRADIANCE, STC_TEMPERATURE);
        expect(there).toEqual(diode);
      }),
      { seed: 631 },
    );
  });

  test('follows the rules as printed', () => {
    fc.assert(
      fc.property(modules, irradiances, temperatures, ({ diode }, irradiance, temperature) => {
        const b = behaviour(diode);
        const there = translate(diode, b, irradiance, temperature);
        const rise = temperature - 298.15;
        const a = (diode.idealityVoltage * temperature) / 298.15;
        const rule = (dT: number, at: number): number =>
          (b.shortCircuitCurrent + b.shortCircuitCoefficient * dT) /
          expm1((b.openCircuitVoltage + b.openCircuitCoefficient * dT) / at);
        const ratio = rule(rise, a) / rule(0, diode.idealityVoltage);
        // Exponents of up to 200, each rounded: 200 x 2e-16 twice.
        expect(
          Math.abs(there.saturationCurrent / diode.saturationCurrent / ratio - 1),
        ).toBeLessThan(1e-13);
        const iph = (irradiance / 1000) * (diode.photocurrent + b.shortCircuitCoefficient * rise);
        expect(Math.abs(there.photocurrent - iph)).toBeLessThanOrEqual(1e-15 * iph);
        expect(there.idealityVoltage / a).toBeCloseTo(1, 14);
        expect(there.seriesResistance).toBe(diode.seriesResistance);
        expect(there.shuntConductance).toBe(diode.shuntConductance);
      }),
      { seed: 632, numRuns: 500 },
    );
  });

  test('keeps the coefficient of Voc but for a share of some a / (Iph Rsh), whatever A is', () => {
    fc.assert(
      fc.property(modules, fc.constantFrom(-40, 0, 50, 75), ({ diode }, celsius) => {
        const b = behaviour(diode);
        const rise = celsius - 25;
        const there = translate(diode, b, 1000, fromCelsius(celsius));
        const voc = new SingleDiodeCurve(there).openCircuitVoltage;
        const found = (voc - b.openCircuitVoltage) / rise;
        // d Voc / dT - K_V = a ((K_I - K_V / Rsh) / N - K_I / Isc), N the current of the diode at
        // Voc; over 65 K it curves, by less than itself.
        const inDiode = diode.photocurrent - b.openCircuitVoltage * diode.shuntConductance;
        const { shortCircuitCoefficient: alpha, openCircuitCoefficient: beta } = b;
        const leak = (Math.abs(beta) * diode.shuntConductance) / inDiode;
        const uneven = alpha * Math.abs(1 / inDiode - 1 / b.shortCircuitCurrent);
        const rounding = 1e-14 * b.openCircuitVoltage;
        const slack = 2 * there.idealityVoltage * (leak + uneven) + rounding;
        expect(Math.abs(found - b.openCircuitCoefficient)).toBeLessThanOrEqual(slack);
      }),
      { seed: 633, numRuns: 500 },
    );
  });

  test('leaves no light at night, and no voltage', () => {
    const { diode } = anyModule(new Random(3));
    const module = new Module('m', 60, diode, behaviour(diode));
    const night = module.at(uniformConditions(0, fromCelsius(-60)));
    expect(night.shortCircuitCurrent).toBe(0);
    expect(night.openCircuitVoltage).toBe(0);
    expect(night.peaks()).toEqual([{ voltage: 0, current: 0, power: 0 }]);
  });
});

describe('A 54-cell datasheet of -123 mV/K whose points make A = 1.41', () => {
  const sheet: Datasheet = {
    name: '54 cells',
    technology: 'poly-si',
    cellsInSeries: 54,
    shortCircuitCurrent: 8.21,
    openCircuitVoltage: 32.9,
    peakCurrent: 7.61,
    peakVoltage: 26.3,
    shortCircuitCoefficient: 0.0032,
    openCircuitCoefficient: -0.123,
  };
  const { diode, ideality } = fitSimultaneously(sheet);
  const betaUnder = (rules: 'de-soto-2006' | 'villalva-2009'): number => {
    const module = new Module(sheet.name, 54, diode, behaviourOf(sheet, rules));
    const voc = (celsius: number) =>
      module.at(uniformConditions(1000, fromCelsius(celsius))).openCircuitVoltage;
    return (voc(50) - voc(25)) / 25;
  };

  test('keeps its coefficient of Voc under villalva-2009', () => {
    expect(ideality).toBeCloseTo(1.41, 2);
    // There is no shunt path; Isc is below Iph by what the diode takes at Isc Rs, 1e-7 of it.
    expect(Math.abs(betaUnder('villalva-2009') + 0.123)).toBeLessThan(1e-6);
  });

  test('is steeper by three quarters under de-soto-2006: -218.5 mV/K', () => {
    expect(Math.abs(betaUnder('de-soto-2006') + 0.2185)).toBeLessThan(1e-4);
  });
});

describe('A Module', () => {
  const { diode } = anyModule(new Random(5));
  const usual = behaviour(diode);

  test.each([
    ['openCircuitVoltage', 0, 'above 0 and finite, found 0.'],
    ['shortCircuitCurrent', Infinity, 'above 0 and finite, found Infinity.'],
    [
      'openCircuitCoefficient',
      -usual.openCircuitVoltage / 90,
      'to stay above 0 from -60 to 120 °C',
    ],
    ['openCircuitCoefficient', usual.openCircuitVoltage / 80, 'to stay above 0 from -60 to 120 °C'],
    ['shortCircuitCoefficient', -usual.shortCircuitCurrent / 90, 'to stay above 0'],
    ['shortCircuitCoefficient', NaN, 'found NaN.'],
  ])('is refused with villalva-2009 and a %s of %d', (field, value, message) => {
    const fault = faultOf(() => new Module('m', 60, diode, { ...usual, [field]: value }));
    expect(fault.kind).toBe('input');
    expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    expect(fault.problems[0]!.message).toContain(message);
  });
});

describe('behaviourOf', () => {
  const sheet: Datasheet = {
    name: 'm',
    technology: 'cdte',
    cellsInSeries: 60,
    shortCircuitCurrent: 2,
    openCircuitVoltage: 50,
    peakCurrent: 1.8,
    peakVoltage: 40,
    shortCircuitCoefficient: 0.001,
    openCircuitCoefficient: -0.14,
  };

  test('takes from a datasheet what its rules need and no more', () => {
    const usual = { technology: 'cdte', shortCircuitCoefficient: 0.001 };
    expect(behaviourOf(sheet)).toEqual(usual);
    expect(behaviourOf(sheet, 'villalva-2009')).toEqual({
      ...usual,
      translation: 'villalva-2009',
      openCircuitCoefficient: -0.14,
      shortCircuitCurrent: 2,
      openCircuitVoltage: 50,
    });
  });
});
