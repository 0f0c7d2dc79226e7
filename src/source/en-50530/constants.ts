/**
 * The constants of the EN 50530 source. The text of the standard was not at hand, and what its
 * amendment A1:2013 changed was not established: the source is patterned on the standard, and no
 * conformity is claimed.
 */
import type { WattsPerSquareMetre } from '../../quantities.js';

export interface En50530Constants {
  readonly title: string;
  /** FF_U = U_MPP / U_OC at STC. */
  readonly voltageFillFactor: number;
  /** FF_I = I_MPP / I_SC at STC. */
  readonly currentFillFactor: number;
  /** C_G, in W/m². */
  readonly irradianceConstant: WattsPerSquareMetre;
  /** C_V. */
  readonly voltageConstant: number;
  /** C_R, in m²/W. */
  readonly irradianceSlope: number;
  /** alpha: relative change of I_SC with temperature, 1/K. */
  readonly shortCircuitCoefficient: number;
  /** beta: relative change of U_OC with temperature, 1/K. */
  readonly openCircuitCoefficient: number;
}

export const EN_50530_CONSTANTS = {
  // C_G, C_V and C_R: two independent copies that agree. FF_U, FF_I: from memory; that U_MPP at
  // 200 W/m² is 0.95 of that at 1000 W/m² bears them out. alpha, beta: from memory, unconfirmed.
  'c-si': {
    title: 'crystalline silicon',
    voltageFillFactor: 0.8,
    currentFillFactor: 0.9,
    irradianceConstant: 2.514e-3,
    voltageConstant: 8.593e-2,
    irradianceSlope: 1.088e-4,
    shortCircuitCoefficient: 0.0004,
    openCircuitCoefficient: -0.004,
  },
  // All from memory, in agreement with one restatement; that U_MPP at 200 W/m² is 0.98 of that at
  // 1000 W/m² bears out C_G, C_V and C_R.
  'thin-film': {
    title: 'thin film',
    voltageFillFactor: 0.72,
    currentFillFactor: 0.8,
    irradianceConstant: 1.252e-3,
    voltageConstant: 8.419e-2,
    irradianceSlope: 1.476e-4,
    shortCircuitCoefficient: 0.0002,
    openCircuitCoefficient: -0.002,
  },
} as const satisfies Readonly<Record<string, En50530Constants>>;

export type En50530Technology = keyof typeof EN_50530_CONSTANTS;

export const EN_50530_TECHNOLOGIES = Object.keys(EN_50530_CONSTANTS) as [
  En50530Technology,
  ...En50530Technology[],
];
