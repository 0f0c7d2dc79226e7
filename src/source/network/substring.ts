import { findRootWithSlope } from '../../numeric/root.js';
import { log1p } from '../../numeric/logarithm.js';
import type { Amperes, Ohms, Volts } from '../../quantities.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import type { Bypass, JunctionDiode } from './bypass.js';
import { CellChain } from './cell-chain.js';
import type { Cells } from './cell-group.js';
import type { Element } from './element.js';
import type { Enclosure } from './enclosure.js';
import { remembered } from './remembered.js';

/** Cells in series with what lies across them. */
export interface Substring extends Element {
  readonly chain: CellChain;
  /** What of a current through the substring flows through its cells. */
  currentInCells(current: Amperes): Amperes;
}

/** Builds the element that stands for cells behind a bypass. */
export function substring(cells: readonly Cells[], bypass: Bypass): Substring {
  const chain = new CellChain(cells);
  switch (bypass.kind) {
    case 'clamp':
      return new ClampedSubstring(chain, bypass.drop);
    case 'diode':
      return new DiodeSubstring(chain, bypass.diode);
    case 'shorted':
      return new ClampedSubstring(chain, 0, true);
    case 'none':
      return new BareSubstring(chain);
  }
}

class BareSubstring implements Substring {
  readonly kink = undefined;
  readonly concave: boolean;

  constructor(readonly chain: CellChain) {
    this.concave = chain.concave;
  }

  currentInCells(current: Amperes): Amperes {
    return current;
  }

  voltage(current: Amperes): Volts {
    return this.chain.voltage(current);
  }

  resistance(current: Amperes): Ohms {
    return this.chain.resistance(current);
  }

  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    this.chain.encloseResistance(low, high, into);
  }
}

/** V(I) = max(V of the cells, -drop). The kink is where both are equal. */
class ClampedSubstring implements Substring {
  readonly kink: Amperes | undefined;
  readonly concave: boolean;
  /** The clamp holds above this current; a wire always does. */
  readonly #engaged: Amperes;

  constructor(
    readonly chain: CellChain,
    readonly drop: Volts,
    isWire = false,
  ) {
    this.kink = isWire ? undefined : chain.current(-drop);
    this.#engaged = this.kink ?? -Infinity;
    this.concave = isWire || chain.concave;
  }

  currentInCells(current: Amperes): Amperes {
    return current >= this.#engaged ? (this.kink ?? this.chain.current(0)) : current;
  }

  voltage(current: Amperes): Volts {
    if (current >= this.#engaged) return -this.drop;
    return Math.max(this.chain.voltage(current), -this.drop);
  }

  resistance(current: Amperes): Ohms {
    return current >= this.#engaged ? 0 : this.chain.resistance(current);
  }

  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    // The ends may be the kink itself, which belongs to both sides: the middle knows which it is.
    if (0.5 * (low + high) < this.#engaged) this.chain.encloseResistance(low, high, into);
  }
}

/** Cells and a junction diode side by side: their currents add at one voltage. */
class DiodeSubstring implements Substring {
  readonly kink = undefined;
  readonly concave = false;
  readonly #bypass: BypassDiode;
  /** Of the cells at 0 V, where the bypass carries nothing. */
  readonly #shortCircuitCurrent: Amperes;
  readonly #voltageAt = remembered((current) =>
    this.chain.isWhole ? this.#overVoltage(current) : this.#overCurrent(current),
  );

  constructor(
    readonly chain: CellChain,
    diode: JunctionDiode,
  ) {
    this.#bypass = new BypassDiode(diode);
    this.#shortCircuitCurrent = chain.current(0);
  }

