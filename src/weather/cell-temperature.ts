/**
 * Cell temperature from air temperature and irradiance, in the steady state. For how cells lag
 * behind see `thermal-lag.ts`.
 */
import { argumentFault } from '../fault.js';
import type { Kelvin, WattsPerSquareMetre } from '../quantities.js';

/**
 * The classical estimate from the nominal operating cell temperature of a datasheet (800 W/m²,
 * 20 °C air, 1 m/s wind, open circuit; older IEC 61215):
 *
 *     Tc = Ta + (NOCT - 20 °C) G / (800 W/m²)
 *
 * One published copy, in agreement with memory. Newer datasheets give NMOT, of a module at its peak
 * (from memory): it may be put in as well, and gives the temperature at the peak.
 * @param air 173.15 to 353.15 K (-100 to 80 °C).
 * @param nominal NOCT, 293.15 to 373.15 K (20 to 100 °C).
 * @throws Fault `ARGUMENT`.
 */
export function noctTemperature(
  air: Kelvin,
  irradiance: WattsPerSquareMetre,
  nominal: Kelvin,
): Kelvin {
  checkWeather(air, irradiance);
  checkRange('nominal', nominal, NOCT_AIR, 373.15, 'K (20 to 100 °C)');
  return air + ((nominal - NOCT_AIR) / NOCT_IRRADIANCE) * irradiance;
}

/** Coefficients of the Faiman model. */
export interface FaimanCoefficients {
  /** U0, W/(m² K): heat loss in still air. */
  readonly stillLoss: number;
  /** U1, W s/(m³ K): how it grows with wind. */
  readonly windLoss: number;
}

/**
 * The combined fit of seven module types; single types lie from 23.5 to 26.5 and from 6.25 to 7.68
 * (one published guide, in agreement with memory).
 */
export const FAIMAN_2008: FaimanCoefficients = { stillLoss: 25, windLoss: 6.84 };

/**
 * Cooling by wind, after Faiman 2008 (Prog. Photovolt. 16:307), the basis of IEC 61853-2:
 *
 *     Tm = Ta + G / (U0 + U1 v)
 *
 * One published guide, in agreement with memory. Tm is the back of the module.
 * @param air As of `noctTemperature`.
 * @param windSpeed In the plane of the module, 0 to 100 m/s.
 * @throws Fault `ARGUMENT`.
 */
export function faimanTemperature(
  air: Kelvin,
  irradiance: WattsPerSquareMetre,
  windSpeed: number,
  coefficients: FaimanCoefficients = FAIMAN_2008,
): Kelvin {
  checkWeather(air, irradiance);
  checkRange('windSpeed', windSpeed, 0, 100, 'm/s');
  checkRange('stillLoss', coefficients.stillLoss, 1, 1000, 'W/(m² K)');
  checkRange('windLoss', coefficients.windLoss, 0, 1000, 'W s/(m³ K)');
  return air + irradiance / (coefficients.stillLoss + coefficients.windLoss * windSpeed);
}

/**
 * The simplest estimate, after Ross: Tm = Ta + k G. Published k lie from 0.02 to 0.06 K m²/W, for
 * glass-glass modules of one plant from 0.033 to 0.037 (Maturi and others 2014, one copy).
 * @param air As of `noctTemperature`.
 * @param coefficient k, 0 to 0.2 K m²/W.
 * @throws Fault `ARGUMENT`.
 */
export function rossTemperature(
  air: Kelvin,
  irradiance: WattsPerSquareMetre,
  coefficient: number,
): Kelvin {
  checkWeather(air, irradiance);
  checkRange('coefficient', coefficient, 0, 0.2, 'K m²/W');
  return air + coefficient * irradiance;
}

const NOCT_AIR: Kelvin = 293.15;
const NOCT_IRRADIANCE: WattsPerSquareMetre = 800;

function checkWeather(air: Kelvin, irradiance: WattsPerSquareMetre): void {
  checkRange('air', air, 173.15, 353.15, 'K (-100 to 80 °C)');
  checkRange('irradiance', irradiance, 0, 2000, 'W/m²');
}

function checkRange(field: string, value: number, least: number, most: number, unit: string): void {
  if (!(value >= least && value <= most)) {
    throw argumentFault(field, `from ${least} to ${most} ${unit}`, value);
  }
}
