import type { Amperes, AmperesPerVolt, Ohms, Volts } from '../../quantities.js';
import { BlockingDiode } from './blocking-diode.js';
import type { Blocking } from './bypass.js';
import type { Element } from './element.js';
import type { Enclosure } from './enclosure.js';
import { currentAtVoltage, type Falling } from './inverse.js';
import { remembered } from './remembered.js';

/** Elements of a string that are alike. Where in the string they stand makes no difference. */
export interface Alike<Part extends Element = Element> {
  readonly count: number;
  readonly element: Part;
}

/** Elements in series: their voltages add at one current. */
export class StringCurve implements Falling {
  readonly openCircuitVoltage: Volts;
  readonly shortCircuitCurrent: Amperes;
  /** Currents between 0 and short circuit at which V(I) has a kink; they rise. */
  readonly kinks: readonly Amperes[];
  /** The voltages at them; they fall. */
  readonly kinkVoltages: readonly Volts[];
  /** Whether V(I) is concave between one kink and the next. */
  readonly concave: boolean;
  /** Whether nothing flows back however high the voltage: an ideal blocking diode. */
  readonly blocked: boolean;
  readonly #parts: readonly Alike[];
  readonly #drop: Volts;
  /** V at no current; below zero where the blocking diode drops more than the cells give. */
  readonly #idleVoltage: Volts;
  readonly #currentAt = remembered((voltage) => this.#solve(voltage));

  constructor(parts: readonly Alike[], blocking: Blocking) {
    const diode = blocking.kind === 'diode' ? [new BlockingDiode(blocking.diode)] : [];
    this.#parts = [...parts, ...diode.map((element) => ({ count: 1, element }))];
    this.blocked = blocking.kind === 'clamp';
    this.#drop = blocking.kind === 'clamp' ? blocking.drop : 0;
    this.concave = this.#parts.every(({ element }) => element.concave);
    this.#idleVoltage = this.voltage(0);
    this.openCircuitVoltage = Math.max(this.#idleVoltage, 0);
    const all = this.#parts.flatMap(({ element }) => element.kink ?? []).filter((at) => at > 0);
    const rising = [...new Set(all)].sort((a, b) => a - b);
    this.kinks = rising;
    this.kinkVoltages = rising.map((at) => this.voltage(at));
    this.shortCircuitCurrent = (rising.at(-1) ?? 0) + FIRST_STEP;
    this.shortCircuitCurrent = this.#solve(0);
    const inside = this.kinkVoltages.filter((voltage) => voltage > 0).length;
    this.kinks = rising.slice(0, inside);
    this.kinkVoltages = this.kinkVoltages.slice(0, inside);
  }

  voltage(current: Amperes): Volts {
    let sum = -this.#drop;
    for (const { count, element } of this.#parts) sum += count * element.voltage(current);
    return sum;
  }

  resistance(current: Amperes): Ohms {
    let sum = 0;
    for (const { count, element } of this.#parts) sum += count * element.resistance(current);
    return sum;
  }

  /** Sets `into` to the range of -dV/dI for currents from `low` to `high`, with no kink between. */
  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    let least = 0;
    let most = 0;
    for (const { count, element } of this.#parts) {
      into.least = 0;
      into.most = 0;
      element.encloseResistance(low, high, into);
      least += count * into.least;
      most += count * into.most;
    }
    into.least = least;
    into.most = most;
  }

  /**
   * Within 1e-15 of the larger of short-circuit current and itself, plus what rounding of the
   * voltages makes of it. Infinity below the voltage at which every bypass clamps.
   */
  current(voltage: Volts): Amperes {
    return this.#currentAt(voltage);
  }

  slope(voltage: Volts): AmperesPerVolt {
    if (this.blocked && voltage >= this.#idleVoltage) return 0;
    return -1 / this.resistance(this.current(voltage));
  }

  #solve(voltage: Volts): Amperes {
    if (voltage === this.#idleVoltage) return 0;
    if (voltage > this.#idleVoltage) {
      if (this.blocked) return 0;
      const scale = this.shortCircuitCurrent > 0 ? this.shortCircuitCurrent : SMALL;
      return currentAtVoltage(this, voltage, -scale, 0, scale);
    }
    let next = 0;
    while (next < this.kinks.length && this.kinkVoltages[next]! > voltage) next++;
    const low = next === 0 ? 0 : this.kinks[next - 1]!;
    const known = voltage >= 0 ? this.shortCircuitCurrent : low + FIRST_STEP;
    return currentAtVoltage(this, voltage, low, this.kinks[next] ?? known, FIRST_STEP);
  }
}

/** About what a string carries: where searches begin that must find how far to go. */
const FIRST_STEP: Amperes = 1;
/** Well below the current of any string in use: the same in the dark. */
const SMALL: Amperes = 1e-3;
