import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { DEFAULT_SWEEP, sweepIdeality } from '../../../src/source/fit/sweep.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { TECHNOLOGIES } from '../../../src/source/technology.js';
import { datasheetOf, fillFactor } from '../any-datasheet.js';
import { anyModule } from '../any-diode.js';
import { faultOf } from '../fault-of.js';
import { VILLALVA_DATASHEET } from '../villalva-datasheet.js';

const SHEET: Datasheet = VILLALVA_DATASHEET;

/** Ordinary modules: 1 % to 5 % lost in Rs, at least 30 Voc / Isc of Rsh, silicon. */
const ordinary = fc
  .integer({ min: 0, max: 1e9 })
  .map((seed) => {
    const random = new Random(seed);
    const module = anyModule(random);
    const resistance =
      new SingleDiodeCurve(module.diode).openCircuitVoltage / module.diode.photocurrent;
    const seriesResistance = resistance * random.between(0.01, 0.05);
    const shuntConductance = 1 / (resistance * random.between(30, 1000));
    return { ...module, diode: { ...module.diode, seriesResistance, shuntConductance } };
  })
  .filter((module) => module.technology === 'mono-si' || module.technology === 'poly-si')
  .filter((module) => {
    const factor = fillFactor(datasheetOf(module, { slopes: 'none' }));
    return factor > 0.6 && factor < 0.88;
  });

