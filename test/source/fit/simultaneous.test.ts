import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import { globalPeak } from '../../../src/source/curve.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { fitSimultaneously } from '../../../src/source/fit/simultaneous.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { TECHNOLOGIES } from '../../../src/source/technology.js';
import { datasheetOf, fillFactor, type DatasheetForm } from '../any-datasheet.js';
import { anyModule, type AnyModule } from '../any-diode.js';
import { VILLALVA_DATASHEET } from '../villalva-datasheet.js';

const modules = fc
  .integer({ min: 0, max: 1e9 })
  .map((seed) => anyModule(new Random(seed)))
  .filter((module) => isPlausible(datasheetOf(module, { slopes: 'none' })));

/** What a datasheet file may say: see the plausibility checks. */
const isPlausible = (d: Datasheet): boolean =>
  fillFactor(d) >= 0.3 &&
  fillFactor(d) <= 0.9 &&
  d.peakVoltage < d.openCircuitVoltage &&
  d.peakCurrent < d.shortCircuitCurrent;

const SHEET: Datasheet = VILLALVA_DATASHEET;

describe('fitSimultaneously, given the exact datasheet of a module from 1 to 200 cells,', () => {
  const forms: DatasheetForm['slopes'][] = ['both', 'at short circuit'];

  test.each(forms)('finds its five parameters (slopes: %s)', (slopes) => {
    fc.assert(
      fc.property(modules, (module) => {
        const fit = fitSimultaneously(datasheetOf(module, { slopes }));
        expect(fit.solved).toBe(true);
        expectSameParameters(fit.diode, module.diode);
        // Rounding of the datasheet, amplified by (1 - Imp / Isc)^-1 and the like.
        expect(Math.abs(fit.ideality / module.ideality - 1)).toBeLessThan(1e-11);
      }),
      { seed: 61, numRuns: 500 },
    );
  });

  const shuntless = modules.map((module) => ({
    ...module,
    diode: { ...module.diode, shuntConductance: 0 },
  }));

  test.each(['at open circuit', 'none'] as const)(
    'finds its parameters without a shunt path (slopes: %s)',
    (slopes) => {
      fc.assert(
        fc.property(shuntless, (module) => {
          const sheet = datasheetOf(module, { slopes });
          fc.pre(isPlausible(sheet));
          const fit = fitSimultaneously(sheet);
          expect(fit.solved).toBe(true);
          expectSameParameters(fit.diode, module.diode);
        }),
        { seed: 62, numRuns: 500 },
      );
    },
  );

  test.each([1, 2])(
    'finds an ideality factor of exactly %d, at the end of the range',
    (ideality) => {
      const [module] = modulesOf(1, ideality);
      const fit = fitSimultaneously(datasheetOf(module!, { slopes: 'both' }));
      expect(fit.solved).toBe(true);
      expect(fit.ideality).toBeCloseTo(ideality, 10);
    },
  );

  test('takes a slope of 0 at short circuit for no shunt path', () => {
    fc.assert(
      fc.property(shuntless, (module) => {
        const sheet = datasheetOf(module, { slopes: 'none' });
        fc.pre(isPlausible(sheet));
        const fit = fitSimultaneously({ ...sheet, slopeAtShortCircuit: 0 });
        expect(fit.solved).toBe(true);
        expect(fit.diode.shuntConductance).toBe(0);
        expectSameParameters(fit.diode, module.diode);
      }),
      { seed: 67 },
    );
  });

  function expectSameParameters(found: AnyModule['diode'], made: AnyModule['diode']): void {
    const resistance = new SingleDiodeCurve(made).openCircuitVoltage / made.photocurrent;
    expect(Math.abs(found.photocurrent / made.photocurrent - 1)).toBeLessThan(1e-13);
    // I0 moves by Voc / VT, up to 60, times the relative error of A.
    expect(Math.abs(found.saturationCurrent / made.saturationCurrent - 1)).toBeLessThan(1e-9);
    const series = found.seriesResistance - made.seriesResistance;
    expect(Math.abs(series) / resistance).toBeLessThan(1e-12);
    const shunt = found.shuntConductance - made.shuntConductance;
    expect(Math.abs(shunt) * resistance).toBeLessThan(1e-13);
  }

  function modulesOf(count: number, ideality: number): AnyModule[] {
    const random = new Random(63);
    return Array.from({ length: count }, () => {
      const module = anyModule(random);
      const each = ideality / module.ideality;
      const idealityVoltage = module.diode.idealityVoltage * each;
      const growth = new SingleDiodeCurve(module.diode).openCircuitVoltage / idealityVoltage;
      const saturationCurrent = module.diode.photocurrent / Math.expm1(growth);
      const diode = { ...module.diode, idealityVoltage, saturationCurrent };
      return { ...module, technology: 'mono-si' as const, ideality, diode };
    });
  }
});

