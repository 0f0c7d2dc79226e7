/**
 * The measured points of T. Easwarakhanthan, J. Bottin, I. Bouhouch, C. Boutrit, International
 * Journal of Solar Energy 4(1), 1986, 1-12: a 57 mm silicon cell at 33 °C and a module of 36 cells
 * at 45 °C, both at 1000 W/m². Status: five independent copies agree; sums of the columns checked.
 */
import type { MeasuredPoint } from '../../../src/source/measured/curve-data.js';

const numbers = (text: string): number[] => text.trim().split(/\s+/).map(Number);

export const CELL_VOLTAGES = numbers(`
  -0.2057 -0.1291 -0.0588 0.0057 0.0646 0.1185 0.1678 0.2132 0.2545 0.2924 0.3269 0.3585 0.3873
  0.4137 0.4373 0.4590 0.4784 0.4960 0.5119 0.5265 0.5398 0.5521 0.5633 0.5736 0.5833 0.5900`);
export const CELL_CURRENTS = numbers(`
  0.7640 0.7620 0.7605 0.7605 0.7600 0.7590 0.7570 0.7570 0.7555 0.7540 0.7505 0.7465 0.7385
  0.7280 0.7065 0.6755 0.6320 0.5730 0.4990 0.4130 0.3165 0.2120 0.1035 -0.0100 -0.1230 -0.2100`);
export const MODULE_VOLTAGES = numbers(`
  0.1248 1.8093 3.3511 4.7622 6.0538 7.2364 8.3189 9.3097 10.2163 11.0449 11.8018 12.4929 13.1231
  13.6983 14.2221 14.6995 15.1346 15.5311 15.8929 16.2229 16.5241 16.7987 17.0499 17.2793 17.4885`);
export const MODULE_CURRENTS = numbers(`
  1.0315 1.0300 1.0260 1.0220 1.0180 1.0155 1.0140 1.0100 1.0035 0.9880 0.9630 0.9255 0.8725
  0.8075 0.7265 0.6345 0.5345 0.4275 0.3185 0.2085 0.1010 -0.0080 -0.1110 -0.2090 -0.3030`);

const points = (voltages: readonly number[], currents: readonly number[]): MeasuredPoint[] =>
  voltages.map((voltage, index) => ({ voltage, current: currents[index]!, line: index + 2 }));

export const CELL_POINTS = points(CELL_VOLTAGES, CELL_CURRENTS);
export const MODULE_POINTS = points(MODULE_VOLTAGES, MODULE_CURRENTS);
