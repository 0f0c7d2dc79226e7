/**
 * M. G. Villalva, J. R. Gazoli, E. Ruppert Filho, "Comprehensive approach to modeling and simulation
 * of photovoltaic arrays", IEEE Transactions on Power Electronics 24(5), 2009, 1198-1208: the worked
 * example, a 54-cell polycrystalline module of 200 W.
 *
 * Status of the numbers: datasheet and published parameters, two independent copies that agree.
 * Everything else was computed from them outside this project with the CODATA 2018 constants, in
 * double precision; currents marked so were computed again to 30 digits by the Lambert W solution.
 */
import { describe, expect, test } from 'vitest';
import { exp, expm1 } from '../../src/numeric/exponential.js';
import { fromCelsius, thermalVoltage, uniformConditions } from '../../src/quantities.js';
import type { Datasheet } from '../../src/source/datasheet.js';
import { fitSimultaneously } from '../../src/source/fit/simultaneous.js';
import { sweepIdeality, type SweepCandidate } from '../../src/source/fit/sweep.js';
import { Module } from '../../src/source/module.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import {
  slopeAtJunction,
  voltageAtCurrent,
  type SingleDiode,
} from '../../src/source/single-diode.js';
import { behaviourOf } from '../../src/source/translation.js';

const CELLS = 54;
/** VT = Ns A k T / q. */
const idealityVoltage = (ideality: number, celsius = 25): number =>
  CELLS * ideality * thermalVoltage(fromCelsius(celsius));

/** Two independent copies. */
const DATASHEET: Datasheet = {
  name: '54 cells, 200 W',
  technology: 'poly-si',
  cellsInSeries: CELLS,
  shortCircuitCurrent: 8.21,
  openCircuitVoltage: 32.9,
  peakCurrent: 7.61,
  peakVoltage: 26.3,
  shortCircuitCoefficient: 0.0032,
  openCircuitCoefficient: -0.123,
};

/** Two independent copies. */
const PUBLISHED: SingleDiode = {
  photocurrent: 8.214,
  saturationCurrent: 9.825e-8,
  idealityVoltage: idealityVoltage(1.3),
  seriesResistance: 0.221,
  shuntConductance: 1 / 415.405,
};

/** |found - printed| up to one unit of the last digit printed. */
function expectPrinted(found: number, printed: string): void {
  const decimals = (printed.split('e')[0]!.split('.')[1] ?? '').length;
  const exponent = Number(printed.split('e')[1] ?? 0);
  const unit = Math.pow(10, exponent - decimals);
  expect(Math.abs(found - Number(printed)), `${found}, printed ${printed}`).toBeLessThanOrEqual(
    unit,
  );
}

describe('The published parameters', () => {
  const curve = new SingleDiodeCurve(PUBLISHED);

  test.each([
    [0, 8.209632215526],
    [10, 8.185503906365],
    [20, 8.144082264096],
    [26.3, 7.609529307802],
    [30, 5.075951500953],
    [32.8, 0.187369460197],
  ])('give at %d V the current computed to 30 digits, %d A', (voltage, current) => {
    // Half of the last digit printed, 1e-12 A, and the rounding of the published 1 / Rsh.
    expect(Math.abs(curve.current(voltage) - current)).toBeLessThanOrEqual(1e-12);
  });

  test.each([
    [5, '8.197598149'],
    [15, '8.172448754'],
    [25, '7.879598500'],
    [28, '6.882000115'],
    [31, '3.656152589'],
    [32, '1.868741293'],
  ])('give at %d V the current computed in double precision, %s A', (voltage, current) => {
    expectPrinted(curve.current(voltage), current);
  });

  test('give the key points computed from them', () => {
    const peak = curve.peaks()[0]!;
    expectPrinted(curve.shortCircuitCurrent, '8.209632216');
    expectPrinted(curve.openCircuitVoltage, '32.883414292');
    expectPrinted(peak.voltage, '26.349002');
    expectPrinted(peak.current, '7.595569');
    expectPrinted(peak.power, '200.135672525');
  });

  test('give the resistances that their slopes show: -dV/dI at short circuit and at open circuit', () => {
    const atOpen = -1 / curve.slope(curve.openCircuitVoltage);
    expectPrinted(-1 / curve.slope(0), '415.600297');
    expectPrinted(atOpen, '0.442597');
    // Common practice: Rs is about the slope less VT / Isc.
    expectPrinted(PUBLISHED.idealityVoltage / 8.21, '0.219686');
    expectPrinted(atOpen - PUBLISHED.idealityVoltage / 8.21, '0.222911');
  });

  test('follow the rule of the paper for I0, and for Iph from Isc, Rs and Rsh', () => {
    expectPrinted(8.21 / expm1(32.9 / idealityVoltage(1.3)), '9.825010258e-8');
    expectPrinted((8.21 * (415.405 + 0.221)) / 415.405, '8.214367810');
  });
});

