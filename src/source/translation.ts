/** How the five parameters move with the weather: the rules a module is translated by. */
import type { Kelvin, WattsPerSquareMetre } from '../quantities.js';
import type { Datasheet } from './datasheet.js';
import type { SingleDiode } from './single-diode.js';
import { translateDeSoto, type DeSotoBehaviour } from './translate/de-soto-2006.js';
import { translateVillalva, type VillalvaBehaviour } from './translate/villalva-2009.js';

export { saturationRatio } from './translate/de-soto-2006.js';

export const TRANSLATIONS = ['de-soto-2006', 'villalva-2009'] as const;
export type TranslationName = (typeof TRANSLATIONS)[number];

/** What translation needs beside the five parameters at STC, for each set of rules. */
export type TemperatureBehaviour = DeSotoBehaviour | VillalvaBehaviour;

/**
 * The five parameters at another irradiance and cell temperature, from those at STC, by the rules
 * that the behaviour names: see `translateDeSoto` and `translateVillalva`. Both are exact at STC.
 */
export function translate(
  reference: SingleDiode,
  behaviour: TemperatureBehaviour,
  irradiance: WattsPerSquareMetre,
  temperature: Kelvin,
): SingleDiode {
  return behaviour.translation === 'villalva-2009'
    ? translateVillalva(reference, behaviour, irradiance, temperature)
    : translateDeSoto(reference, behaviour, irradiance, temperature);
}

/** The behaviour of a datasheet's module under a set of rules. */
export function behaviourOf(
  datasheet: Datasheet,
  translation: TranslationName = 'de-soto-2006',
): TemperatureBehaviour {
  const { technology, shortCircuitCoefficient } = datasheet;
  if (translation === 'de-soto-2006') return { technology, shortCircuitCoefficient };
  const { openCircuitCoefficient, shortCircuitCurrent, openCircuitVoltage } = datasheet;
  return {
    translation,
    technology,
    shortCircuitCoefficient,
    openCircuitCoefficient,
    shortCircuitCurrent,
    openCircuitVoltage,
  };
}
