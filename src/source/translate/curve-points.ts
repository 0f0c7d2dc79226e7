import { argumentFault, Fault } from '../../fault.js';
import type { Amperes, Kelvin, Volts, WattsPerSquareMetre } from '../../quantities.js';
import { checkCellTemperature, checkIrradiance } from '../operating-range.js';

/** Points of a measured I-V curve, in any order. Both arrays have the same length. */
export interface CurvePoints {
  readonly voltage: Readonly<ArrayLike<Volts>>;
  readonly current: Readonly<ArrayLike<Amperes>>;
}

/** What the sun and the cells were at while a curve was measured, or are to be. */
export interface OperatingPoint {
  /** Above 0, at most 2000 W/m². */
  readonly irradiance: WattsPerSquareMetre;
  /** -60 to 120 °C. */
  readonly cellTemperature: Kelvin;
}

/** @throws Fault `ARGUMENT` for arrays of unequal length, fewer than two points, or no number. */
export function checkPoints({ voltage, current }: CurvePoints, field = 'points'): void {
  if (voltage.length < 2) throw argumentFault(field, 'two points at least', voltage.length);
  if (current.length !== voltage.length) {
    const expected = `one for each of the ${voltage.length} voltages`;
    throw argumentFault(`${field}.current`, expected, current.length);
  }
  for (let index = 0; index < voltage.length; index++) {
    const [v, i] = [voltage[index]!, current[index]!];
    if (!Number.isFinite(v)) throw argumentFault(`${field}.voltage[${index}]`, 'finite', v);
    if (!Number.isFinite(i)) throw argumentFault(`${field}.current[${index}]`, 'finite', i);
  }
}

/** @throws Fault `ARGUMENT`. */
export function checkOperatingPoint(point: OperatingPoint, field: string): void {
  if (point.irradiance === 0) throw argumentFault(`${field}.irradiance`, 'above 0 W/m²', 0);
  checkIrradiance(point.irradiance, `${field}.irradiance`);
  checkCellTemperature(point.cellTemperature, `${field}.cellTemperature`);
}

/** @throws Fault `ARGUMENT` where one of the numbers is not finite. */
export function checkFinite(numbers: object): void {
  for (const [field, value] of Object.entries(numbers) as [string, unknown][]) {
    if (value !== undefined && !Number.isFinite(value)) throw argumentFault(field, 'finite', value);
  }
}

/** A Fault for a value that the points do not reach. */
export function notCovered(what: string, unit: string, least: number, most: number): Fault {
  return new Fault('input', {
    code: 'NOT_COVERED',
    message: `the points do not reach ${what}: they lie from ${least} to ${most} ${unit}.`,
    hint: 'Give the value beside the points, or measure a little beyond.',
  });
}
