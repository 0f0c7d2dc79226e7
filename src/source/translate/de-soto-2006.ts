import { exp } from '../../numeric/exponential.js';
import {
  BOLTZMANN,
  ELEMENTARY_CHARGE,
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  type AmperesPerKelvin,
  type Kelvin,
  type WattsPerSquareMetre,
} from '../../quantities.js';
import type { SingleDiode } from '../single-diode.js';
import { TECHNOLOGIES, type TechnologyName } from '../technology.js';

/** What these rules need beside the five parameters at STC. They are used where none are named. */
export interface DeSotoBehaviour {
  readonly translation?: 'de-soto-2006';
  readonly technology: TechnologyName;
  /** Change of short-circuit current with cell temperature at 1000 W/m². */
  readonly shortCircuitCoefficient: AmperesPerKelvin;
}

/**
 * The five parameters at another irradiance and cell temperature, from those at STC, after
 * De Soto, Klein and Beckman 2006 (Solar Energy 80:78-88), with the air-mass modifier at 1:
 *
 *     a    = a_r T/T_r           Iph = (G/G_r) (Iph_r + alpha (T - T_r))
 *     I0   = I0_r (T/T_r)³ exp(Eg_r / (k T_r) - Eg(T) / (k T)),  Eg(T) = Eg_r (1 + c (T - T_r))
 *     Rsh  = Rsh_r G_r/G         Rs  = Rs_r
 *
 * Exact by construction at STC. The temperature coefficient of Voc follows from the material and
 * the ideality factor: near the datasheet's for A near 1, far steeper for larger A.
 * Irradiance 0 gives no photocurrent and no shunt path.
 * Range: irradiance 0 to 2000 W/m²; a photocurrent that would fall below zero is held at zero.
 */
export function translateDeSoto(
  reference: SingleDiode,
  behaviour: DeSotoBehaviour,
  irradiance: WattsPerSquareMetre,
  temperature: Kelvin,
): SingleDiode {
  const sun = irradiance / SUN;
  const rise = temperature - REFERENCE;
  const ratio = temperature / REFERENCE;
  const photocurrent = sun * (reference.photocurrent + behaviour.shortCircuitCoefficient * rise);
  return {
    photocurrent: Math.max(photocurrent, 0),
    saturationCurrent:
      reference.saturationCurrent * saturationRatio(behaviour.technology, temperature),
    idealityVoltage: reference.idealityVoltage * ratio,
    seriesResistance: reference.seriesResistance,
    shuntConductance: reference.shuntConductance * sun,
  };
}

/** I0(T) / I0(25 °C) of a technology. */
export function saturationRatio(technology: TechnologyName, temperature: Kelvin): number {
  const ratio = temperature / REFERENCE;
  const share = (temperature - REFERENCE) / temperature;
  return ratio * ratio * ratio * exp(STEEPNESS[technology] * share);
}

// Engines fold a module's own constants into the code, but look imported ones up at every call.
const SUN = STC_IRRADIANCE;
const REFERENCE = STC_TEMPERATURE;

/** Electronvolts over k: an energy of 1 eV in kelvin. */
const PER_KELVIN = ELEMENTARY_CHARGE / BOLTZMANN;

/**
 * (Eg_r / k) (1/T_r - c), which makes the exponent of I0 one product with (T - T_r) / T instead of
 * a difference of two large terms.
 */
const STEEPNESS = Object.fromEntries(
  Object.entries(TECHNOLOGIES).map(([name, { bandGap, bandGapSlope }]) => [
    name,
    bandGap * PER_KELVIN * (1 / REFERENCE - bandGapSlope),
  ]),
) as Record<TechnologyName, number>;
