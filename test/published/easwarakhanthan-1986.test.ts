/**
 * T. Easwarakhanthan, J. Bottin, I. Bouhouch, C. Boutrit, "Nonlinear minimization algorithm for
 * determining the solar cell parameters with microcomputers", International Journal of Solar Energy
 * 4(1), 1986, 1-12: a 57 mm silicon cell at 33 °C and a 36-cell module at 45 °C.
 *
 * Status: the measured points, five independent copies; the best-known parameters from memory,
 * confirmed by the root mean square error published for them (9.8602e-4 A for the cell; for the
 * module from memory). The key points and currents of the curves were computed from the parameters
 * outside this project. All with the constants of that literature.
 */
import { describe, expect, test } from 'vitest';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import type { SingleDiode } from '../../src/source/single-diode.js';

/** k / q of the literature on these curves. */
const THERMAL = 1.3806503e-23 / 1.60217646e-19;

const CELL: SingleDiode = {
  photocurrent: 0.76077553,
  saturationCurrent: 3.23020816e-7,
  idealityVoltage: 1.481183595 * THERMAL * 306.15,
  seriesResistance: 0.036377093,
  shuntConductance: 1 / 53.718524,
};
const MODULE: SingleDiode = {
  photocurrent: 1.0305143,
  saturationCurrent: 3.4822631e-6,
  idealityVoltage: 48.6428351 * THERMAL * 318.15,
  seriesResistance: 1.201271,
  shuntConductance: 1 / 981.9822,
};

const numbers = (text: string): number[] => text.trim().split(/\s+/).map(Number);

const CELL_VOLTAGES = numbers(`
  -0.2057 -0.1291 -0.0588 0.0057 0.0646 0.1185 0.1678 0.2132 0.2545 0.2924 0.3269 0.3585 0.3873
  0.4137 0.4373 0.4590 0.4784 0.4960 0.5119 0.5265 0.5398 0.5521 0.5633 0.5736 0.5833 0.5900`);
const CELL_MEASURED = numbers(`
  0.7640 0.7620 0.7605 0.7605 0.7600 0.7590 0.7570 0.7570 0.7555 0.7540 0.7505 0.7465 0.7385
  0.7280 0.7065 0.6755 0.6320 0.5730 0.4990 0.4130 0.3165 0.2120 0.1035 -0.0100 -0.1230 -0.2100`);
const CELL_CURRENTS = numbers(`
  0.7640876 0.7626626 0.7613547 0.7601542 0.7590559 0.7580430 0.7570916 0.7561421 0.7550873
  0.7536645 0.7513881 0.7473483 0.7400969 0.7273968 0.7069533 0.6752949 0.6308843 0.5720821
  0.4994916 0.4134936 0.3172195 0.2121032 0.1027214 -0.0092488 -0.1243813 -0.2091931`);
const MODULE_VOLTAGES = numbers(`
  0.1248 1.8093 3.3511 4.7622 6.0538 7.2364 8.3189 9.3097 10.2163 11.0449 11.8018 12.4929 13.1231
  13.6983 14.2221 14.6995 15.1346 15.5311 15.8929 16.2229 16.5241 16.7987 17.0499 17.2793 17.4885`);
const MODULE_MEASURED = numbers(`
  1.0315 1.0300 1.0260 1.0220 1.0180 1.0155 1.0140 1.0100 1.0035 0.9880 0.9630 0.9255 0.8725
  0.8075 0.7265 0.6345 0.5345 0.4275 0.3185 0.2085 0.1010 -0.0080 -0.1110 -0.2090 -0.3030`);
const MODULE_CURRENTS = numbers(`
  1.0291221 1.0273844 1.0257421 1.0241040 1.0222834 1.0199174 1.0163508 1.0104914 1.0006788
  0.9846533 0.9596974 0.9230488 0.8725882 0.8073101 0.7279578 0.6364662 0.5356961 0.4288162
  0.3186687 0.2078571 0.0983542 -0.0081693 -0.1109685 -0.2091176 -0.3020224`);

const sum = (values: readonly number[]): number =>
  values.reduce((total, value) => total + value, 0);
const rms = (errors: readonly number[]): number =>
  Math.sqrt(sum(errors.map((error) => error * error)) / errors.length);

test('The measured points add up as in the correct copies', () => {
  expect(sum(CELL_VOLTAGES)).toBeCloseTo(8.5207, 9);
  expect(sum(CELL_MEASURED)).toBeCloseTo(14.341, 9);
  expect(sum(MODULE_VOLTAGES)).toBeCloseTo(290.1871, 9);
  expect(sum(MODULE_MEASURED)).toBeCloseTo(16.047, 9);
});

describe.each([
  {
    name: 'cell',
    diode: CELL,
    voltages: CELL_VOLTAGES,
    measured: CELL_MEASURED,
    currents: CELL_CURRENTS,
    keyPoints: [0.760260365, 0.572785148, 0.450644883, 0.689349911, 0.31065201],
    implicit: 9.86022e-4,
    exact: 7.75391e-4,
  },
  {
    name: 'module',
    diode: MODULE,
    voltages: MODULE_VOLTAGES,
    measured: MODULE_MEASURED,
    currents: MODULE_CURRENTS,
    keyPoints: [1.029249888, 16.778193534, 12.645889125, 0.91251717, 11.539590952],
    implicit: 2.42507e-3,
    exact: 2.13853e-3,
  },
])(
  'The best-known curve of the $name',
  ({ diode, voltages, measured, currents, keyPoints, ...errors }) => {
    const curve = new SingleDiodeCurve(diode);

    test('has the currents computed at the measured voltages, beyond both ends too', () => {
      voltages.forEach((voltage, index) => {
        // Half a unit of the seventh decimal, and as much for the digits of the parameters.
        expect(Math.abs(curve.current(voltage) - currents[index]!)).toBeLessThan(1e-7);
      });
    });

    test('has the key points computed', () => {
      const peak = curve.peaks()[0]!;
      const { shortCircuitCurrent, openCircuitVoltage } = curve;
      const found = [
        shortCircuitCurrent,
        openCircuitVoltage,
        peak.voltage,
        peak.current,
        peak.power,
      ];
      // The parameters carry eight or nine digits.
      found.forEach((value, index) => {
        expect(Math.abs(value / keyPoints[index]! - 1)).toBeLessThan(3e-8);
      });
    });

    test('misses the measured currents by the error computed, solved exactly', () => {
      const misses = voltages.map((voltage, index) => curve.current(voltage) - measured[index]!);
      expect(Math.abs(rms(misses) - errors.exact)).toBeLessThan(1e-8);
    });

    test('misses them by the error published, where the measured current stands on both sides', () => {
      const misses = voltages.map((voltage, index) => {
        const u = voltage + measured[index]! * diode.seriesResistance;
        const diodeCurrent = diode.saturationCurrent * Math.expm1(u / diode.idealityVoltage);
        return diode.photocurrent - diodeCurrent - u * diode.shuntConductance - measured[index]!;
      });
      expect(Math.abs(rms(misses) - errors.implicit)).toBeLessThan(1e-8);
    });
  },
);