describe('fitSimultaneously, given any plausible datasheet,', () => {
  /** Rounded, dented, with slopes or without: what a file may hold, sensible or not. */
  const sheets = fc
    .record({
      module: modules,
      slopes: fc.constantFrom('both', 'at short circuit', 'at open circuit', 'none'),
      figures: fc.integer({ min: 2, max: 5 }),
      dent: fc.constantFrom(0, 0, 0.01, 0.1),
      dents: fc.tuple(
        ...Array.from({ length: 3 }, () => fc.double({ min: -1, max: 1, noNaN: true })),
      ),
    })
    .map(({ module, slopes, figures, dent, dents }) => {
      const sheet = datasheetOf(module, { slopes, figures });
      return {
        ...sheet,
        peakCurrent: sheet.peakCurrent * (1 + dent * dents[0]!),
        peakVoltage: sheet.peakVoltage * (1 + dent * dents[1]!),
        openCircuitVoltage: sheet.openCircuitVoltage * (1 + dent * dents[2]!),
      };
    })
    .map(withPossibleSlopes)
    .filter(isPlausible);

  function withPossibleSlopes(sheet: Datasheet): Datasheet {
    const { slopeAtShortCircuit: flat, slopeAtOpenCircuit: steep } = sheet;
    const least = (sheet.peakCurrent - sheet.shortCircuitCurrent) / sheet.peakVoltage;
    const most = -sheet.peakCurrent / (sheet.openCircuitVoltage - sheet.peakVoltage);
    return {
      ...sheet,
      ...(flat === undefined ? {} : { slopeAtShortCircuit: Math.max(flat, least) }),
      ...(steep === undefined ? {} : { slopeAtOpenCircuit: Math.min(steep, most) }),
    };
  }

  test('says "solved" only of a curve that meets every condition to 1e-9', () => {
    let solved = 0;
    fc.assert(
      fc.property(sheets, (sheet) => {
        const fit = fitSimultaneously(sheet);
        if (!fit.solved) return;
        solved++;
        const curve = new SingleDiodeCurve(fit.diode);
        const { shortCircuitCurrent: isc, openCircuitVoltage: voc } = sheet;
        expect(Math.abs(curve.shortCircuitCurrent / isc - 1)).toBeLessThan(1e-9);
        expect(Math.abs(curve.openCircuitVoltage / voc - 1)).toBeLessThan(1e-9);
        expect(Math.abs(curve.current(sheet.peakVoltage) / sheet.peakCurrent - 1)).toBeLessThan(
          1e-9,
        );
        const { slopeAtShortCircuit: flat } = sheet;
        if (flat !== undefined && fit.diode.shuntConductance > 0) {
          expect(Math.abs(curve.slope(0) / flat - 1)).toBeLessThan(1e-9);
        } else if (flat !== undefined) {
          // Flatter than the diode alone makes it.
          expect(curve.slope(0)).toBeLessThanOrEqual(flat);
        }
        if (sheet.slopeAtOpenCircuit === undefined) {
          const peak = globalPeak(curve.peaks());
          expect(Math.abs(peak.voltage / sheet.peakVoltage - 1)).toBeLessThan(2e-9);
        } else {
          expect(Math.abs(curve.slope(voc) / sheet.slopeAtOpenCircuit - 1)).toBeLessThan(2e-9);
        }
        expect(fit.account).toContain('are met together at A =');
        expect(fit.advice).toBeUndefined();
      }),
      { seed: 64, numRuns: 1500 },
    );
    expect(solved).toBeGreaterThan(300);
  });

  test('always gives a diode that is one, with A in range', () => {
    fc.assert(
      fc.property(sheets, (sheet) => {
        const { diode, ideality } = fitSimultaneously(sheet);
        const { junctions } = TECHNOLOGIES[sheet.technology];
        expect(ideality).toBeGreaterThanOrEqual(junctions);
        expect(ideality).toBeLessThanOrEqual(2 * junctions);
        expect(diode.photocurrent).toBeGreaterThan(0);
        expect(diode.saturationCurrent).toBeGreaterThan(0);
        expect(diode.seriesResistance).toBeGreaterThanOrEqual(0);
        expect(diode.shuntConductance).toBeGreaterThanOrEqual(0);
        expect(Object.values(diode).every(Number.isFinite)).toBe(true);
      }),
      { seed: 65, numRuns: 1000 },
    );
  });

  test('misses no solution: where it finds none, a fine search of A finds none', () => {
    // The last condition along 200 curves through the three points changes sign nowhere.
    let unsolved = 0;
    fc.assert(
      fc.property(sheets, (sheet) => {
        const fit = fitSimultaneously(sheet);
        if (fit.solved) return;
        unsolved++;
        const { junctions } = TECHNOLOGIES[sheet.technology];
        const misses = Array.from({ length: 201 }, (_, step) =>
          missByBisection(sheet, junctions * (1 + step / 200)),
        ).filter((miss) => miss !== undefined);
        expect(misses.every((miss) => miss > 0) || misses.every((miss) => miss < 0)).toBe(true);
      }),
      { seed: 66, numRuns: 100 },
    );
    expect(unsolved).toBeGreaterThan(20);
  });

  /** The last condition, from the equations alone: fixed point for Iph, I0, Gsh; bisection for Rs. */
  function missByBisection(sheet: Datasheet, ideality: number): number | undefined {
    const { peakVoltage: vmp, peakCurrent: imp, openCircuitVoltage: voc } = sheet;
    let [low, high] = [0, (voc - vmp) / imp];
    const excess = (rs: number): number => diodeThroughEnds(sheet, ideality, rs).current(vmp) - imp;
    if (excess(0) < 0) return undefined;
    for (let halving = 0; halving < 60; halving++) {
      const middle = 0.5 * (low + high);
      if (excess(middle) >= 0) low = middle;
      else high = middle;
    }
    const curve = diodeThroughEnds(sheet, ideality, low);
    return sheet.slopeAtOpenCircuit === undefined
      ? imp + vmp * curve.slope(vmp)
      : curve.slope(voc) - sheet.slopeAtOpenCircuit;
  }

  function diodeThroughEnds(sheet: Datasheet, ideality: number, rs: number): SingleDiodeCurve {
    const a = sheet.cellsInSeries * ideality * ((1.380649e-23 / 1.602176634e-19) * 298.15);
    const { shortCircuitCurrent: isc, openCircuitVoltage: voc, slopeAtShortCircuit = 0 } = sheet;
    const u1 = isc * rs;
    const shown = slopeAtShortCircuit / (1 + slopeAtShortCircuit * rs);
    let [i0, gsh, iph] = [0, 0, isc];
    for (let pass = 0; pass < 50; pass++) {
      i0 = (iph - voc * gsh) / Math.expm1(voc / a);
      gsh = Math.max(0, -shown - (i0 / a) * Math.exp(u1 / a));
      iph = isc + i0 * Math.expm1(u1 / a) + gsh * u1;
    }
    return new SingleDiodeCurve({
      photocurrent: iph,
      saturationCurrent: i0,
      idealityVoltage: a,
      seriesResistance: rs,
      shuntConductance: gsh,
    });
  }
});

