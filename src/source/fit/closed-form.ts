import { exp } from '../../numeric/exponential.js';
import type { Ohms, Siemens } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import { junctionConductance, junctionVoltage, type SingleDiode } from '../single-diode.js';
import { idealityVoltageAtStc } from './outcome.js';

/** A closed-form diode, and whether its resistances came out as a module can have them. */
export interface ClosedForm {
  readonly diode: SingleDiode;
  /** False where Rs would be negative, or the shunt would leave nothing for the diode at Voc. */
  readonly feasible: boolean;
}

/**
 * The five parameters at one ideality factor in closed form:
 *
 *     I0  = (Isc - Voc / Rsh) / exp(Voc / VT)      Iph = Isc (Rsh + Rs) / Rsh
 *     Rsh = -dV/dI at short circuit - Rs           (infinite where no slope is given)
 *     Rs  = -dV/dI at open circuit - 1 / (I0 / VT exp(Voc / VT) + 1 / Rsh)
 *
 * Where no slope at open circuit is given, Rs is such that the curve passes through the peak.
 *
 * The form drops the -1 of the diode equation, Isc Rs / Rsh at open circuit and the diode current
 * at short circuit; usual modules meet open and short circuit to a few thousandths beside a shunt
 * path, and to 1e-5 without. Resistances that would be negative are held at zero.
 */
export function closedForm(datasheet: Datasheet, ideality: number): ClosedForm {
  const idealityVoltage = idealityVoltageAtStc(datasheet, ideality);
  let wanted = 0;
  let form = withSeriesResistance(datasheet, idealityVoltage, wanted);
  // Rs moves the others only through Rs / Rsh, so each pass gains about three digits.
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const next = seriesResistanceFor(datasheet, form.diode);
    const step = next - wanted;
    wanted = next;
    form = withSeriesResistance(datasheet, idealityVoltage, Math.max(wanted, 0));
    if (Math.abs(step) <= SETTLED * Math.abs(wanted)) break;
  }
  return { diode: form.diode, feasible: form.feasible && wanted >= 0 };
}

const SETTLED = 1e-15;
const MOST_PASSES = 40;
/** Of the current at open circuit that a shunt path may carry: something is left for the diode. */
const MOST_THROUGH_SHUNT = 0.99;

function withSeriesResistance(
  datasheet: Datasheet,
  idealityVoltage: number,
  seriesResistance: Ohms,
): ClosedForm {
  const { shortCircuitCurrent, openCircuitVoltage, slopeAtShortCircuit = 0 } = datasheet;
  const steepness = Math.abs(slopeAtShortCircuit);
  const shown: Siemens = steepness / (1 - steepness * seriesResistance);
  const most: Siemens = (MOST_THROUGH_SHUNT * shortCircuitCurrent) / openCircuitVoltage;
  const feasible = shown >= 0 && shown <= most;
  const shuntConductance = feasible ? shown : most;
  return {
    feasible,
    diode: {
      photocurrent: shortCircuitCurrent * (1 + seriesResistance * shuntConductance),
      saturationCurrent:
        (shortCircuitCurrent - openCircuitVoltage * shuntConductance) /
        exp(openCircuitVoltage / idealityVoltage),
      idealityVoltage,
      seriesResistance,
      shuntConductance,
    },
  };
}

function seriesResistanceFor(datasheet: Datasheet, diode: SingleDiode): Ohms {
  const { slopeAtOpenCircuit, openCircuitVoltage, peakCurrent, peakVoltage } = datasheet;
  return slopeAtOpenCircuit === undefined
    ? (junctionVoltage(diode, peakCurrent) - peakVoltage) / peakCurrent
    : -1 / slopeAtOpenCircuit - 1 / junctionConductance(diode, openCircuitVoltage);
}
