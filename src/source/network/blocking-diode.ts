import { log1p } from '../../numeric/logarithm.js';
import type { Amperes, Ohms, Volts } from '../../quantities.js';
import type { JunctionDiode } from './bypass.js';
import type { Element } from './element.js';
import type { Enclosure } from './enclosure.js';

/**
 * A junction diode in series with a string: V(I) = -a ln(1 + I / Is) - I Rs, which is convex.
 * +Infinity from -Is downwards: it lets no more flow back.
 */
export class BlockingDiode implements Element {
  readonly kink = undefined;
  readonly concave = false;

  constructor(readonly diode: JunctionDiode) {}

  voltage(current: Amperes): Volts {
    const { saturationCurrent, idealityVoltage, seriesResistance } = this.diode;
    const ratio = current / saturationCurrent;
    return ratio > -1 ? -idealityVoltage * log1p(ratio) - current * seriesResistance : Infinity;
  }

  resistance(current: Amperes): Ohms {
    const { saturationCurrent, idealityVoltage, seriesResistance } = this.diode;
    return idealityVoltage / Math.max(saturationCurrent + current, 0) + seriesResistance;
  }

  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    into.least += this.resistance(high);
    into.most += this.resistance(low);
  }
}
