import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import { fromCelsius, uniformConditions } from '../../../src/quantities.js';
import { globalPeak } from '../../../src/source/curve.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { fitExactly } from '../../../src/source/fit/exact.js';
import type { FifthChoice } from '../../../src/source/fit/fifth-condition.js';
import { Module } from '../../../src/source/module.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { TECHNOLOGIES } from '../../../src/source/technology.js';
import { anyModule, type AnyModule } from '../any-diode.js';
import { faultOf } from '../fault-of.js';
import { VILLALVA_DATASHEET } from '../villalva-datasheet.js';

const SHEET: Datasheet = {
  ...VILLALVA_DATASHEET,
  peakPowerCoefficient: -0.0047,
};

/** Modules whose Voc is still some at 50 °C. */
const modules = fc
  .integer({ min: 0, max: 1e9 })
  .map((seed) => anyModule(new Random(seed)))
  .filter((module) => {
    const { voltage, current } = new SingleDiodeCurve(module.diode).peaks()[0]!;
    const { shortCircuitCurrent: isc, openCircuitVoltage: voc } = new SingleDiodeCurve(
      module.diode,
    );
    return (voltage * current) / (voc * isc) > 0.3;
  });

/** Everything that a datasheet could say of a module, to all digits. */
function fullSheet({ technology, cellsInSeries, diode }: AnyModule): Datasheet {
  const shortCircuitCoefficient = 0.0005 * diode.photocurrent;
  const module = new Module('any', cellsInSeries, diode, { technology, shortCircuitCoefficient });
  const at = (celsius: number) => module.at(uniformConditions(1000, fromCelsius(celsius)));
  const [curve, warm] = [at(25), at(50)];
  const [peak, warmPeak] = [curve, warm].map((each) => globalPeak(each.peaks())) as [
    ReturnType<typeof globalPeak>,
    ReturnType<typeof globalPeak>,
  ];
  return {
    ...{ name: 'any', technology, cellsInSeries, shortCircuitCoefficient },
    shortCircuitCurrent: curve.shortCircuitCurrent,
    openCircuitVoltage: curve.openCircuitVoltage,
    peakCurrent: peak.current,
    peakVoltage: peak.voltage,
    openCircuitCoefficient: (warm.openCircuitVoltage - curve.openCircuitVoltage) / 25,
    peakPowerCoefficient: (warmPeak.power / peak.power - 1) / 25,
    slopeAtShortCircuit: curve.slope(0),
    slopeAtOpenCircuit: curve.slope(curve.openCircuitVoltage),
  };
}

describe('fitExactly, given all that can be said of a module,', () => {
  // How well each number tells A: a relative error of it comes back as so much in A.
  test.each([
    ['beta', 1e-10],
    ['gamma', 1e-8],
  ] as const)('finds its five parameters from %s', (meet, accuracy) => {
    fc.assert(
      fc.property(modules, (module) => {
        const fit = fitExactly(fullSheet(module), { meet });
        expect(fit.solved).toBe(true);
        expect(fit.fifth!.met).toBe(true);
        expect(Math.abs(fit.ideality / module.ideality - 1)).toBeLessThan(accuracy);
        const made = module.diode;
        const unit = new SingleDiodeCurve(made).openCircuitVoltage / made.photocurrent;
        const series = fit.diode.seriesResistance - made.seriesResistance;
        const shunt = fit.diode.shuntConductance - made.shuntConductance;
        expect(Math.abs(series) / unit).toBeLessThan(accuracy);
        expect(Math.abs(shunt) * unit).toBeLessThan(accuracy);
      }),
      { seed: 931, numRuns: 400 },
    );
  });

  test.each(['slope-at-isc', 'slope-at-voc'] as const)(
    'finds its ideality factor from %s, as far as the slope tells it',
    (meet) => {
      fc.assert(
        fc.property(modules, (module) => {
          const sheet = fullSheet(module);
          const fit = fitExactly(sheet, { meet });
          expect(fit.solved).toBe(true);
          expect(Math.abs(fit.fifth!.miss)).toBeLessThan(1e-9);
          // A slope that hardly moves with A tells it to few digits.
          expect(Math.abs(fit.ideality / module.ideality - 1)).toBeLessThan(1e-5);
        }),
        { seed: 932, numRuns: 400 },
      );
    },
  );

  test('finds its resistances from its A', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const fit = fitExactly(fullSheet(module), { ideality: module.ideality });
        expect(fit.fifth).toMatchObject({ name: 'ideality', met: true });
        expect(Math.abs(fit.ideality / module.ideality - 1)).toBeLessThan(1e-12);
      }),
      { seed: 933, numRuns: 400 },
    );
  });

  test('meets each condition at one A at most: all run one way along the feasible range', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const sheet = fullSheet(module);
        const { feasible } = fitExactly(sheet);
        const { least, most } = feasible!;
        const sheets = Array.from({ length: 25 }, (_, i) => {
          const ideality = least + ((most - least) * i) / 24;
          const { diode } = fitExactly(sheet, { ideality });
          return fullSheet({ ...module, diode, ideality });
        });
        for (const [field, direction] of [
          ['openCircuitCoefficient', -1],
          ['peakPowerCoefficient', -1],
          ['slopeAtShortCircuit', 1],
          ['slopeAtOpenCircuit', -1],
        ] as const) {
          const values = sheets.map((each) => direction * each[field]!);
          // But for rounding: coefficients are differences over 25 K.
          const rounding = 1e-12 * Math.abs(values[0]!);
          for (let i = 1; i < values.length; i += 1) {
            expect(values[i]!).toBeGreaterThan(values[i - 1]! - rounding);
          }
        }
      }),
      { seed: 934, numRuns: 150 },
    );
  });
});

