import type { Amperes, Ohms, Volts } from '../../quantities.js';

/** A junction diode at a fixed temperature: I = Is (exp((V - I Rs) / a) - 1). */
export interface JunctionDiode {
  /** Is > 0. */
  readonly saturationCurrent: Amperes;
  /** a = n k T / q > 0. */
  readonly idealityVoltage: Volts;
  readonly seriesResistance: Ohms;
}

/** What lies across a substring, conducting when the substring is driven below zero. */
export type Bypass =
  /** Holds the substring at -drop; carries nothing above. */
  | { readonly kind: 'clamp'; readonly drop: Volts }
  | { readonly kind: 'diode'; readonly diode: JunctionDiode }
  /** A wire: the substring gives no voltage. */
  | { readonly kind: 'shorted' }
  /** Nothing, or a diode that has failed open. */
  | { readonly kind: 'none' };

/** What keeps current from flowing back into a string. */
export type Blocking =
  /** Takes the drop while it conducts; carries nothing backwards. */
  | { readonly kind: 'clamp'; readonly drop: Volts }
  | { readonly kind: 'diode'; readonly diode: JunctionDiode }
  | { readonly kind: 'none' };
