import { describe, expect, test } from 'vitest';
import { STC_TEMPERATURE, uniformConditions } from '../../../src/quantities.js';
import { globalPeak } from '../../../src/source/curve.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import {
  FIT_METHODS,
  fitByAllMethods,
  fitDatasheet,
  type Fit,
} from '../../../src/source/fit/fit.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { VILLALVA_DATASHEET } from '../villalva-datasheet.js';

const SHEET: Datasheet = {
  ...VILLALVA_DATASHEET,
  peakPowerCoefficient: -0.0047,
};
/** Far too many cells. */
const HOPELESS: Datasheet = { ...SHEET, cellsInSeries: 150, slopeAtShortCircuit: -0.015 };

const codesOf = (fit: Fit): string[] => fit.warnings.map(({ code }) => code);

describe('fitDatasheet', () => {
  test('takes the exact solution, and says what settled A and within which range', () => {
    const fit = fitDatasheet(SHEET);
    expect(fit.method).toBe('exact');
    expect(fit.solved).toBe(true);
    expect(fit.fifth).toMatchObject({ name: 'beta', wanted: -0.123, met: true });
    expect(fit.feasible!.least).toBeLessThan(fit.ideality);
    expect(fit.feasible!.most).toBeGreaterThan(fit.ideality);
    expect(fit.warnings).toEqual([]);
    expect(fit.candidates).toEqual([]);
  });

  test('passes on what is to settle A', () => {
    expect(fitDatasheet(SHEET, 'exact', { meet: 'gamma' }).fifth!.name).toBe('gamma');
    expect(fitDatasheet(SHEET, undefined, { ideality: 1.2 }).ideality).toBeCloseTo(1.2, 12);
  });

  test('says unsolved where no curve is exact, which condition fails, and what to check', () => {
    const fit = fitDatasheet(HOPELESS);
    expect(fit.method).toBe('exact');
    expect(fit.solved).toBe(false);
    expect(fit.warnings).toEqual([]);
    expect(fit.account).toMatch(/^the knee is squarer than any junction's/);
    expect(fit.advice).toMatch(/^check cells_in_series first/);
    expect(fit.remedies!.length).toBeGreaterThan(1);
  });

  test('warns where the condition is missed by more than rounding explains, and of what it hints at', () => {
    const many = fitDatasheet({ ...SHEET, cellsInSeries: 100 });
    expect(many.solved).toBe(true);
    expect(codesOf(many)).toEqual(['CONDITION_MISSED']);
    expect(many.warnings[0]!.hint).toContain('too many cells_in_series');
    const few = fitDatasheet({ ...SHEET, openCircuitCoefficient: -0.25 });
    expect(codesOf(few)).toEqual(['CONDITION_MISSED']);
    expect(few.warnings[0]!.message).toMatch(/misses by \+1\d\.\d\d %\.$/);
    expect(few.warnings[0]!.hint).toContain('--meet gamma');
    // Missed by 1 %, which is rounding's.
    const { value } = few.fifth!;
    expect(codesOf(fitDatasheet({ ...SHEET, openCircuitCoefficient: 1.01 * value }))).toEqual([]);
  });

  test('puts every method side by side, each as when asked for alone', () => {
    const fits = fitByAllMethods(SHEET, { meet: 'gamma' });
    expect(fits.map(({ method }) => method)).toEqual([...FIT_METHODS]);
    for (const fit of fits) {
      expect(fit.diode).toEqual(fitDatasheet(SHEET, fit.method, { meet: 'gamma' }).diode);
    }
  });

  test('keeps to the method asked for, solved or not', () => {
    for (const method of FIT_METHODS) {
      expect(fitDatasheet(SHEET, method)).toMatchObject({ method, solved: true });
      expect(fitDatasheet(HOPELESS, method)).toMatchObject({ method, solved: false });
    }
  });

  test('warns where the module’s voltage moves otherwise with temperature than the datasheet says', () => {
    // The translation takes no coefficient of voltage; at A = 1.41 it gives -218 mV/K.
    const fit = fitDatasheet(SHEET, 'simultaneous');
    expect(codesOf(fit)).toEqual(['TEMPERATURE_MISS']);
    const { message, hint } = fit.warnings[0]!;
    expect(message).toMatch(
      /^the datasheet's Voc moves by -123 mV\/K, the fitted module's by -21\d mV/,
    );
    // As the hint says.
    expect(hint).toMatch(/^The exact method, the default, meets it/);
    expect(codesOf(fitDatasheet(SHEET))).toEqual([]);
  });

  test('makes a module of the datasheet, whose curve at STC is that of the diode', () => {
    const { module, diode } = fitDatasheet(SHEET);
    expect(module.name).toBe('54 cells');
    expect(module.cellsInSeries).toBe(54);
    expect(module.reference).toBe(diode);
    expect(module.behaviour).toEqual({ technology: 'poly-si', shortCircuitCoefficient: 0.0032 });
    const peak = globalPeak(module.at(uniformConditions(1000, STC_TEMPERATURE)).peaks());
    expect(peak.voltage).toBeCloseTo(26.3, 7);
    expect(peak.current).toBeCloseTo(7.61, 8);
  });

  test('holds every number of the datasheet against the model, in the units of the file', () => {
    const { agreements } = fitDatasheet({ ...SHEET, slopeAtShortCircuit: -0.008 });
    expect(agreements.map(({ field }) => field)).toEqual([
      'isc_A',
      'voc_V',
      'vmp_V',
      'imp_A',
      'pmp_W',
      'current_at_vmp_A',
      'slope_at_isc_A_per_V',
      'beta_voc_mV_per_K',
      'gamma_pmp_pct_per_K',
    ]);
    for (const { datasheet, model, miss } of agreements) {
      expect(miss).toBeCloseTo((model - datasheet) / Math.abs(datasheet), 14);
    }
    const value = (name: string) => agreements.find(({ field }) => field === name)!;
    expect(value('beta_voc_mV_per_K').datasheet).toBe(-123);
    expect(value('gamma_pmp_pct_per_K').datasheet).toBeCloseTo(-0.47, 14);
    expect(value('pmp_W').datasheet).toBe(26.3 * 7.61);
    // Silicon: what every such model gives, whatever the datasheet.
    expect(value('beta_voc_mV_per_K').model).toBeLessThan(-90);
    expect(value('beta_voc_mV_per_K').model).toBeGreaterThan(-140);
  });

  test('gives the model’s own number as the miss where the datasheet says 0', () => {
    const { agreements } = fitDatasheet({ ...SHEET, slopeAtShortCircuit: 0 });
    const slope = agreements.find(({ field }) => field === 'slope_at_isc_A_per_V')!;
    expect(slope.datasheet).toBe(0);
    expect(slope.miss).toBe(slope.model);
  });

  test('is held against common practice: A from 1 to 2, exp(Voc / VT) of order 1e9 for silicon', () => {
    const { practice, ideality } = fitDatasheet(SHEET);
    expect(practice).toHaveLength(2);
    expect(practice[0]).toEqual({
      says: 'ideality factor between 1 and 2',
      value: ideality,
      holds: true,
    });
    expect(practice[1]!.says).toContain('exp(Voc / VT) of order 1e9');
    expect(practice[1]!.value).toBeCloseTo(
      Math.exp(32.9 / (54 * ideality * 0.02569257912108585)),
      -4,
    );
    expect(practice[1]!.holds).toBe(true);
  });

  test('does not expect the growth of silicon from other materials', () => {
    const { practice } = fitDatasheet({ ...SHEET, technology: 'a-si-triple', cellsInSeries: 18 });
    expect(practice.map(({ says }) => says)).toEqual(['ideality factor between 3 and 6']);
  });

  test('sees that A acts mostly near the peak: elsewhere the curves of all candidates agree', () => {
    // Common practice. Isc and Voc are shared; at half of Vmp A moves the current far less than at
    // the knee between peak and open circuit.
    const { candidates } = fitDatasheet(SHEET, 'sweep');
    const spread = (voltage: number): number => {
      const currents = candidates
        .filter(({ feasible, ideality }) => feasible && ideality <= 1.4)
        .map(({ diode }) => new SingleDiodeCurve(diode).current(voltage));
      return Math.max(...currents) - Math.min(...currents);
    };
    expect(spread(0.5 * 26.3)).toBeLessThan(0.01 * spread(28));
  });
});
