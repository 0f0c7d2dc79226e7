/** The series-resistance condition of the simultaneous solution, in its two forms. */
import type { AmperesPerVolt } from '../../quantities.js';
import { globalPeak } from '../curve.js';
import type { Datasheet } from '../datasheet.js';
import { slopeAtJunction, type SingleDiode } from '../single-diode.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import { signedPercent } from './outcome.js';

export interface LastCondition {
  readonly name: string;
  /** Zero where the condition is met; relative, so that misses compare. */
  miss(diode: SingleDiode): number;
  /** Completes "the curve …" in words for people. */
  describe(diode: SingleDiode): string;
  /** What in the datasheet makes the ideality factor come out too small or too large. */
  readonly suspects: { readonly small: string; readonly large: string };
}

/** The slope at open circuit where the datasheet gives it, else no slope of power at the peak. */
export function lastCondition(datasheet: Datasheet): LastCondition {
  return datasheet.slopeAtOpenCircuit === undefined
    ? powerIsFlat(datasheet)
    : slopeIs(datasheet, datasheet.slopeAtOpenCircuit);
}

function slopeIs(datasheet: Datasheet, slope: AmperesPerVolt): LastCondition {
  const { openCircuitVoltage } = datasheet;
  const miss = (diode: SingleDiode): number =>
    slopeAtJunction(diode, openCircuitVoltage) / slope - 1;
  return {
    name: 'the slope at open circuit',
    miss,
    describe: (diode) =>
      `has ${figures(slopeAtJunction(diode, openCircuitVoltage))} A/V at open circuit, not ` +
      `${figures(slope)} A/V (${signedPercent(miss(diode))})`,
    suspects: {
      small: 'slope_at_voc_A_per_V too flat, or too many cells_in_series',
      large: `slope_at_voc_A_per_V too steep, ${shuntSuspect(datasheet)}, or too few cells_in_series`,
    },
  };
}

function powerIsFlat(datasheet: Datasheet): LastCondition {
  const { peakVoltage, peakCurrent, slopeAtShortCircuit } = datasheet;
  const steepShunt = slopeAtShortCircuit === undefined ? '' : 'slope_at_isc_A_per_V too steep, ';
  return {
    name: 'power peaking there',
    // dP/dV = I + V dI/dV, over Imp.
    miss: (diode) => {
      const u = peakVoltage + peakCurrent * diode.seriesResistance;
      return 1 + (peakVoltage * slopeAtJunction(diode, u)) / peakCurrent;
    },
    describe: (diode) => {
      const peak = globalPeak(new SingleDiodeCurve(diode).peaks());
      const excess = peak.power / (peakVoltage * peakCurrent) - 1;
      return (
        `passes through the peak but has its own at ${figures(peak.voltage)} V, ` +
        `${signedPercent(peak.voltage / peakVoltage - 1)} from Vmp, with ` +
        `${signedPercent(excess)} of power`
      );
    },
    suspects: {
      small: `${steepShunt}imp_A too close to isc_A, or too many cells_in_series`,
      large: `${shuntSuspect(datasheet)}, or too few cells_in_series`,
    },
  };
}

const shuntSuspect = (datasheet: Datasheet): string =>
  datasheet.slopeAtShortCircuit === undefined
    ? 'slope_at_isc_A_per_V left out'
    : 'slope_at_isc_A_per_V too flat';

const figures = (value: number): number => Number(value.toPrecision(4));