describe('fitExactly', () => {
  test('takes what the datasheet gives in the order beta, gamma, slopes, typical A', () => {
    const settledBy = (sheet: Parameters<typeof fitExactly>[0]): string =>
      fitExactly(sheet).fifth!.name;
    const slopes = { slopeAtShortCircuit: -0.006, slopeAtOpenCircuit: -2.1 };
    expect(settledBy({ ...SHEET, ...slopes })).toBe('beta');
    const { openCircuitCoefficient: beta, ...withoutBeta } = { ...SHEET, ...slopes };
    expect(beta).toBe(-0.123);
    expect(settledBy(withoutBeta)).toBe('gamma');
    const { peakPowerCoefficient: gamma, ...withoutBoth } = withoutBeta;
    expect(gamma).toBe(-0.0047);
    expect(settledBy(withoutBoth)).toBe('slope-at-isc');
    const { slopeAtShortCircuit: flat, ...withSteep } = withoutBoth;
    expect(flat).toBe(-0.006);
    expect(settledBy(withSteep)).toBe('slope-at-voc');
    const { slopeAtOpenCircuit: steep, ...bare } = withSteep;
    expect(steep).toBe(-2.1);
    expect(settledBy(bare)).toBe('typical');
    expect(fitExactly(bare).ideality).toBeCloseTo(TECHNOLOGIES['poly-si'].typicalIdeality, 12);
  });

  test('reports the feasible range and what ends it: here the shunt path, there Rs, or junctions', () => {
    // Without a shunt path the conditions have a closed solution where I0 is far below Isc - Imp:
    // VT = (2 Vmp - Voc) / (y / (1 - y) + ln(1 - y)), y = Imp / Isc.
    const y = 7.61 / 8.21;
    const shuntless = (2 * 26.3 - 32.9) / (y / (1 - y) + Math.log(1 - y));
    const { feasible } = fitExactly(SHEET);
    expect(feasible!.least).toBeCloseTo(2 / 3, 12);
    expect(feasible!.leastEnd).toBe('junction');
    expect(feasible!.most).toBeCloseTo(shuntless / (54 * 0.02569257912108585), 5);
    expect(feasible!.mostEnd).toBe('shunt-path');

    const square = fitExactly({ ...SHEET, peakVoltage: 28.5 });
    expect(square.feasible!.mostEnd).toBe('series-resistance');
    const soft = fitExactly({ ...SHEET, cellsInSeries: 20 });
    expect(soft.feasible!.mostEnd).toBe('junction');
    expect(soft.feasible!.most).toBe(3);
  });

  test('takes exactly nothing for what an end of the range leaves nothing of', () => {
    expect(fitExactly(SHEET, { ideality: 2 }).diode.shuntConductance).toBe(0);
    const square = { ...SHEET, peakVoltage: 28.5 };
    expect(fitExactly(square, { ideality: 2 }).diode.seriesResistance).toBe(0);
  });

  test('takes the nearest end where no A meets the condition, and says what it misses', () => {
    const fit = fitExactly({ ...SHEET, openCircuitCoefficient: -0.25 });
    expect(fit.solved).toBe(true);
    expect(fit.ideality).toBe(fit.feasible!.most);
    const { met, miss, value, wanted } = fit.fifth!;
    expect(met).toBe(false);
    expect(wanted).toBe(-0.25);
    expect(miss).toBeCloseTo((value + 0.25) / 0.25, 14);
    expect(fit.account).toMatch(
      /A = 1\.4105 comes nearest to the coefficient of Voc, which it misses by \+1\d\.\d\d %$/,
    );
    const low = fitExactly({ ...SHEET, openCircuitCoefficient: -0.04 });
    expect(low.ideality).toBeCloseTo(2 / 3, 10);
    expect(low.fifth!.miss).toBeLessThan(0);
  });

  test('goes beyond the range of junctions for an A asked for, as far as I0 is a number', () => {
    const fit = fitExactly(SHEET, { ideality: 0.3 });
    expect(fit.ideality).toBeCloseTo(0.3, 12);
    const thin = fitExactly(
      { ...SHEET, technology: 'a-si-triple', cellsInSeries: 12 },
      { ideality: 0.1 },
    );
    expect(thin.feasible!.leastEnd).toBe('saturation-current');
    expect(thin.diode.saturationCurrent).toBeGreaterThan(0);
    expect(new SingleDiodeCurve(thin.diode).openCircuitVoltage / 32.9).toBeCloseTo(1, 10);
  });

  test.each<[FifthChoice, string]>([
    [{ ideality: 0.05 }, 'ideality: must be from 0.1 to 10, found 0.05.'],
    [{ ideality: NaN }, 'ideality: must be from 0.1 to 10, found NaN.'],
    [{ span: 0 }, 'span: must be from -60 to 60 K and not 0, found 0.'],
    [{ span: 70 }, 'span: must be from -60 to 60 K and not 0, found 70.'],
    [
      { meet: 'slope-at-voc' },
      'meet: must be a condition that the datasheet gives a number for, found slope-at-voc.',
    ],
  ])('refuses %j', (choice, message) => {
    expect(faultOf(() => fitExactly(SHEET, choice)).message).toBe(message);
  });
});

