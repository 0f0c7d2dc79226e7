/**
 * Units in signatures. All quantities inside the code are in SI base units; other units appear
 * only at the edges, as suffixes of field names (`voc_V`, `temperature_C`).
 */
export type Volts = number;
export type Amperes = number;
export type Watts = number;
export type Ohms = number;
export type Siemens = number;
export type Kelvin = number;
export type Seconds = number;
/** Irradiance in the plane of the module. */
export type WattsPerSquareMetre = number;
export type AmperesPerKelvin = number;
export type VoltsPerKelvin = number;
export type AmperesPerVolt = number;

/** 0 °C. Exact by definition (SI). */
export const ZERO_CELSIUS: Kelvin = 273.15;

/** Celsius exists at the edges only. */
export const fromCelsius = (celsius: number): Kelvin => celsius + ZERO_CELSIUS;
export const toCelsius = (temperature: Kelvin): number => temperature - ZERO_CELSIUS;

/** Boltzmann constant, J/K. Exact by definition (SI, 2019). */
export const BOLTZMANN = 1.380649e-23;
/** Elementary charge, C. Exact by definition (SI, 2019). */
export const ELEMENTARY_CHARGE = 1.602176634e-19;

/** Thermal voltage kT/q of one junction; 25.692579 mV at 298.15 K. */
export const thermalVoltage = (temperature: Kelvin): Volts =>
  (BOLTZMANN / ELEMENTARY_CHARGE) * temperature;

/** Standard test conditions: 1000 W/m², 25 °C cell, AM 1.5. */
export const STC_IRRADIANCE: WattsPerSquareMetre = 1000;
export const STC_TEMPERATURE: Kelvin = 298.15;

/**
 * What the sun and the air do to a source at one instant: irradiance and cell temperature, one
 * pair per group of substrings lit alike. An unshaded source has one group.
 * Both arrays have the same length, at least 1. Hot loops overwrite one Conditions in place.
 */
export interface Conditions {
  readonly irradiance: Readonly<ArrayLike<WattsPerSquareMetre>>;
  readonly cellTemperature: Readonly<ArrayLike<Kelvin>>;
}

/** The same irradiance and cell temperature over the whole source. */
export const uniformConditions = (
  irradiance: WattsPerSquareMetre,
  cellTemperature: Kelvin,
): Conditions => ({ irradiance: [irradiance], cellTemperature: [cellTemperature] });
