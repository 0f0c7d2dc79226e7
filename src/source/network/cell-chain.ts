import type { Amperes, Ohms, Siemens, Volts } from '../../quantities.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import type { SingleDiode } from '../single-diode.js';
import { CellGroup, type Cells } from './cell-group.js';
import type { Element } from './element.js';
import type { Enclosure } from './enclosure.js';
import { currentAtVoltage } from './inverse.js';
import { remembered } from './remembered.js';

/** Groups of cells in series: what one bypass diode spans, or a substring that has none. */
export class CellChain implements Element {
  readonly groups: readonly CellGroup[];
  readonly concave: boolean;
  readonly kink = undefined;
  /** Present where all cells are alike and know no breakdown: then I(V) has a closed form. */
  readonly #whole: SingleDiodeCurve | undefined;

  constructor(cells: readonly Cells[]) {
    this.groups = cells.filter(({ count }) => count > 0).map((alike) => new CellGroup(alike));
    this.concave = cells.every(({ breakdown }) => breakdown === undefined);
    const [first] = this.groups;
    if (this.groups.length === 1 && first !== undefined && this.concave) {
      this.#whole = new SingleDiodeCurve(inSeries(first.cells));
    }
  }

  voltage(current: Amperes): Volts {
    let sum = 0;
    for (const group of this.groups) sum += group.voltage(current);
    return sum;
  }

  resistance(current: Amperes): Ohms {
    let sum = 0;
    for (const group of this.groups) sum += group.resistance(current);
    return sum;
  }

  encloseResistance(low: Amperes, high: Amperes, into: Enclosure): void {
    for (const group of this.groups) group.encloseResistance(low, high, into);
  }

  /** Within 2e-15 of the largest photocurrent, or of itself where it is larger. */
  current(voltage: Volts): Amperes {
    return this.#whole === undefined ? this.#search(voltage) : this.#whole.current(voltage);
  }

  /** Whether `current` is a closed form. */
  get isWhole(): boolean {
    return this.#whole !== undefined;
  }

  readonly #search = remembered((voltage) => {
    const photocurrents = this.groups.map(({ cells }) => cells.diode.photocurrent);
    const most = Math.max(...photocurrents);
    const scale = Math.max(most, this.groups[0]!.cells.diode.saturationCurrent);
    return currentAtVoltage(this, voltage, Math.min(...photocurrents), most, scale);
  });

  /** -dI/dV at a voltage and the current that goes with it. */
  conductance(voltage: Volts, current: Amperes): Siemens {
    return this.#whole === undefined ? 1 / this.resistance(current) : -this.#whole.slope(voltage);
  }
}

/** Equal cells in series are one diode of their summed voltages. */
const inSeries = ({ count, diode }: Cells): SingleDiode => ({
  photocurrent: diode.photocurrent,
  saturationCurrent: diode.saturationCurrent,
  idealityVoltage: count * diode.idealityVoltage,
  seriesResistance: count * diode.seriesResistance,
  shuntConductance: diode.shuntConductance / count,
});