describe('sweepIdeality', () => {
  test('tries ideality factors from 1 to 2, a hundredth apart, and gives all candidates', () => {
    const { candidates } = sweepIdeality(SHEET);
    expect(candidates).toHaveLength(101);
    expect(candidates[0]!.ideality).toBe(1);
    expect(candidates[100]!.ideality).toBe(2);
    expect(DEFAULT_SWEEP).toEqual({ from: 1, to: 2, step: 0.01 });
  });

  test('takes the feasible candidate that misses open circuit and peak least', () => {
    const { outcome, candidates } = sweepIdeality(SHEET);
    const feasible = candidates.filter((candidate) => candidate.feasible);
    const least = Math.min(...feasible.map((candidate) => candidate.badness));
    const best = candidates.find((candidate) => candidate.badness === least)!;
    expect(outcome.ideality).toBe(best.ideality);
    expect(outcome.diode).toBe(best.diode);
    expect(outcome.solved).toBe(true);
    for (const { badness, ...row } of candidates) {
      const { openCircuitMiss, peakVoltageMiss, peakCurrentMiss, peakPowerMiss } = row;
      const misses = [openCircuitMiss, peakVoltageMiss, peakCurrentMiss, peakPowerMiss];
      expect(badness).toBeCloseTo(Math.hypot(...misses), 14);
    }
  });

  test('without slopes passes through open circuit and peak, and has no shunt path', () => {
    for (const { diode, feasible, ideality } of sweepIdeality(SHEET).candidates) {
      if (!feasible) continue;
      expect(diode.shuntConductance).toBe(0);
      const curve = new SingleDiodeCurve(diode);
      expect(curve.current(SHEET.peakVoltage)).toBeCloseTo(SHEET.peakCurrent, 12);
      // The closed form drops the 1 beside exp(Voc / VT): a exp(-Voc / VT) of Voc.
      const idealityVoltage = 54 * ideality * 0.02569257912108585;
      const dropped = idealityVoltage * Math.exp(-32.9 / idealityVoltage);
      expect(curve.openCircuitVoltage - 32.9).toBeCloseTo(dropped, 9);
    }
  });

  test('with slopes gives candidates of exactly that Rsh + Rs, and of that slope at open circuit', () => {
    const slopes = { slopeAtShortCircuit: -1 / 415.6, slopeAtOpenCircuit: -1 / 0.4426 };
    for (const { diode, feasible } of sweepIdeality({ ...SHEET, ...slopes }).candidates) {
      expect(1 / diode.shuntConductance + diode.seriesResistance).toBeCloseTo(415.6, 9);
      if (!feasible) continue;
      const conductance =
        (diode.saturationCurrent / diode.idealityVoltage) *
          Math.exp(SHEET.openCircuitVoltage / diode.idealityVoltage) +
        diode.shuntConductance;
      expect(diode.seriesResistance + 1 / conductance).toBeCloseTo(0.4426, 12);
    }
  });

  test('marks candidates that would need a negative series resistance, and gives them none', () => {
    const { candidates } = sweepIdeality(SHEET, { from: 1, to: 3, step: 0.1 });
    const [first, last] = [candidates[0]!, candidates.at(-1)!];
    expect(first.feasible).toBe(true);
    expect(last.feasible).toBe(false);
    expect(last.diode.seriesResistance).toBe(0);
  });

  test('comes within 0.05 of A of an ordinary module with both slopes', () => {
    fc.assert(
      fc.property(ordinary, (module) => {
        const { outcome } = sweepIdeality(datasheetOf(module, { slopes: 'both' }));
        expect(outcome.solved).toBe(true);
        // The closed form leaves out Isc Rs / Rsh, up to 0.2 % of Isc here.
        expect(Math.abs(outcome.ideality - module.ideality)).toBeLessThan(0.05);
      }),
      { seed: 71, numRuns: 60 },
    );
  });

  test('solves ordinary datasheets of three or four figures, whatever slopes they give', () => {
    fc.assert(
      fc.property(
        ordinary,
        fc.constantFrom('both', 'at short circuit'),
        fc.integer({ min: 3, max: 4 }),
        (module, slopes, figures) => {
          const { outcome } = sweepIdeality(datasheetOf(module, { slopes, figures }));
          expect(outcome.solved).toBe(true);
        },
      ),
      { seed: 72, numRuns: 60 },
    );
  });

  test('never says "solved" of a curve that misses any of Voc, Vmp, Imp and Pmp by more than 1 %', () => {
    const sheets = fc.record({
      module: ordinary,
      dents: fc.tuple(
        ...Array.from({ length: 3 }, () => fc.double({ min: -0.1, max: 0.1, noNaN: true })),
      ),
    });
    let unsolved = 0;
    fc.assert(
      fc.property(sheets, ({ module, dents }) => {
        const sheet = datasheetOf(module, { slopes: 'both', figures: 4 });
        const dented = {
          ...sheet,
          peakCurrent: Math.min(
            sheet.peakCurrent * (1 + dents[0]!),
            0.99 * sheet.shortCircuitCurrent,
          ),
          peakVoltage: Math.min(
            sheet.peakVoltage * (1 + dents[1]!),
            0.99 * sheet.openCircuitVoltage,
          ),
          cellsInSeries: Math.max(1, Math.round(sheet.cellsInSeries * (1 + 3 * dents[2]!))),
        };
        const { outcome } = sweepIdeality(dented, { from: 1, to: 2, step: 0.1 });
        if (!outcome.solved) unsolved++;
        if (!outcome.solved) return;
        const curve = new SingleDiodeCurve(outcome.diode);
        const peak = curve.peaks()[0]!;
        expect(Math.abs(curve.openCircuitVoltage / dented.openCircuitVoltage - 1)).toBeLessThan(
          0.01,
        );
        expect(Math.abs(peak.voltage / dented.peakVoltage - 1)).toBeLessThan(0.01);
        expect(Math.abs(peak.current / dented.peakCurrent - 1)).toBeLessThan(0.01);
        expect(outcome.diode.seriesResistance).toBeGreaterThanOrEqual(0);
      }),
      { seed: 73, numRuns: 300 },
    );
    expect(unsolved).toBeGreaterThan(50);
  });

  test('gives finite candidates for any datasheet from 1 to 200 cells, however lossy', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 1e9 }),
        fc.constantFrom('both', 'at short circuit', 'at open circuit', 'none'),
        (seed, slopes) => {
          const module = anyModule(new Random(seed));
          const sheet = datasheetOf(module, { slopes, figures: 3 });
          fc.pre(fillFactor(sheet) > 0.3 && sheet.peakCurrent < sheet.shortCircuitCurrent);
          const { candidates } = sweepIdeality(sheet, { from: 1, to: 2, step: 0.25 });
          for (const { diode, badness, ideality } of candidates) {
            expect(Object.values(diode).every(Number.isFinite)).toBe(true);
            expect(diode.saturationCurrent).toBeGreaterThan(0);
            expect(diode.seriesResistance).toBeGreaterThanOrEqual(0);
            expect(diode.shuntConductance).toBeGreaterThanOrEqual(0);
            expect(badness).toBeGreaterThanOrEqual(0);
            expect(ideality / TECHNOLOGIES[sheet.technology].junctions).toBeLessThanOrEqual(2);
          }
        },
      ),
      { seed: 74, numRuns: 400 },
    );
  });

  test('refuses a shunt that would leave nothing for the diode', () => {
    const sheet = { ...SHEET, slopeAtShortCircuit: -8.2 / 32.9, slopeAtOpenCircuit: -1 / 2 };
    const { outcome, candidates } = sweepIdeality(sheet);
    expect(candidates.every((candidate) => !candidate.feasible)).toBe(true);
    expect(outcome.solved).toBe(false);
  });

  test('names the misses of the best candidate', () => {
    const { outcome } = sweepIdeality({ ...SHEET, cellsInSeries: 30 });
    expect(outcome.account).toMatch(
      /^the best candidate of the sweep, A = 2, misses Voc by 0\.00 %, Vmp by -[\d.]+ %, Imp by \+[\d.]+ % and Pmp by \+[\d.]+ %$/,
    );
  });

  test.each([
    ['range', { from: 0.1, to: 2, step: 0.1 }],
    ['range', { from: 1, to: 6, step: 0.1 }],
    ['range', { from: 2, to: 1, step: 0.1 }],
    ['range', { from: NaN, to: 1, step: 0.1 }],
    ['step', { from: 1, to: 2, step: 0 }],
    ['step', { from: 1, to: 2, step: -0.1 }],
    ['step', { from: 1, to: 2, step: 1e-5 }],
    ['step', { from: 1, to: 2, step: NaN }],
  ])('refuses a %s such as %o', (field, range) => {
    const { kind, problems } = faultOf(() => sweepIdeality(SHEET, range));
    expect(kind).toBe('input');
    expect(problems[0]).toMatchObject({ code: 'ARGUMENT', field });
  });

  test('takes a range of one', () => {
    const { candidates } = sweepIdeality(SHEET, { from: 1.3, to: 1.3, step: 1 });
    expect(candidates.map((candidate) => candidate.ideality)).toEqual([1.3]);
  });
});