describe('Under the rules of the paper, Rs and Rsh held, the curve at', () => {
  // I0 at STC is that of the rule, 9.825010258e-8 A, as it was for the grid.
  const module = new Module(
    '54 cells, 200 W',
    CELLS,
    { ...PUBLISHED, saturationCurrent: 8.21 / expm1(32.9 / idealityVoltage(1.3)) },
    behaviourOf(DATASHEET, 'villalva-2009'),
  );

  test.each([
    [1000, 25, '8.209632', '32.883412', '26.349001', '7.595569', '200.135658'],
    [1000, 50, '8.289587', '29.808956', '23.264514', '7.554795', '175.758640'],
    [1000, 75, '8.369511', '26.734757', '20.259041', '7.479692', '151.531388'],
    [1000, 0, '8.129675', '35.958134', '29.503695', '7.610880', '224.549070'],
    [1000, -10, '8.097692', '37.188099', '30.783684', '7.611329', '234.304739'],
    [800, 25, '6.567706', '32.476825', '26.259944', '6.069764', '159.391660'],
    [800, 47, '6.623994', '29.741736', '23.509858', '6.044444', '142.104027'],
    [600, 25, '4.925779', '31.951173', '26.058346', '4.540724', '118.323757'],
    [400, 25, '3.283853', '31.206522', '25.647746', '3.009341', '77.182807'],
    [200, 25, '1.641926', '29.917211', '24.710378', '1.477578', '36.511501'],
    [100, 25, '0.820963', '28.590060', '23.565062', '0.713645', '16.817099'],
  ])('%d W/m² and %d °C is the one computed', (irradiance, celsius, isc, voc, vmp, imp, pmp) => {
    const curve = module.at(uniformConditions(irradiance, fromCelsius(celsius)));
    const peak = curve.peaks()[0]!;
    expectPrinted(curve.shortCircuitCurrent, isc);
    expectPrinted(curve.openCircuitVoltage, voc);
    expectPrinted(peak.voltage, vmp);
    expectPrinted(peak.current, imp);
    expectPrinted(peak.power, pmp);
  });
});

