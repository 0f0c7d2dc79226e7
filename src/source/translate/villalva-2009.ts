import { argumentFault } from '../../fault.js';
import { exp, expm1 } from '../../numeric/exponential.js';
import {
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  type Amperes,
  type AmperesPerKelvin,
  type Kelvin,
  type Volts,
  type VoltsPerKelvin,
  type WattsPerSquareMetre,
} from '../../quantities.js';
import { COLDEST_CELL, HOTTEST_CELL } from '../operating-range.js';
import type { SingleDiode } from '../single-diode.js';
import type { TechnologyName } from '../technology.js';

/** What these rules need beside the five parameters at STC: numbers of the datasheet. */
export interface VillalvaBehaviour {
  readonly translation: 'villalva-2009';
  readonly technology: TechnologyName;
  /** K_I: change of short-circuit current with cell temperature at 1000 W/m². */
  readonly shortCircuitCoefficient: AmperesPerKelvin;
  /** K_V: change of open-circuit voltage with cell temperature at 1000 W/m²; negative. */
  readonly openCircuitCoefficient: VoltsPerKelvin;
  /** Isc at STC. */
  readonly shortCircuitCurrent: Amperes;
  /** Voc at STC. */
  readonly openCircuitVoltage: Volts;
}

/**
 * The five parameters at another irradiance and cell temperature, from those at STC, after
 * Villalva, Gazoli and Ruppert Filho 2009 (IEEE Trans. Power Electronics 24:1198-1208):
 *
 *     a    = a_r T/T_r           Iph = (G/G_r) (Iph_r + K_I (T - T_r))
 *     I0   = I0_r J(T) / J(T_r), J(T) = (Isc + K_I (T - T_r)) / (exp((Voc + K_V (T - T_r)) / a) - 1)
 *     Rsh  = Rsh_r               Rs  = Rs_r
 *
 * The paper has I0 = J(T). The quotient is the same for a module whose I0 at STC is J(T_r), and
 * leaves every other module exact at STC, to the last bit.
 *
 * A curve that meets Isc and Voc at STC keeps the datasheet's K_V by construction, whatever the
 * ideality factor: the shunt path takes off a share of some a / (Iph Rsh), which is 0.06 % for the
 * silicon module of the paper.
 * Range: as `checkVillalva` holds it; irradiance 0 to 2000 W/m², cells -60 to 120 °C. Irradiance 0
 * gives no photocurrent; the shunt path stays.
 */
export function translateVillalva(
  reference: SingleDiode,
  behaviour: VillalvaBehaviour,
  irradiance: WattsPerSquareMetre,
  temperature: Kelvin,
): SingleDiode {
  const rise = temperature - REFERENCE;
  const currentRise = behaviour.shortCircuitCoefficient * rise;
  const idealityVoltage = reference.idealityVoltage * (temperature / REFERENCE);
  const photocurrent = (irradiance / SUN) * (reference.photocurrent + currentRise);
  const there = behaviour.openCircuitVoltage / reference.idealityVoltage;
  const voltage = behaviour.openCircuitVoltage + behaviour.openCircuitCoefficient * rise;
  const here = voltage / idealityVoltage;
  // (e^there - 1) / (e^here - 1) in a form that does not overflow.
  const growth = (exp(there - here) * expm1(-there)) / expm1(-here);
  return {
    photocurrent: Math.max(photocurrent, 0),
    saturationCurrent:
      reference.saturationCurrent * (1 + currentRise / behaviour.shortCircuitCurrent) * growth,
    idealityVoltage,
    seriesResistance: reference.seriesResistance,
    shuntConductance: reference.shuntConductance,
  };
}

/**
 * Refuses numbers under which Isc or Voc would vanish between -60 and 120 °C, where I0 has no value.
 * @throws Fault `ARGUMENT`.
 */
export function checkVillalva(behaviour: VillalvaBehaviour): void {
  for (const [field, value, coefficientField, coefficient] of [
    [
      'shortCircuitCurrent',
      behaviour.shortCircuitCurrent,
      'shortCircuitCoefficient',
      behaviour.shortCircuitCoefficient,
    ],
    [
      'openCircuitVoltage',
      behaviour.openCircuitVoltage,
      'openCircuitCoefficient',
      behaviour.openCircuitCoefficient,
    ],
  ] as const) {
    if (!(value > 0 && value < Infinity)) throw argumentFault(field, 'above 0 and finite', value);
    if (!staysPositive(value, coefficient)) {
      const expected = `small enough for ${field} to stay above 0 from -60 to 120 °C`;
      throw argumentFault(coefficientField, expected, coefficient);
    }
  }
}

/** Whether a quantity of this value at 25 °C stays above 0 over all cell temperatures. */
export const staysPositive = (value: number, perKelvin: number): boolean =>
  value + perKelvin * (COLDEST_CELL - REFERENCE) > 0 &&
  value + perKelvin * (HOTTEST_CELL - REFERENCE) > 0;

// Engines fold a module's own constants into the code, but look imported ones up at every call.
const SUN = STC_IRRADIANCE;
const REFERENCE = STC_TEMPERATURE;