describe('fitSimultaneously, where a datasheet admits no solution,', () => {
  /**
   * Without a shunt path and with I0 far below Isc - Imp the conditions have a closed solution,
   * VT = (2 Vmp - Voc) / (y / (1 - y) + ln(1 - y)), y = Imp / Isc: derived from I = Isc - I0 exp(u / VT).
   */
  function shuntlessIdeality(cells: number): string {
    const y = SHEET.peakCurrent / SHEET.shortCircuitCurrent;
    const span = 2 * SHEET.peakVoltage - SHEET.openCircuitVoltage;
    const idealityVoltage = span / (y / (1 - y) + Math.log(1 - y));
    return (idealityVoltage / (cells * 0.02569257912108585)).toFixed(3);
  }

  test('says what the nearest curve misses, where all would be met, and what to look for', () => {
    const fit = fitSimultaneously({ ...SHEET, cellsInSeries: 90 });
    expect(fit.solved).toBe(false);
    expect(fit.ideality).toBe(1);
    expect(fit.account).toMatch(
      /^no A from 1 to 2 meets open circuit, Imp at Vmp and power peaking there together; /,
    );
    expect(fit.account).toMatch(/the nearest curve, A = 1\.000, passes through the peak but has/);
    expect(fit.account).toMatch(
      /its own at [\d.]+ V, [+-][\d.]+ % from Vmp, with \+[\d.]+ % of power/,
    );
    const met = `all would be met at A = ${shuntlessIdeality(90)}`;
    expect(fit.advice).toBe(
      `${met}; look for imp_A too close to isc_A, or too many cells_in_series`,
    );
  });

  test('suspects a missing slope or too few cells where A would have to be large', () => {
    const fit = fitSimultaneously({ ...SHEET, cellsInSeries: 30 });
    expect(fit.solved).toBe(false);
    expect(fit.ideality).toBe(2);
    expect(fit.advice).toBe(
      `all would be met at A = ${shuntlessIdeality(30)}; look for slope_at_isc_A_per_V left out, ` +
        'or too few cells_in_series',
    );
  });

  test('says of a curve too square for any diode how much current is lacking', () => {
    const fit = fitSimultaneously({ ...SHEET, peakVoltage: 29.5, peakCurrent: 8.0 });
    expect(fit.solved).toBe(false);
    expect(fit.diode.seriesResistance).toBe(0);
    expect(fit.account).toMatch(/^no A from 1 to 2 gives a curve as square as this datasheet; /);
    const lack = 1 - new SingleDiodeCurve(fit.diode).current(29.5) / 8;
    expect(fit.account).toContain(`carries ${(100 * lack).toFixed(2)} % less than Imp at Vmp`);
  });

  test('compares slopes at open circuit in A/V', () => {
    const fit = fitSimultaneously({ ...SHEET, slopeAtOpenCircuit: -1.3 });
    expect(fit.solved).toBe(false);
    expect(fit.account).toMatch(/has -[\d.]+ A\/V at open circuit, not -1\.3 A\/V \(\+[\d.]+ %\)/);
    expect(fit.advice).toMatch(/look for slope_at_voc_A_per_V too flat/);
  });

  test('takes the range of all junctions of a stacked cell', () => {
    const fit = fitSimultaneously({ ...SHEET, technology: 'a-si-triple', cellsInSeries: 18 });
    expect(fit.solved).toBe(true);
    // As 54 single cells, of which A is a third.
    expect(fit.ideality / 3).toBeCloseTo(fitSimultaneously(SHEET).ideality, 9);
  });
});
