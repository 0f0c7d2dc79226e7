import { fromCelsius, type WattsPerSquareMetre } from '../quantities.js';
import { START_CELL_TEMPERATURE_C, START_IRRADIANCE_W_PER_M2, type Step } from './definition.js';
import type { WritableConditions } from './weather.js';

/**
 * The conditions where one block ends and the next begins. Never written again once made: the
 * pieces on both sides share its arrays.
 */
export type Level = Readonly<WritableConditions>;

/** Where a weather starts: the values given, or darkness and 25 °C, on every group. */
export const startLevel = (groups: number, given: Step): Level => ({
  irradiance: uniform(groups, given.irradiance_W_per_m2 ?? START_IRRADIANCE_W_PER_M2),
  cellTemperature: uniform(
    groups,
    fromCelsius(given.cell_temperature_C ?? START_CELL_TEMPERATURE_C),
  ),
});

/** `start` with the values that `to` sets, on every group; the others are carried through. */
export function changedLevel(start: Level, to: Step): Level {
  const { irradiance_W_per_m2: irradiance, cell_temperature_C: temperature } = to;
  const { length } = start.irradiance;
  return {
    irradiance: irradiance === undefined ? start.irradiance : uniform(length, irradiance),
    cellTemperature:
      temperature === undefined ? start.cellTemperature : uniform(length, fromCelsius(temperature)),
  };
}

/** By how much the irradiance differs, in the group where it differs most. */
export const irradianceChange = (from: Level, to: Level): WattsPerSquareMetre =>
  to.irradiance.reduce(
    (most, value, group) => Math.max(most, Math.abs(value - from.irradiance[group]!)),
    0,
  );

/** Equal for equal levels, and for no others. */
export const levelKey = ({ irradiance, cellTemperature }: Level): string =>
  `${irradiance.join()};${cellTemperature.join()}`;

const uniform = (groups: number, value: number): Float64Array =>
  new Float64Array(groups).fill(value);
