import { argumentFault } from '../../fault.js';
import { type Conditions, uniformConditions } from '../../quantities.js';
import type { Source } from '../curve.js';
import type { Module } from '../module.js';
import type { SingleDiode } from '../single-diode.js';
import { ArrayCurve } from './array-curve.js';
import type { Blocking, Bypass } from './bypass.js';
import type { Cells } from './cell-group.js';
import { StringCurve } from './string-curve.js';
import { substring, type Substring } from './substring.js';

/** Reverse breakdown of a module's cells after Bishop 1988, see `Breakdown`. */
interface ReverseBehaviour {
  /** Of the conductance of the shunt at STC. */
  readonly share: number;
  readonly exponent: number;
  readonly voltage: number;
}

/** Cells of a substring that differ from its others. */
export interface OddCells {
  readonly count: number;
  /** Irradiance as a factor on that of the substring; 1 where lit alike. */
  readonly light: number;
  /** Share of the area that still works; 1 where whole. */
  readonly area: number;
}

/** One substring of an array, or several that are alike in everything. */
export interface SubstringPlan {
  /** Where each stands, all counted from 1. */
  readonly places: readonly SubstringPlace[];
  /** Index of its shading group. */
  readonly group: number;
  /** Photocurrent as a factor on the module's: the module's own deviation. */
  readonly photocurrent: number;
  readonly bypass: Bypass;
  readonly odd: readonly OddCells[];
}

export interface SubstringPlace {
  readonly string: number;
  readonly module: number;
  readonly substring: number;
}

/** A string, or several that are alike in everything. */
export interface StringPlan {
  readonly count: number;
  readonly substrings: readonly SubstringPlan[];
  readonly blocking: Blocking;
}

/** What an array consists of. Strings that carry nothing (an open module) are left out. */
export interface ArrayPlan {
  readonly name: string;
  readonly module: Module;
  /** Of one substring. */
  readonly cells: number;
  readonly reverse?: ReverseBehaviour;
  /** Irradiance of each shading group as a factor on its conditions; soiling included. */
  readonly groups: readonly { readonly name: string; readonly factor: number }[];
  readonly strings: readonly StringPlan[];
}

/**
 * Strings of modules side by side, each substring with its own light and temperature.
 *
 * Cells are the module's, divided by its cells in series; each substring's are translated to the
 * irradiance and temperature of its group. The breakdown of a cell belongs to its junction, so it
 * keeps the conductance of the shunt at STC while the shunt itself follows the irradiance.
 */
export class PvArray implements Source {
  readonly name: string;
  readonly groups: number;

  constructor(readonly plan: ArrayPlan) {
    this.name = plan.name;
    this.groups = plan.groups.length;
  }

  /**
   * @param conditions A pair of irradiance and temperature for each shading group, or one pair for
   * all; the factor of each group comes on top.
   * @throws Fault `ARGUMENT` for another number of pairs, and as of `Module.at`.
   */
  at(conditions: Conditions): ArrayCurve {
    return new ArrayCurve(
      this.substringsAt(conditions).map((parts, index) => {
        const { count, blocking } = this.plan.strings[index]!;
        return { count, string: new StringCurve(parts, blocking) };
      }),
    );
  }

  /** The parts of each string, in the order of the plan. */
  substringsAt(conditions: Conditions): { count: number; element: Substring }[][] {
    const given = conditions.irradiance.length;
    if (given !== this.groups && given !== 1) {
      throw argumentFault('conditions', `for ${this.groups} shading groups, or for all`, given);
    }
    const cell = this.#cellMaker(conditions);
    return this.plan.strings.map(({ substrings }) =>
      substrings.map((each) => ({
        count: each.places.length,
        element: substring(this.#cells(each, cell), each.bypass),
      })),
    );
  }

  #cells({ group, photocurrent, odd }: SubstringPlan, cell: CellMaker): Cells[] {
    const whole = this.plan.cells - odd.reduce((sum, { count }) => sum + count, 0);
    return [{ count: whole, light: 1, area: 1 }, ...odd].map(({ count, light, area }) => {
      const diode = scaled(cell(group, light), area, photocurrent);
      const { reverse, module } = this.plan;
      if (reverse === undefined) return { count, diode };
      const { shuntConductance } = module.reference;
      const conductance = area * reverse.share * shuntConductance * module.cellsInSeries;
      if (!(conductance > 0)) return { count, diode };
      const { exponent, voltage } = reverse;
      return { count, diode, breakdown: { conductance, exponent, voltage } };
    });
  }

  /** Makes the diode of one cell of a group; of each light only once. */
  #cellMaker({ irradiance, cellTemperature }: Conditions): CellMaker {
    const { module, groups } = this.plan;
    const known = new Map<string, SingleDiode>();
    return (group, light) => {
      const key = `${group} ${light}`;
      const found = known.get(key);
      if (found !== undefined) return found;
      const entry = irradiance.length === 1 ? 0 : group;
      const lit = irradiance[entry]! * groups[group]!.factor * light;
      const { diode } = module.at(uniformConditions(lit, cellTemperature[entry]!));
      const one = ofOneCell(diode, module.cellsInSeries);
      known.set(key, one);
      return one;
    };
  }
}

type CellMaker = (group: number, light: number) => SingleDiode;

const ofOneCell = (diode: SingleDiode, cells: number): SingleDiode => ({
  photocurrent: diode.photocurrent,
  saturationCurrent: diode.saturationCurrent,
  idealityVoltage: diode.idealityVoltage / cells,
  seriesResistance: diode.seriesResistance / cells,
  shuntConductance: diode.shuntConductance * cells,
});

/** A cell of less area gives and leaks less in proportion, through more resistance. */
const scaled = (diode: SingleDiode, area: number, photocurrent: number): SingleDiode => ({
  photocurrent: diode.photocurrent * area * photocurrent,
  saturationCurrent: diode.saturationCurrent * area,
  idealityVoltage: diode.idealityVoltage,
  seriesResistance: diode.seriesResistance / area,
  shuntConductance: diode.shuntConductance * area,
});