  currentInCells(current: Amperes): Amperes {
    return this.chain.current(this.#voltageAt(current));
  }

  voltage(current: Amperes): Volts {
    return this.#voltageAt(current);
  }

  resistance(current: Amperes): Ohms {
    const voltage = this.voltage(current);
    const inCells = this.chain.current(voltage);
    return 1 / (this.chain.conductance(voltage, inCells) + this.#bypass.conductance(voltage));
  }

  /**
   * At the voltages of the ends: the conductance of the cells has a known range over the currents
   * in the cells, and that of the bypass falls with voltage.
   */
  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    const upper = this.voltage(low);
    const lower = this.voltage(high);
    const cells = { least: 0, most: 0 };
    this.chain.encloseResistance(this.chain.current(upper), this.chain.current(lower), cells);
    into.least += 1 / (1 / cells.least + this.#bypass.conductance(lower));
    into.most += 1 / (1 / cells.most + this.#bypass.conductance(upper));
  }

  /** The currents of cells and bypass, in closed form over the voltage, add to `current`. */
  #overVoltage(current: Amperes): Volts {
    const { chain } = this;
    const bypass = this.#bypass;
    const alone = chain.voltage(current);
    const excess = current - this.#shortCircuitCurrent;
    // Below short circuit the bypass leaks at most its saturation current backwards. Above, it
    // carries at most the excess, and the cells less than they would alone.
    const least =
      excess <= 0
        ? Math.max(0, chain.voltage(current + bypass.diode.saturationCurrent))
        : Math.max(alone, bypass.voltage(excess));
    const high = excess <= 0 ? Math.max(0, alone) : 0;
    const low = Math.min(least, high);
    const result = findRootWithSlope(
      (voltage) => chain.current(voltage) + bypass.current(voltage) - current,
      (voltage) => -chain.conductance(voltage, NaN) - bypass.conductance(voltage),
      low,
      high,
      { start: low, tolerance: FINE * Math.abs(low) },
    );
    if (result.status === 'converged') return result.root;
    // Rounding has closed the bracket.
    return result.status === 'no-sign-change' && result.valueAtLow < 0 ? low : high;
  }

  /**
   * The same over the current of the cells, for chains whose voltage is known only over that. The
   * voltage is then taken from whichever of cells and bypass tells it better from a current.
   */
  #overCurrent(current: Amperes): Volts {
    const { chain } = this;
    const bypass = this.#bypass;
    const excess = current - this.#shortCircuitCurrent;
    const low = excess <= 0 ? current : this.#shortCircuitCurrent;
    const high =
      excess <= 0
        ? current + bypass.diode.saturationCurrent
        : Math.min(current, chain.current(bypass.voltage(excess)));
    const result = findRootWithSlope(
      (inCells) => inCells + bypass.current(chain.voltage(inCells)) - current,
      (inCells) => 1 + bypass.conductance(chain.voltage(inCells)) * chain.resistance(inCells),
      low,
      Math.max(low, high),
      { tolerance: FINE * Math.abs(high) },
    );
    const inCells = result.status === 'converged' ? result.root : excess <= 0 ? low : high;
    const voltage = chain.voltage(inCells);
    const isSteep = chain.resistance(inCells) * bypass.conductance(voltage) > 1;
    const around = current - inCells;
    return isSteep && around > 0 ? bypass.voltage(around) : voltage;
  }
}

/** 2^-52: an ulp or two of a voltage. */
const FINE = 2.220446049250313e-16;

/** A junction diode across a substring, as the substring's voltage sees it: it conducts below 0 V. */
class BypassDiode {
  /** The diode as a cell in the dark, with its own polarity. */
  readonly #forward: SingleDiodeCurve;

  constructor(readonly diode: JunctionDiode) {
    this.#forward = new SingleDiodeCurve({ ...diode, photocurrent: 0, shuntConductance: 0 });
  }

  current(voltage: Volts): Amperes {
    return -this.#forward.current(-voltage);
  }

  conductance(voltage: Volts): number {
    return -this.#forward.slope(-voltage);
  }

  /** At a current of the bypass, above zero. */
  voltage(current: Amperes): Volts {
    const { saturationCurrent, idealityVoltage, seriesResistance } = this.diode;
    return -idealityVoltage * log1p(current / saturationCurrent) - current * seriesResistance;
  }
}
