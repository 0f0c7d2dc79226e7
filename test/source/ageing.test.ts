import { describe, expect, test } from 'vitest';
import { aged } from '../../src/source/ageing.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import { faultOf } from './fault-of.js';

// The 54-cell module of Villalva, Gazoli and Ruppert Filho 2009.
const DIODE = {
  photocurrent: 8.214,
  saturationCurrent: 9.825e-8,
  idealityVoltage: 54 * 1.3 * 0.02569257912108585,
  seriesResistance: 0.221,
  shuntConductance: 1 / 415.405,
};
const power = (diode: typeof DIODE): number => new SingleDiodeCurve(diode).peaks()[0]!.power;

describe('aged', () => {
  test('takes the yearly loss off what is left each year, to 1e-12', () => {
    for (const [years, yearlyLoss] of [
      [1, 0.005],
      [25, 0.008],
      [10.5, 0.02],
    ] as const) {
      const kept = power(aged(DIODE, { years, yearlyLoss })) / power(DIODE);
      expect(Math.abs(kept / (1 - yearlyLoss) ** years - 1)).toBeLessThan(1e-12);
    }
  });

  test('lets Rs grow as asked and takes the rest off the photocurrent alone', () => {
    const ageing = { years: 20, yearlyLoss: 0.01, seriesResistanceGrowth: 0.03 };
    const old = aged(DIODE, ageing);
    expect(old.seriesResistance / DIODE.seriesResistance).toBeCloseTo(1.03 ** 20, 12);
    expect(power(old) / power(DIODE)).toBeCloseTo(0.99 ** 20, 12);
    const browned = aged(DIODE, { years: 20, yearlyLoss: 0.01 });
    expect(browned.seriesResistance).toBe(DIODE.seriesResistance);
    expect(browned.photocurrent).toBeLessThan(old.photocurrent);
    for (const { saturationCurrent, idealityVoltage, shuntConductance } of [old, browned]) {
      const { saturationCurrent: i0, idealityVoltage: a, shuntConductance: g } = DIODE;
      expect([saturationCurrent, idealityVoltage, shuntConductance]).toEqual([i0, a, g]);
    }
  });

  test('loses more than asked where the growth of Rs alone costs more', () => {
    const old = aged(DIODE, { years: 10, yearlyLoss: 0.001, seriesResistanceGrowth: 0.1 });
    expect(old.photocurrent).toBe(DIODE.photocurrent);
    expect(power(old) / power(DIODE)).toBeLessThan(0.999 ** 10);
  });

  test('changes nothing in no time', () => {
    const ageing = { years: 0, yearlyLoss: 0.01, seriesResistanceGrowth: 0.03 };
    expect(aged(DIODE, ageing)).toEqual(DIODE);
  });

  test.each([
    [{ years: -1, yearlyLoss: 0 }, 'years: must be from 0 to 100, found -1.'],
    [{ years: 1, yearlyLoss: 0.3 }, 'yearlyLoss: must be from 0 to 0.2, found 0.3.'],
    [
      { years: 1, yearlyLoss: 0, seriesResistanceGrowth: NaN },
      'seriesResistanceGrowth: must be from 0 to 1, found NaN.',
    ],
  ])('refuses %j', (ageing, message) => {
    expect(faultOf(() => aged(DIODE, ageing)).message).toBe(message);
  });
});
