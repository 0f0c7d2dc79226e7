/**
 * W. De Soto, S. A. Klein, W. A. Beckman, "Improvement and validation of a model for photovoltaic
 * array performance", Solar Energy 80, 2006, 78-88: translation of the five parameters, and the
 * five equations that give them, applied to the 54-cell module of Villalva and others 2009.
 *
 * Status: the band gap 1.121 eV and its coefficient -0.0002677 1/K, two independent copies; the
 * forms of the equations from memory, confirmed by what follows. The solution of the five equations
 * (with the temperature coefficient taken over +2 K) and the grid were computed from them outside
 * this project, with residuals below 3e-14.
 */
import { describe, expect, test } from 'vitest';
import { exp } from '../../src/numeric/exponential.js';
import { fromCelsius, thermalVoltage } from '../../src/quantities.js';
import type { Datasheet } from '../../src/source/datasheet.js';
import { fitExactly } from '../../src/source/fit/exact.js';
import { fitSimultaneously } from '../../src/source/fit/simultaneous.js';
import type { SingleDiode } from '../../src/source/single-diode.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import { TECHNOLOGIES } from '../../src/source/technology.js';
import { saturationRatio, translate } from '../../src/source/translation.js';

interface Row {
  readonly span: string;
  readonly diode: SingleDiode;
  readonly ideality: number;
}

const row = (
  span: string,
  [photocurrent, saturationCurrent, idealityVoltage, ideality, seriesResistance, shunt]: [
    number,
    number,
    number,
    number,
    number,
    number,
  ],
): Row => ({
  span,
  ideality,
  diode: {
    photocurrent,
    saturationCurrent,
    idealityVoltage,
    seriesResistance,
    shuntConductance: 1 / shunt,
  },
});

const SOLUTIONS = [
  row('+1 K', [8.22713479, 4.38166322e-10, 1.39226045, 1.0035038, 0.3350666, 160.544521]),
  row('+2 K', [8.22714044, 4.37222464e-10, 1.39213371, 1.00341245, 0.33510053, 160.507916]),
  row('+10 K', [8.2271851, 4.29823739e-10, 1.39113146, 1.00269006, 0.33536892, 160.219016]),
  row('-10 K', [8.22707179, 4.48841298e-10, 1.39367671, 1.0045246, 0.3346875, 160.954689]),
];
const REFERENCE = SOLUTIONS[1]!.diode;
const BEHAVIOUR = { technology: 'poly-si', shortCircuitCoefficient: 0.0032 } as const;

describe('The solution of the five equations', () => {
  test.each(SOLUTIONS)(
    'over $span meets the datasheet: 8.21 A, 32.9 V, 26.3 V, 7.61 A',
    ({ diode }) => {
      const curve = new SingleDiodeCurve(diode);
      const peak = curve.peaks()[0]!;
      // Nine digits of a and I0 leave 1e-8 of the voltages open.
      expect(Math.abs(curve.shortCircuitCurrent - 8.21)).toBeLessThan(1e-7);
      expect(Math.abs(curve.openCircuitVoltage - 32.9)).toBeLessThan(1e-6);
      expect(Math.abs(peak.voltage - 26.3)).toBeLessThan(1e-6);
      expect(Math.abs(peak.current - 7.61)).toBeLessThan(1e-6);
    },
  );

  test.each(SOLUTIONS)(
    'over $span is what the simultaneous fit finds, given its slope at short circuit',
    ({ diode, ideality }) => {
      const datasheet: Datasheet = {
        name: '54 cells, 200 W',
        technology: 'poly-si',
        cellsInSeries: 54,
        shortCircuitCurrent: 8.21,
        openCircuitVoltage: 32.9,
        peakCurrent: 7.61,
        peakVoltage: 26.3,
        shortCircuitCoefficient: 0.0032,
        openCircuitCoefficient: -0.123,
        slopeAtShortCircuit: new SingleDiodeCurve(diode).slope(0),
      };
      const fit = fitSimultaneously(datasheet);
      expect(fit.solved).toBe(true);
      // The slope carries the nine digits of Rsh; A follows with 14 times its relative error.
      expect(Math.abs(fit.ideality - ideality)).toBeLessThan(5e-8);
      expect(Math.abs(fit.diode.photocurrent - diode.photocurrent)).toBeLessThan(1e-8);
      expect(Math.abs(fit.diode.saturationCurrent / diode.saturationCurrent - 1)).toBeLessThan(
        2e-6,
      );
      expect(Math.abs(fit.diode.seriesResistance - diode.seriesResistance)).toBeLessThan(2e-8);
      expect(Math.abs(fit.diode.shuntConductance / diode.shuntConductance - 1)).toBeLessThan(1e-8);
    },
  );
});

