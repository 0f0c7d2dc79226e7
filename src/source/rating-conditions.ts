/**
 * The conditions at which modules are rated, and the pairs of the performance matrix: what a grid
 * of curves may well cover. Patterned on IEC 61853-1:2011, whose text was not at hand; no conformity
 * is claimed.
 */
import { fromCelsius, type Kelvin, type WattsPerSquareMetre } from '../quantities.js';

/** Irradiance and cell temperature; of NOCT the air's, from which the module makes its own. */
export type RatingCondition = {
  readonly title: string;
  readonly irradiance: WattsPerSquareMetre;
} & ({ readonly cellTemperature: Kelvin } | { readonly airTemperature: Kelvin });

/** From memory, unconfirmed, but for STC, which every datasheet states. */
export const RATING_CONDITIONS = {
  stc: {
    title: 'standard test conditions',
    irradiance: 1000,
    cellTemperature: fromCelsius(25),
  },
  noct: {
    title: 'nominal operating cell temperature, with 1 m/s of wind',
    irradiance: 800,
    airTemperature: fromCelsius(20),
  },
  lic: {
    title: 'low irradiance conditions',
    irradiance: 200,
    cellTemperature: fromCelsius(25),
  },
  htc: {
    title: 'high temperature conditions',
    irradiance: 1000,
    cellTemperature: fromCelsius(75),
  },
  ltc: {
    title: 'low temperature conditions',
    irradiance: 500,
    cellTemperature: fromCelsius(15),
  },
} as const satisfies Readonly<Record<string, RatingCondition>>;

/** A place of the matrix. */
export interface MatrixPair {
  readonly irradiance: WattsPerSquareMetre;
  readonly cellTemperature: Kelvin;
}

/**
 * Cell temperatures in °C at each irradiance. The seven irradiances have two independent copies, the
 * four temperatures one; which corners are left out is from memory.
 */
const MATRIX: readonly (readonly [WattsPerSquareMetre, readonly number[]])[] = [
  [1100, [25, 50, 75]],
  [1000, [15, 25, 50, 75]],
  [800, [15, 25, 50, 75]],
  [600, [15, 25, 50, 75]],
  [400, [15, 25, 50]],
  [200, [15, 25]],
  [100, [15, 25]],
];

/** The 22 pairs, from the most irradiance down and, at each, from cold to hot. */
export const PERFORMANCE_MATRIX: readonly MatrixPair[] = MATRIX.flatMap(([irradiance, cells]) =>
  cells.map((celsius) => ({ irradiance, cellTemperature: fromCelsius(celsius) })),
);