describe('The closed form of the sweep on the datasheet', () => {
  const ROWS: [ideality: number, i0: string, i0WithShunt: string, ...rest: string[]][] = [
    [1.0, '4.1279075521e-10', '4.0880866600e-10', '0.390317', '200.54698', '25.9079', '0.4040'],
    [1.1, '3.5642448083e-9', '3.5298614283e-9', '0.342621', '200.36387', '25.9993', '0.2209'],
    [1.2, '2.1486491005e-8', '2.1279216144e-8', '0.294925', '200.24025', '26.0937', '0.0972'],
    [1.3, '9.8250102578e-8', '9.7302307242e-8', '0.247229', '200.16872', '26.1906', '0.0257'],
    [1.4, '3.6156875535e-7', '3.5808077621e-7', '0.199533', '200.14322', '26.2896', '0.0002'],
    [1.5, '1.1184101155e-6', '1.1076209419e-6'],
    [1.6, '3.0040701454e-6', '2.9750895433e-6'],
    [1.8, '1.5591654660e-5', '1.5441216541e-5'],
    [2.0, '5.8215635031e-5', '5.7653634545e-5'],
  ];

  const candidateAt = (sheet: Datasheet, ideality: number): SweepCandidate =>
    sweepIdeality(sheet, { from: ideality, to: ideality, step: 1 }).candidates[0]!;

  test.each(ROWS)(
    'at A = %d gives the I0 computed, with and without a shunt path',
    (ideality, ...row) => {
      const [i0, i0WithShunt] = row;
      const { diode } = candidateAt(DATASHEET, ideality);
      // The column without a shunt path has Isc / (exp(Voc / VT) - 1); the closed form drops the 1.
      const growth = exp(32.9 / idealityVoltage(ideality));
      expectPrinted((diode.saturationCurrent * growth) / (growth - 1), i0);

      // The other has the closed form for Rsh = 415.405 ohm: slopes that imply it, and Rs = 0.221.
      const implied = {
        ...PUBLISHED,
        idealityVoltage: idealityVoltage(ideality),
        saturationCurrent: Number(i0WithShunt),
      };
      const slopes = {
        slopeAtShortCircuit: -1 / (415.405 + 0.221),
        slopeAtOpenCircuit: slopeAtJunction(implied, 32.9),
      };
      const withShunt = candidateAt({ ...DATASHEET, ...slopes }, ideality).diode;
      expect(1 / withShunt.shuntConductance).toBeCloseTo(415.405, 6);
      expect(withShunt.seriesResistance).toBeCloseTo(0.221, 9);
      expectPrinted(withShunt.saturationCurrent, i0WithShunt);
    },
  );

  test.each(ROWS.slice(0, 5))(
    'at A = %d gives Rs, peak power, its voltage and its excess as computed',
    (ideality, ...row) => {
      const [, , rs, power, voltage, excess] = row;
      const { diode, feasible, peakPowerMiss } = candidateAt(DATASHEET, ideality);
      expect(feasible).toBe(true);
      expectPrinted(diode.seriesResistance, rs!);
      const peak = new SingleDiodeCurve(diode).peaks()[0]!;
      expectPrinted(peak.power, power!);
      expectPrinted(peak.voltage, voltage!);
      expectPrinted(peakPowerMiss * 200.143, excess!);
    },
  );

  test('takes the A whose curve peaks at the datasheet power: 1.4, where the excess vanishes', () => {
    expect(Math.abs(sweepIdeality(DATASHEET).outcome.ideality - 1.4)).toBeLessThanOrEqual(0.02);
  });

  test('has exp(Voc / VT) of order 1e9 for silicon, for A at the low end (common practice)', () => {
    // 8.21 / 4.13e-10 = 2e10 at A = 1, 8e7 at A = 1.3.
    const growths = [1, 1.1, 1.2, 1.3].map((ideality) => exp(32.9 / idealityVoltage(ideality)));
    expect(Math.max(...growths)).toBeLessThan(1e11);
    expect(Math.min(...growths)).toBeGreaterThan(1e7);
  });
});