describe('fitExactly, where no curve is exact,', () => {
  test('says how far the peak lies from half of Voc or Isc, and the nearest feasible value', () => {
    const low = fitExactly({ ...SHEET, peakVoltage: 16 });
    expect(low.solved).toBe(false);
    expect(low.account).toBe(
      'the peak of a curve that bends downward lies above half of Voc, 16.45 V, and vmp_V is 16 V',
    );
    expect(low.remedies![0]).toMatchObject({ field: 'vmp_V', found: 16, nearest: 16.45 });
    const weak = fitExactly({ ...SHEET, peakCurrent: 4 });
    expect(weak.account).toContain('above half of Isc, 4.105 A, and imp_A is 4 A');
    expect(weak.advice).toBe(
      'check imp_A first, found 4: the nearest feasible is imp_A 4.105 (+2.63 %); ' +
        'otherwise isc_A 8 (-2.56 %)',
    );
  });

  test('says of a knee too square by how much, and what would do, a slight change of a point first', () => {
    const fit = fitExactly({ ...SHEET, peakCurrent: 7.9 });
    expect(fit.solved).toBe(false);
    expect(fit.account).toBe(
      "the knee is squarer than any junction's: without a negative shunt conductance it takes A " +
        'at most 0.639, and junctions have 0.667 at least',
    );
    expect(fit.remedies!.map(({ field }) => field)).toEqual(['imp_A', 'isc_A', 'cells_in_series']);
  });

  test('suspects the count of cells first where no rounding explains it and half of them would do', () => {
    const fit = fitExactly({ ...SHEET, cellsInSeries: 150 });
    expect(fit.remedies![0]!.field).toBe('cells_in_series');
    expect(fit.advice).toMatch(/^check cells_in_series first, found 150: .* cells_in_series 114 /);
  });

  test('finds remedies that work, and no nearer ones', () => {
    const keys = {
      isc_A: 'shortCircuitCurrent',
      voc_V: 'openCircuitVoltage',
      imp_A: 'peakCurrent',
      vmp_V: 'peakVoltage',
      cells_in_series: 'cellsInSeries',
    } as const;
    for (const change of [{ peakCurrent: 7.95 }, { cellsInSeries: 130 }, { peakVoltage: 30 }]) {
      const sheet = { ...SHEET, ...change };
      const { remedies } = fitExactly(sheet);
      expect(remedies!.length).toBeGreaterThan(1);
      for (const { field, found, nearest } of remedies!) {
        const isCount = field === 'cells_in_series';
        // Past the value by a millionth of it; short of it by as much, or by a cell.
        const step = isCount ? 1 : 1e-6 * (found - nearest);
        const at = (value: number) => fitExactly({ ...sheet, [keys[field]]: value }).solved;
        expect(at(isCount ? nearest : nearest - step - 1e-6 * Math.sign(found - nearest))).toBe(
          true,
        );
        expect(at(nearest + (isCount ? 1 : step + 1e-6 * Math.sign(found - nearest)))).toBe(false);
      }
    }
  });

  test('still gives a diode that is one', () => {
    for (const change of [
      ...[{ peakVoltage: 16 }, { peakCurrent: 4 }, { peakCurrent: 8.2 }, { peakCurrent: 8.2099 }],
      ...[{ peakVoltage: 33 }, { peakCurrent: 9 }, { peakVoltage: 32.8, peakCurrent: 8.2 }],
    ]) {
      const { solved, diode, remedies, account } = fitExactly({ ...SHEET, ...change });
      expect(solved).toBe(false);
      expect(account).not.toBe('');
      expect(Array.isArray(remedies)).toBe(true);
      expect(Object.values(diode).every((value) => Number.isFinite(value) && value >= 0)).toBe(
        true,
      );
      expect(diode.saturationCurrent).toBeGreaterThan(0);
    }
  });
});