describe('The exact fit', () => {
  const DATASHEET: Datasheet = {
    name: '54 cells, 200 W',
    technology: 'poly-si',
    cellsInSeries: 54,
    shortCircuitCurrent: 8.21,
    openCircuitVoltage: 32.9,
    peakCurrent: 7.61,
    peakVoltage: 26.3,
    shortCircuitCoefficient: 0.0032,
    openCircuitCoefficient: -0.123,
  };

  test.each(SOLUTIONS)(
    'finds the solution over $span from the datasheet alone, to its last digit',
    ({ span, diode, ideality }) => {
      const fit = fitExactly(DATASHEET, { span: Number.parseFloat(span) });
      expect(fit.solved).toBe(true);
      expect(fit.fifth).toMatchObject({ name: 'beta', met: true });
      // Half a unit of the last digit printed.
      expect(Math.abs(fit.diode.photocurrent - diode.photocurrent)).toBeLessThan(5.1e-9);
      expect(Math.abs(fit.diode.saturationCurrent - diode.saturationCurrent)).toBeLessThan(5.1e-19);
      expect(Math.abs(fit.diode.idealityVoltage - diode.idealityVoltage)).toBeLessThan(5.1e-9);
      expect(Math.abs(fit.ideality - ideality)).toBeLessThan(5.1e-9);
      expect(Math.abs(fit.diode.seriesResistance - diode.seriesResistance)).toBeLessThan(5.1e-9);
      const [found, made] = [1 / fit.diode.shuntConductance, 1 / diode.shuntConductance];
      expect(Math.abs(found - made)).toBeLessThan(5.1e-7);
    },
  );

  test('over 25 K, as coefficients are measured, is 0.002 of A away from that over 2 K', () => {
    const { ideality } = fitExactly(DATASHEET);
    expect(ideality).toBe(fitExactly(DATASHEET, { span: 25 }).ideality);
    expect(Math.abs(ideality - SOLUTIONS[1]!.ideality)).toBeLessThan(0.0021);
  });
});

describe('Translation from the solution over +2 K', () => {
  test.each([
    [1000, 25, 8.21, 32.9, 26.3, 7.61, 200.143],
    [1000, 50, 8.289833, 29.813119, 23.192953, 7.600695, 176.282567],
    [1000, 75, 8.369664, 26.701777, 20.136145, 7.558083, 152.190647],
    [800, 47, 6.626964, 29.851692, 23.693022, 6.096286, 144.439449],
    [200, 25, 1.644741, 30.661865, 26.004102, 1.530535, 39.800198],
    [1000, -10, 8.098233, 37.176205, 30.709716, 7.584779, 232.926399],
  ])(
    'to %d W/m² and %d °C gives the curve computed',
    (irradiance, celsius, isc, voc, vmp, imp, pmp) => {
      const diode = translate(REFERENCE, BEHAVIOUR, irradiance, fromCelsius(celsius));
      const curve = new SingleDiodeCurve(diode);
      const peak = curve.peaks()[0]!;
      // Half a unit of the last digit printed, and as much again for the nine digits of the row.
      expect(Math.abs(curve.shortCircuitCurrent - isc)).toBeLessThan(1e-6);
      expect(Math.abs(curve.openCircuitVoltage - voc)).toBeLessThan(1e-6);
      expect(Math.abs(peak.voltage - vmp)).toBeLessThan(1e-6);
      expect(Math.abs(peak.current - imp)).toBeLessThan(1e-6);
      // 0.9 of the voltage error times the current and the other way round.
      expect(Math.abs(peak.power - pmp)).toBeLessThan(5e-6);
    },
  );

  test('follows the equations as restated', () => {
    const temperature = fromCelsius(61);
    const ratio = temperature / 298.15;
    const kelvin = 1 / 8.617333262145179e-5;
    const gap = 1.121 * (1 - 0.0002677 * (temperature - 298.15));
    const i0 = ratio ** 3 * exp(kelvin * (1.121 / 298.15 - gap / temperature));
    const { technology } = BEHAVIOUR;
    expect(saturationRatio(technology, temperature) / i0).toBeCloseTo(1, 13);
    const diode = translate(REFERENCE, BEHAVIOUR, 730, temperature);
    expect(diode.idealityVoltage / (REFERENCE.idealityVoltage * ratio)).toBeCloseTo(1, 14);
    expect(diode.photocurrent).toBeCloseTo(0.73 * (REFERENCE.photocurrent + 0.0032 * 36), 13);
    expect(1 / diode.shuntConductance).toBeCloseTo(160.507916 / 0.73, 10);
    expect(diode.seriesResistance).toBe(REFERENCE.seriesResistance);
  });

  test('has the factor a = Ns A k T / q of the ideality factor printed beside it', () => {
    for (const { diode, ideality } of SOLUTIONS) {
      const a = 54 * ideality * thermalVoltage(298.15);
      // Half a unit of the last digit of both.
      expect(Math.abs(diode.idealityVoltage - a)).toBeLessThan(1.2e-8);
    }
  });

  test('takes the band gaps stated for other materials (from memory, unconfirmed)', () => {
    const gaps = Object.fromEntries(
      Object.entries(TECHNOLOGIES).map(([name, { bandGap, bandGapSlope }]) => [
        name,
        [bandGap, bandGapSlope],
      ]),
    );
    expect(gaps).toEqual({
      'mono-si': [1.121, -0.0002677],
      'poly-si': [1.121, -0.0002677],
      cdte: [1.475, -0.0003],
      cis: [1.01, -0.00011],
      cigs: [1.15, 0],
      gaas: [1.424, -0.000433],
      'a-si-triple': [1.6, 0],
    });
  });
});