describe('The curve of A = 1.3 that peaks exactly at the datasheet’s peak', () => {
  // Computed as the tangent solution under the rules of the paper.
  const TANGENT: SingleDiode = {
    photocurrent: 8.213170841,
    saturationCurrent: 8.21 / expm1(32.9 / idealityVoltage(1.3)),
    idealityVoltage: idealityVoltage(1.3),
    seriesResistance: 0.22913633,
    shuntConductance: 1 / 593.284,
  };
  const curve = new SingleDiodeCurve(TANGENT);

  test('has its peak there', () => {
    const peak = curve.peaks()[0]!;
    // Rsh is printed to 1e-6 of itself, so Imp to 4e-8 A; the flat peak moves Vmp by more.
    expect(Math.abs(peak.voltage - 26.3)).toBeLessThan(1e-5);
    expect(Math.abs(peak.current - 7.61)).toBeLessThan(3e-6);
  });

  test('is found by the simultaneous solution from its own ends and the datasheet’s peak', () => {
    const fit = fitSimultaneously({
      ...DATASHEET,
      shortCircuitCurrent: curve.shortCircuitCurrent,
      openCircuitVoltage: curve.openCircuitVoltage,
      slopeAtShortCircuit: curve.slope(0),
    });
    expect(fit.solved).toBe(true);
    // What the six digits of Rsh leave open, amplified by Isc / (Isc - Imp) = 14.
    expect(Math.abs(fit.ideality - 1.3)).toBeLessThan(2e-6);
    expect(Math.abs(fit.diode.seriesResistance - 0.22913633)).toBeLessThan(1e-6);
    expect(Math.abs(1 / fit.diode.shuntConductance / 593.284 - 1)).toBeLessThan(1e-8);
    expect(Math.abs(fit.diode.photocurrent - 8.213170841)).toBeLessThan(1e-8);
  });
});

describe('Modules of the published parameters in series, Iph in proportion to irradiance, each', () => {
  const at = (irradiance: number): SingleDiode => ({
    ...PUBLISHED,
    photocurrent: (8.214 * irradiance) / 1000,
  });
  const sum = (values: number[]): number => values.reduce((total, value) => total + value, 0);

  test.each([
    [[1000, 600, 300], '95.5091'],
    [[1000, 1000, 500], '97.3838'],
    [[1000, 500, 500], '96.1174'],
    [[1000, 800, 600, 400], '128.5179'],
    [[1000, 1000, 1000, 300], '129.3247'],
  ])(
    'lit with %o W/m², have the open-circuit voltages whose sum was computed, %s V',
    (lit, voc) => {
      expectPrinted(sum(lit.map((each) => new SingleDiodeCurve(at(each)).openCircuitVoltage)), voc);
    },
  );

  // Voltage, current and power of peaks at which some modules are bypassed: those that carry the
  // current add their voltages, the others clamp at -Vb.
  test.each([
    [[1000, 600], 1, 0.5, '54.6051', '4.70114', '256.7060'],
    [[1000, 600, 300], 0, 0.5, '85.0850', '2.35918', '200.7305'],
    [[1000, 600], 1, 0, '55.0865', '4.70273', '259.0570'],
    [[1000, 1000], 1, 0.5, '52.2321', '7.59063', '396.4748'],
    [[1000, 1000, 500], 0, 0.5, '85.4061', '3.96191', '338.3710'],
    [[1000, 500, 500], 0, 0.5, '81.1165', '3.86744', '313.7130'],
    [[1000, 800, 600], 1, 0.5, '82.9457', '4.75363', '394.2926'],
    [[1000, 1000, 1000], 1, 0.5, '78.5811', '7.59228', '596.6101'],
  ])(
    'lit with %o W/m² and %d more bypassed at %d V, reach the voltage of the peak',
    (lit, ...row) => {
      const [bypassed, drop, voltage, current, power] = row;
      const carried = sum(lit.map((each) => voltageAtCurrent(at(each), Number(current))));
      const found = carried - bypassed * drop;
      // The last digit of the current moves each voltage by its slope, up to 3 V/A at these points.
      const slack = 1e-4 + lit.length * 3 * 1e-5;
      expect(Math.abs(found - Number(voltage))).toBeLessThanOrEqual(slack);
      // Voltage and current errors cancel in the power of a peak.
      expect(Math.abs(found * Number(current) - Number(power))).toBeLessThanOrEqual(1e-4 + 1e-4);
    },
  );
});
