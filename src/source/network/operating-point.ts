/** What each part of an array does at one terminal voltage: where power is turned into heat. */
import type { Amperes, Conditions, Volts, Watts } from '../../quantities.js';
import type { PvArray, SubstringPlace } from './pv-array.js';
import type { Substring } from './substring.js';

/** Cells that are alike, in a substring. */
export interface CellState {
  readonly count: number;
  /** Across one cell; below zero where the others drive it backwards. */
  readonly voltage: Volts;
  /** Turned into heat in one cell beside what light alone does; 0 where the cell gives power. */
  readonly dissipated: Watts;
}

export interface SubstringState {
  /** Every substring of which all this is true. */
  readonly places: readonly SubstringPlace[];
  readonly voltage: Volts;
  /** Through the string. */
  readonly current: Amperes;
  /** The share of it that flows past the cells. */
  readonly bypassCurrent: Amperes;
  readonly cells: readonly CellState[];
}

/**
 * The state of every substring of an array whose terminals are held at a voltage, string by string
 * in the order of the plan. Accuracy: voltages and powers as currents allow, which are good to
 * 1e-12 of the short-circuit current.
 */
export function operatingPoint(
  array: PvArray,
  conditions: Conditions,
  voltage: Volts,
): SubstringState[] {
  const curve = array.at(conditions);
  return array.substringsAt(conditions).flatMap((parts, index) => {
    const current = curve.strings[index]!.string.current(voltage);
    return parts.map(({ element }, part) => ({
      places: array.plan.strings[index]!.substrings[part]!.places,
      voltage: element.voltage(current),
      current,
      bypassCurrent: current - element.currentInCells(current),
      cells: cellStates(element, element.currentInCells(current)),
    }));
  });
}

const cellStates = ({ chain }: Substring, current: Amperes): CellState[] =>
  chain.groups.map((group) => {
    const { count } = group.cells;
    const voltage = group.voltage(current) / count;
    return { count, voltage, dissipated: Math.max(-voltage * current, 0) };
  });

/** The cell in which most power is turned into heat, and where it is. */
export interface HottestCell {
  readonly places: readonly SubstringPlace[];
  readonly cell: CellState;
}

/** Undefined where no cell takes power: every one of them gives some. */
export function hottestCell(states: readonly SubstringState[]): HottestCell | undefined {
  let hottest: HottestCell | undefined;
  for (const { places, cells } of states) {
    for (const cell of cells) {
      if (cell.dissipated > (hottest?.cell.dissipated ?? 0)) hottest = { places, cell };
    }
  }
  return hottest;
}
