/**
 * Translation of measured I-V curves, patterned on procedures 1 and 2 of IEC 60891. The equations
 * are from memory, the text of the standard was not at hand, and no conformity is claimed. For
 * procedure 3 see `iec-60891-interpolation.ts`.
 */
import { argumentFault } from '../../fault.js';
import { log } from '../../numeric/logarithm.js';
import type { Amperes, AmperesPerKelvin, Ohms, Volts, VoltsPerKelvin } from '../../quantities.js';
import {
  checkFinite,
  checkOperatingPoint,
  type CurvePoints,
  type OperatingPoint,
} from './curve-points.js';
import { FallingPoints } from './falling-points.js';

/** Points in the order of those they came from. */
export interface TranslatedPoints {
  readonly voltage: Float64Array;
  readonly current: Float64Array;
}

/** What both procedures know of the device. */
interface InternalResistance {
  /** Internal series resistance; 0 or more. */
  readonly seriesResistance: Ohms;
  /** kappa: change of the series resistance with temperature, ohm/K. */
  readonly curveCorrection: number;
}

export interface Procedure1Coefficients extends InternalResistance {
  /** alpha, absolute, at the target irradiance. */
  readonly shortCircuitCoefficient: AmperesPerKelvin;
  /** beta, absolute, at the target irradiance. */
  readonly openCircuitCoefficient: VoltsPerKelvin;
  /** Of the measured curve; read from the points if left out. */
  readonly shortCircuitCurrent?: Amperes;
}

export interface Procedure2Coefficients extends InternalResistance {
  /** alpha, relative to the short-circuit current at STC, 1/K. */
  readonly shortCircuitCoefficient: number;
  /** beta, relative to the open-circuit voltage at STC, 1/K. */
  readonly openCircuitCoefficient: number;
  /** a: relative change of open-circuit voltage with the logarithm of irradiance, some 0.06. */
  readonly irradianceCoefficient: number;
  /** Of the measured curve; read from the points if left out. */
  readonly openCircuitVoltage?: Volts;
}

/**
 * Procedure 1: every point moves by the same current, and by a voltage that goes with its current.
 *
 *     I2 = I1 + Isc1 (G2/G1 - 1) + alpha (T2 - T1)
 *     V2 = V1 - Rs (I2 - I1) - kappa I2 (T2 - T1) + beta (T2 - T1)
 *
 * Towards more light every point rises, so the result reaches open circuit only where the points
 * were measured far enough into negative current.
 * Equal conditions return the points exactly.
 *
 * Error against the single-diode model of a 54-cell silicon module, kappa = 1.4 mohm/K: from
 * 1000 W/m² and 25 °C to 800 and 47, 0.1 % of the power at the peak and 0.8 % of Isc (without kappa
 * 0.9 % and 1.9 %); to 500 W/m² at 25 °C, 2 % of power; to 200 W/m², 8 %: the equal shift does not
 * know how voltage follows the logarithm of irradiance.
 *
 * @returns New arrays in the order of the points.
 * @throws Fault `ARGUMENT` for points or conditions as of `checkPoints`, `checkOperatingPoint`, a
 * coefficient that is not finite, a negative resistance; `NOT_COVERED` where the short-circuit
 * current is needed, not given, and not among the points.
 */
export function translateByProcedure1(
  points: CurvePoints,
  from: OperatingPoint,
  to: OperatingPoint,
  coefficients: Procedure1Coefficients,
): TranslatedPoints {
  const measured = checked(points, from, to, coefficients);
  const { seriesResistance, curveCorrection, shortCircuitCurrent } = coefficients;
  const rise = to.cellTemperature - from.cellTemperature;
  const gain = to.irradiance / from.irradiance - 1;
  const lit = gain === 0 ? 0 : gain * (shortCircuitCurrent ?? measured.shortCircuitCurrent);
  const currentShift = lit + coefficients.shortCircuitCoefficient * rise;
  const voltageShift = coefficients.openCircuitCoefficient * rise;
  return moved(points, (v1, i1) => {
    const i2 = i1 + currentShift;
    return [v1 - seriesResistance * (i2 - i1) - curveCorrection * i2 * rise + voltageShift, i2];
  });
}

/**
 * Procedure 2, in its form of 2009: currents go in proportion to irradiance, and the open-circuit
 * voltage with its logarithm.
 *
 *     I2 = I1 (1 + alpha (T2 - T1)) G2/G1
 *     V2 = V1 + Voc1 (beta (T2 - T1) + a ln(G2/G1)) - Rs (I2 - I1) - kappa I2 (T2 - T1)
 *
 * Equal conditions return the points exactly. The coefficients are relative to the measured curve,
 * so translate from near the conditions they were determined at.
 *
 * Error against the same model as above: from 1000 W/m² and 25 °C to 800 and 47, 0.3 % of the power
 * at the peak and 0.6 % of Isc (without kappa 1.1 % and 2 %); to 200 W/m² at 25 °C, 0.2 % of each.
 * Back from 800 and 47 to 1000 and 25, 1.2 % of power, for the reason just given.
 *
 * @returns New arrays in the order of the points.
 * @throws Fault `ARGUMENT` as of `translateByProcedure1`; `NOT_COVERED` where the open-circuit
 * voltage is needed, not given, and not among the points.
 */
export function translateByProcedure2(
  points: CurvePoints,
  from: OperatingPoint,
  to: OperatingPoint,
  coefficients: Procedure2Coefficients,
): TranslatedPoints {
  const measured = checked(points, from, to, coefficients);
  const { seriesResistance, curveCorrection, openCircuitVoltage } = coefficients;
  const rise = to.cellTemperature - from.cellTemperature;
  const ratio = to.irradiance / from.irradiance;
  const currentRatio = (1 + coefficients.shortCircuitCoefficient * rise) * ratio;
  const share =
    coefficients.openCircuitCoefficient * rise + coefficients.irradianceCoefficient * log(ratio);
  const voltageShift =
    share === 0 ? 0 : share * (openCircuitVoltage ?? measured.openCircuitVoltage);
  return moved(points, (v1, i1) => {
    const i2 = i1 * currentRatio;
    return [v1 + voltageShift - seriesResistance * (i2 - i1) - curveCorrection * i2 * rise, i2];
  });
}

function checked(
  points: CurvePoints,
  from: OperatingPoint,
  to: OperatingPoint,
  coefficients: Procedure1Coefficients | Procedure2Coefficients,
): FallingPoints {
  const measured = new FallingPoints(points);
  checkOperatingPoint(from, 'from');
  checkOperatingPoint(to, 'to');
  checkFinite(coefficients);
  const { seriesResistance } = coefficients;
  if (seriesResistance < 0) throw argumentFault('seriesResistance', 'at least 0', seriesResistance);
  return measured;
}

function moved(
  { voltage, current }: CurvePoints,
  move: (voltage: Volts, current: Amperes) => readonly [Volts, Amperes],
): TranslatedPoints {
  const to = {
    voltage: new Float64Array(voltage.length),
    current: new Float64Array(voltage.length),
  };
  for (let index = 0; index < voltage.length; index++) {
    const [v, i] = move(voltage[index]!, current[index]!);
    to.voltage[index] = v;
    to.current[index] = i;
  }
  return to;
}
