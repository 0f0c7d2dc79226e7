/** Datasheets made from curves, as exact or as rounded as wanted. */
import { globalPeak } from '../../src/source/curve.js';
import type { Datasheet } from '../../src/source/datasheet.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import type { AnyModule } from './any-diode.js';

export interface DatasheetForm {
  readonly slopes: 'both' | 'at short circuit' | 'at open circuit' | 'none';
  /** Significant figures of the printed numbers; all of them by default. */
  readonly figures?: number;
}

/** What a datasheet of this module says. */
export function datasheetOf(module: AnyModule, form: DatasheetForm): Datasheet {
  const { slopes, figures = 17 } = form;
  const print = (value: number): number => Number(value.toPrecision(figures));
  const curve = new SingleDiodeCurve(module.diode);
  const peak = globalPeak(curve.peaks());
  const voc = curve.openCircuitVoltage;
  return {
    name: 'any module',
    technology: module.technology,
    cellsInSeries: module.cellsInSeries,
    shortCircuitCurrent: print(curve.shortCircuitCurrent),
    openCircuitVoltage: print(voc),
    peakCurrent: print(peak.current),
    peakVoltage: print(peak.voltage),
    shortCircuitCoefficient: 0.0005 * curve.shortCircuitCurrent,
    openCircuitCoefficient: -0.003 * voc,
    ...(slopes === 'both' || slopes === 'at short circuit'
      ? { slopeAtShortCircuit: print(curve.slope(0)) }
      : {}),
    ...(slopes === 'both' || slopes === 'at open circuit'
      ? { slopeAtOpenCircuit: print(curve.slope(voc)) }
      : {}),
  };
}

/** Vmp Imp / (Voc Isc). */
export const fillFactor = (d: Datasheet): number =>
  (d.peakVoltage * d.peakCurrent) / (d.openCircuitVoltage * d.shortCircuitCurrent);
