import type { Datasheet } from '../../src/source/datasheet.js';

/** The 54-cell module of Villalva, Gazoli and Ruppert Filho 2009. */
export const VILLALVA_DATASHEET: Datasheet = {
  name: '54 cells',
  technology: 'poly-si',
  cellsInSeries: 54,
  shortCircuitCurrent: 8.21,
  openCircuitVoltage: 32.9,
  peakCurrent: 7.61,
  peakVoltage: 26.3,
  shortCircuitCoefficient: 0.0032,
  openCircuitCoefficient: -0.123,
};
