/** The irradiances and cell temperatures that sources are asked for. */
import { argumentFault } from '../fault.js';
import type { Conditions, Kelvin, WattsPerSquareMetre } from '../quantities.js';

/** Twice the sun at its best; cloud edges reach 1.6 times. */
const MOST_IRRADIANCE: WattsPerSquareMetre = 2000;
/** -60 °C. */
export const COLDEST_CELL: Kelvin = 213.15;
/** 120 °C. */
export const HOTTEST_CELL: Kelvin = 393.15;

/**
 * Refuses conditions of a group outside 0 to 2000 W/m² or -60 to 120 °C.
 * @throws Fault `ARGUMENT`.
 */
export function checkOperatingRange(conditions: Conditions, group: number): void {
  checkIrradiance(conditions.irradiance[group]!);
  checkCellTemperature(conditions.cellTemperature[group]!);
}

/** @throws Fault `ARGUMENT` outside 0 to 2000 W/m². */
export function checkIrradiance(irradiance: WattsPerSquareMetre, field = 'irradiance'): void {
  if (!(irradiance >= 0 && irradiance <= MOST_IRRADIANCE)) {
    throw argumentFault(field, `from 0 to ${MOST_IRRADIANCE} W/m²`, irradiance);
  }
}

/** @throws Fault `ARGUMENT` outside -60 to 120 °C. */
export function checkCellTemperature(temperature: Kelvin, field = 'cellTemperature'): void {
  if (!(temperature >= COLDEST_CELL - ROUNDING && temperature <= HOTTEST_CELL + ROUNDING)) {
    const range = `from ${COLDEST_CELL} to ${HOTTEST_CELL} K (-60 to 120 °C)`;
    throw argumentFault(field, range, temperature);
  }
}

/** -60 °C is 213.14999999999998 K once it has been through a sum. */
const ROUNDING = 1e-9;
