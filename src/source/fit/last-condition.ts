/** The series-resistance condition of the simultaneous solution, in its two forms. */
import type { Amperes, Volts } from '../../quantities.js';
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
  const { slopeAtOpenCircuit, openCircuitVoltage, peakVoltage, peakCurrent } = datasheet;
  return slopeAtOpenCircuit === undefined
    ? powerIsFlat(peakVoltage, peakCurrent, datasheet.slopeAtShortCircuit !== undefined)
    : slopeIs(slopeAtOpenCircuit, openCircuitVoltage);
}

function slopeIs(slope: number, openCircuitVoltage: Volts): LastCondition {
  const miss = (diode: SingleDiode): number =>
    slopeAtJunction(diode, openCircuitVoltage) / slope - 1;
  return {
    name: 'the slope at open circuit',
    miss,
    describe: (diode) =>
      `has a slope of ${slopeAtJunction(diode, openCircuitVoltage).toPrecision(4)} A/V at open ` +
      `circuit instead of ${slope} A/V (${signedPercent(miss(diode))})`,
    suspects: {
      small: 'slope_at_voc_A_per_V too flat, or too many cells_in_series',
      large: 'slope_at_voc_A_per_V too steep, or too few cells_in_series',
    },
  };
}

function powerIsFlat(
  peakVoltage: Volts,
  peakCurrent: Amperes,
  isShunted: boolean,
): LastCondition {
  return {
    name: 'the flat top of power at Vmp',
    // dP/dV = I + V dI/dV, over Imp.
    miss: (diode) => {
      const u = peakVoltage + peakCurrent * diode.seriesResistance;
      return 1 + (peakVoltage * slopeAtJunction(diode, u)) / peakCurrent;
    },
    describe: (diode) => {
      const peak = new SingleDiodeCurve(diode).peaks()[0]!;
      const excess = peak.power / (peakVoltage * peakCurrent) - 1;
      return (
        `passes through Vmp and Imp but peaks at ${peak.voltage.toPrecision(4)} V instead of ` +
        `${peakVoltage} V, with ${signedPercent(excess)} of power`
      );
    },
    suspects: {
      small: 'imp_A too close to isc_A, or too many cells_in_series',
      large: isShunted
        ? 'slope_at_isc_A_per_V too flat, or too few cells_in_series'
        : 'slope_at_isc_A_per_V left out, or too few cells_in_series',
    },
  };
}
