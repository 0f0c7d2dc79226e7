/** What exact-curves.ts says it proves, held against random modules and against brute force. */
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import {
  exactCurve,
  spanOfIdealityVoltage,
  spanWithoutSeriesResistance,
  spanWithoutShunt,
} from '../../../src/source/fit/exact-curves.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { datasheetOf } from '../any-datasheet.js';
import { anyModule, type AnyModule } from '../any-diode.js';

const modules = fc
  .integer({ min: 0, max: 1e9 })
  .map((seed) => anyModule(new Random(seed)))
  // Others have hardly a knee: datasheets of a fill factor below 0.3 are refused as well.
  .filter((module) => {
    const { peakVoltage, peakCurrent, ...ends } = datasheetOf(module, { slopes: 'none' });
    const product = ends.shortCircuitCurrent * ends.openCircuitVoltage;
    return (peakVoltage * peakCurrent) / product >= 0.3;
  });

const kneeSpan = ({ diode }: AnyModule): number => {
  const curve = new SingleDiodeCurve(diode);
  const { voltage, current } = curve.peaks()[0]!;
  const junction = voltage + current * diode.seriesResistance;
  return (curve.openCircuitVoltage - junction) / diode.idealityVoltage;
};

describe('The family of exact curves', () => {
  test('holds the curve of every module, 1 to 200 cells, at its knee span', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const { diode } = exactCurve(datasheetOf(module, { slopes: 'none' }), kneeSpan(module));
        const made = module.diode;
        const resistance = new SingleDiodeCurve(made).openCircuitVoltage / made.photocurrent;
        // The datasheet's own rounding, amplified by small differences: 2 Imp - Isc and the like.
        expect(Math.abs(diode.idealityVoltage / made.idealityVoltage - 1)).toBeLessThan(1e-11);
        expect(Math.abs(diode.photocurrent / made.photocurrent - 1)).toBeLessThan(1e-12);
        const series = diode.seriesResistance - made.seriesResistance;
        expect(Math.abs(series) / resistance).toBeLessThan(1e-11);
        const shunt = diode.shuntConductance - made.shuntConductance;
        expect(Math.abs(shunt) * resistance).toBeLessThan(1e-11);
      }),
      { seed: 921, numRuns: 1000 },
    );
  });

  test('meets the three points to 1e-12 and the flat peak to 1e-11 of Imp, at any feasible span', () => {
    fc.assert(
      fc.property(modules, fc.double({ min: 1, max: 4, noNaN: true }), (module, factor) => {
        const sheet = datasheetOf(module, { slopes: 'none', figures: 4 });
        const least = leastFeasibleSpan(sheet);
        fc.pre(least !== undefined);
        const { diode } = exactCurve(sheet, factor * least);
        // Beyond, I0 is too small for a double number.
        fc.pre(sheet.openCircuitVoltage / diode.idealityVoltage < 690);
        const curve = new SingleDiodeCurve(nonNegative(diode));
        const { shortCircuitCurrent: isc, peakCurrent: imp, peakVoltage: vmp } = sheet;
        expect(Math.abs(curve.shortCircuitCurrent / isc - 1)).toBeLessThan(1e-12);
        expect(Math.abs(curve.openCircuitVoltage / sheet.openCircuitVoltage - 1)).toBeLessThan(
          1e-12,
        );
        expect(Math.abs(curve.current(vmp) / imp - 1)).toBeLessThan(1e-12);
        expect(Math.abs(1 + (vmp * curve.slope(vmp)) / imp)).toBeLessThan(1e-11);
      }),
      { seed: 922, numRuns: 1000 },
    );
  });

  test('runs one way: with the span rise Rs and 1/Rsh, and falls a', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const sheet = datasheetOf(module, { slopes: 'none' });
        const least = leastFeasibleSpan(sheet);
        fc.pre(least !== undefined);
        const curves = Array.from({ length: 40 }, (_, i) =>
          exactCurve(sheet, least * (1 + 0.05 * i)),
        );
        for (let i = 1; i < curves.length; i += 1) {
          const [before, after] = [curves[i - 1]!.diode, curves[i]!.diode];
          expect(after.idealityVoltage).toBeLessThan(before.idealityVoltage);
          expect(after.seriesResistance).toBeGreaterThan(before.seriesResistance);
          // 1/Rsh levels off: to within rounding.
          const slack = 1e-13 * (sheet.shortCircuitCurrent / sheet.openCircuitVoltage);
          expect(after.shuntConductance).toBeGreaterThan(before.shuntConductance - slack);
        }
      }),
      { seed: 923, numRuns: 300 },
    );
  });

  test('has at its ends no Rs left, or no shunt path, and past them less than none', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const sheet = datasheetOf(module, { slopes: 'none' });
        const unit = sheet.openCircuitVoltage / sheet.shortCircuitCurrent;
        const series = spanWithoutSeriesResistance(sheet);
        if (series !== undefined) {
          const past = exactCurve(sheet, 0.99 * series).diode;
          expect(Math.abs(exactCurve(sheet, series).diode.seriesResistance) / unit).toBeLessThan(
            1e-12,
          );
          // Past an infinite a, everything turns over.
          if (past.idealityVoltage > 0) expect(past.seriesResistance).toBeLessThan(0);
        }
        const shunt = spanWithoutShunt(sheet);
        if (shunt !== undefined) {
          const at = exactCurve(sheet, shunt).diode.shuntConductance;
          expect(Math.abs(at) * unit).toBeLessThan(1e-12);
          const past = exactCurve(sheet, 0.99 * shunt).diode;
          if (past.idealityVoltage > 0) expect(past.shuntConductance).toBeLessThan(0);
        }
      }),
      { seed: 924, numRuns: 500 },
    );
  });

  test('has one curve for an ideality voltage', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const sheet = datasheetOf(module, { slopes: 'none' });
        const span = spanOfIdealityVoltage(sheet, module.diode.idealityVoltage);
        expect(Math.abs(span / kneeSpan(module) - 1)).toBeLessThan(1e-10);
        const { diode } = exactCurve(sheet, span);
        expect(Math.abs(diode.idealityVoltage / module.diode.idealityVoltage - 1)).toBeLessThan(
          1e-13,
        );
      }),
      { seed: 925, numRuns: 500 },
    );
  });

  test('leaves no curve out: whatever A and Rs meet all four conditions belong to it', () => {
    // By brute force, from the equations alone: for given a and Rs the points are three linear
    // equations; the slope of power is then scanned over Rs for changes of sign.
    const sheet = {
      ...{ shortCircuitCurrent: 8.21, openCircuitVoltage: 32.9 },
      ...{ peakCurrent: 7.61, peakVoltage: 26.3 },
    };
    const most = (32.9 - 26.3) / 7.61;
    for (let a = 0.6; a < 3; a += 0.1) {
      const found: number[] = [];
      for (let i = 1; i < 4000; i += 1) {
        const [below, above] = [(i - 1) / 4000, i / 4000].map((share) => most * (2 * share - 1));
        if (slopeOfPower(a, below!) > 0 !== slopeOfPower(a, above!) > 0) {
          found.push(0.5 * (below! + above!));
        }
      }
      expect(found).toHaveLength(1);
      const { seriesResistance } = exactCurve(sheet, spanOfIdealityVoltage(sheet, a)).diode;
      expect(Math.abs(found[0]! - seriesResistance)).toBeLessThan(most / 2000);
    }

    function slopeOfPower(a: number, rs: number): number {
      const u = [8.21 * rs, 26.3 + 7.61 * rs, 32.9];
      const growth = u.map((each) => Math.exp((each - 32.9) / a));
      // Isc - Imp and Imp - 0 over X and Gsh, by Cramer's rule.
      const [x1, x2] = [growth[1]! - growth[0]!, growth[2]! - growth[1]!];
      const [d1, d2] = [u[1]! - u[0]!, u[2]! - u[1]!];
      const determinant = x1 * d2 - x2 * d1;
      const diode = (0.6 * d2 - 7.61 * d1) / determinant;
      const shunt = (x1 * 7.61 - x2 * 0.6) / determinant;
      const g = (diode / a) * growth[1]! + shunt;
      return 7.61 - (26.3 * g) / (1 + rs * g);
    }
  });
});

function leastFeasibleSpan(sheet: Parameters<typeof spanWithoutShunt>[0]): number | undefined {
  const spans = [spanWithoutSeriesResistance(sheet), spanWithoutShunt(sheet)].filter(
    (span) => span !== undefined,
  );
  return spans.length === 0 ? undefined : Math.max(...spans);
}

const nonNegative = (diode: AnyModule['diode']): AnyModule['diode'] => ({
  ...diode,
  seriesResistance: Math.max(diode.seriesResistance, 0),
  shuntConductance: Math.max(diode.shuntConductance, 0),
});
