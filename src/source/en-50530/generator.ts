import { argumentFault } from '../../fault.js';
import { exp } from '../../numeric/exponential.js';
import { log1p } from '../../numeric/logarithm.js';
import {
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  type Amperes,
  type Conditions,
  type Volts,
  type WattsPerSquareMetre,
} from '../../quantities.js';
import type { Source } from '../curve.js';
import { checkOperatingRange } from '../operating-range.js';
import { EN_50530_CONSTANTS, type En50530Constants, type En50530Technology } from './constants.js';
import { DarkCurve, LitCurve, type En50530Curve } from './curve.js';

/** What a test plan says of the source. */
export interface En50530Rating {
  readonly technology: En50530Technology;
  /** U_MPP,STC, nominal: above 0. */
  readonly peakVoltage: Volts;
  /** I_MPP,STC, nominal: above 0. */
  readonly peakCurrent: Amperes;
  /** alpha in place of the technology's, 1/K; from -0.01 to 0.01. */
  readonly shortCircuitCoefficient?: number;
  /** beta in place of the technology's, 1/K; from -0.01 to 0.01. */
  readonly openCircuitCoefficient?: number;
}

/**
 * The PV source that EN 50530 and IEC 62891 describe for tests of inverters:
 *
 *     I_SC(G,T) = I_SC,STC (G/G_STC) (1 + alpha (T - T_STC))
 *     U_OC(G,T) = U_OC,STC (1 + beta (T - T_STC)) (C_V ln(G/C_G + 1) - C_R G)
 *     I_0(G)    = I_SC,STC (1 - FF_I)^(1/(1 - FF_U)) G/G_STC
 *     C_AQ      = (FF_U - 1) / ln(1 - FF_I)
 *     I(U)      = I_SC - I_0 (exp(U / (U_OC C_AQ)) - 1)
 *
 * with U_OC,STC = U_MPP,STC / FF_U and I_SC,STC = I_MPP,STC / FF_I. The form of the equations has
 * two independent copies; for the constants see `EN_50530_CONSTANTS`. Patterned on the standards;
 * no conformity is claimed.
 *
 * Nominal is not exact, by the equations themselves: U_OC at STC comes out 0.085 % (c-Si) or 0.34 %
 * (thin film) below U_OC,STC; the current there is I_0, not zero; the peak is not at FF_U U_OC and
 * FF_I I_SC, and the power at STC is 0.08 % below (c-Si) or 0.07 % above (thin film) U_MPP I_MPP.
 * The curves returned solve for their zero and their peak.
 *
 * The equations let current flow back without bound above U_OC, which is low at dawn.
 */
export class En50530Generator implements Source {
  readonly groups = 1;
  readonly constants: En50530Constants;
  /** U_OC,STC = U_MPP,STC / FF_U. */
  readonly nominalOpenCircuitVoltage: Volts;
  /** I_SC,STC = I_MPP,STC / FF_I. */
  readonly nominalShortCircuitCurrent: Amperes;
  /** C_AQ. */
  readonly curvature: number;
  /** I_0 / I_SC at STC: (1 - FF_I)^(1/(1 - FF_U)), which is exp(-1 / C_AQ). */
  readonly saturationShare: number;

  /** @throws Fault `ARGUMENT` for a number of the rating out of its range. */
  constructor(
    readonly name: string,
    readonly rating: En50530Rating,
  ) {
    this.constants = constantsOf(rating);
    const { voltageFillFactor, currentFillFactor } = this.constants;
    this.nominalOpenCircuitVoltage = rating.peakVoltage / voltageFillFactor;
    this.nominalShortCircuitCurrent = rating.peakCurrent / currentFillFactor;
    this.curvature = (voltageFillFactor - 1) / log1p(-currentFillFactor);
    this.saturationShare = exp(-1 / this.curvature);
  }

  /**
   * The curve under the conditions of the first group. At no irradiance the source neither gives
   * nor takes current.
   * @throws Fault `ARGUMENT` for irradiance outside 0 to 2000 W/m² or cells outside -60 to 120 °C.
   */
  at(conditions: Conditions): En50530Curve {
    checkOperatingRange(conditions, 0);
    const irradiance = conditions.irradiance[0]!;
    const rise = conditions.cellTemperature[0]! - STC_TEMPERATURE;
    const { shortCircuitCoefficient: alpha, openCircuitCoefficient: beta } = this.constants;
    const voltage =
      this.nominalOpenCircuitVoltage * (1 + beta * rise) * this.#voltageShare(irradiance);
    const current = this.nominalShortCircuitCurrent * (irradiance / STC_IRRADIANCE);
    const saturationCurrent = current * this.saturationShare;
    const idealityVoltage = voltage * this.curvature;
    // So little light that its numbers vanish is none.
    if (!(saturationCurrent > 0 && idealityVoltage > 0)) return new DarkCurve();
    const photocurrent = current * (1 + alpha * rise);
    const diode = { photocurrent, saturationCurrent, idealityVoltage, ...NO_LOSSES };
    return new LitCurve(diode, voltage);
  }

  /** U_OC at 25 °C over U_OC,STC. */
  #voltageShare(irradiance: WattsPerSquareMetre): number {
    const { voltageConstant, irradianceConstant, irradianceSlope } = this.constants;
    return voltageConstant * log1p(irradiance / irradianceConstant) - irradianceSlope * irradiance;
  }
}

const NO_LOSSES = { seriesResistance: 0, shuntConductance: 0 } as const;

function constantsOf(rating: En50530Rating): En50530Constants {
  const constants = EN_50530_CONSTANTS[rating.technology];
  const {
    peakVoltage,
    peakCurrent,
    shortCircuitCoefficient = constants.shortCircuitCoefficient,
    openCircuitCoefficient = constants.openCircuitCoefficient,
  } = rating;
  for (const [field, value] of Object.entries({ peakVoltage, peakCurrent })) {
    if (!(value > 0 && value <= LARGEST)) {
      throw argumentFault(field, `above 0 and at most ${LARGEST}`, value);
    }
  }
  for (const [field, value] of Object.entries({
    shortCircuitCoefficient,
    openCircuitCoefficient,
  })) {
    if (!(Math.abs(value) <= STEEPEST)) {
      throw argumentFault(field, `from -${STEEPEST} to ${STEEPEST} 1/K`, value);
    }
  }
  return { ...constants, shortCircuitCoefficient, openCircuitCoefficient };
}

/** V or A: beyond any PV array. */
export const LARGEST = 1e5;
/** 1/K: up to here neither factor vanishes between -60 and 120 °C. */
const STEEPEST = 0.01;
