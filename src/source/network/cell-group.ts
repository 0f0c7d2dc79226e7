import { findRootWithSlope } from '../../numeric/root.js';
import type { Amperes, Ohms, Volts } from '../../quantities.js';
import {
  currentAtJunction,
  junctionConductance,
  junctionVoltage,
  type SingleDiode,
} from '../single-diode.js';
import {
  breakdownConductance,
  breakdownCurrent,
  encloseBreakdown,
  type Breakdown,
} from './breakdown.js';
import type { Enclosure } from './enclosure.js';
import type { Falling } from './inverse.js';
import { remembered } from './remembered.js';

/** Cells in series that are alike and lit alike. */
export interface Cells {
  readonly count: number;
  /** Of one cell. */
  readonly diode: SingleDiode;
  /** Left out: the cells follow the single-diode equation however far they are driven back. */
  readonly breakdown?: Breakdown;
}

/** Cells that are alike, as a voltage over current. */
export class CellGroup implements Falling {
  readonly cells: Cells;
  readonly #junction: (current: Amperes) => Volts;

  constructor(cells: Cells) {
    this.cells = cells;
    this.#junction = remembered((current) => junctionAt(cells, current));
  }

  /**
   * Falls strictly with current. -Infinity where no voltage drives so large a current, which is
   * possible only without shunt and breakdown.
   */
  voltage(current: Amperes): Volts {
    const { count, diode } = this.cells;
    return count * (this.#junction(current) - current * diode.seriesResistance);
  }

  resistance(current: Amperes): Ohms {
    const { count, diode, breakdown } = this.cells;
    const u = this.#junction(current);
    const extra = breakdown === undefined ? 0 : breakdownConductance(breakdown, u);
    return count * (1 / (junctionConductance(diode, u) + extra) + diode.seriesResistance);
  }

  /**
   * Adds the range of the resistance for currents from `low` to `high`. The conductance of the
   * diode rises with the junction voltage and that of the breakdown has a known range, so both
   * ends of the sum are known.
   */
  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    const { count, diode, breakdown } = this.cells;
    const upper = this.#junction(low);
    const lower = this.#junction(high);
    const range = {
      least: junctionConductance(diode, lower),
      most: junctionConductance(diode, upper),
    };
    if (breakdown !== undefined) encloseBreakdown(breakdown, lower, upper, range);
    into.least += count * (1 / range.most + diode.seriesResistance);
    into.most += count * (1 / range.least + diode.seriesResistance);
  }
}

function junctionAt({ diode, breakdown }: Cells, current: Amperes): Volts {
  const plain = junctionVoltage(diode, current);
  if (breakdown === undefined || plain === 0) return plain;
  // Breakdown only adds: it draws the junction from where it would be without towards zero.
  const low = plain > 0 ? 0 : Math.max(plain, breakdown.voltage);
  const result = findRootWithSlope(
    (u) => currentAtJunction(diode, u) - breakdownCurrent(breakdown, u) - current,
    (u) => -junctionConductance(diode, u) - breakdownConductance(breakdown, u),
    low,
    Math.max(plain, 0),
    // A long way back the root is nearest to the end where the current has no limit.
    plain > 0 ? { start: plain } : {},
  );
  return result.status === 'converged' ? result.root : plain;
}
