/**
 * Trapezoid tables for tests of dynamic MPPT efficiency, patterned on EN 50530:2010. No conformity
 * is claimed: the rows are from memory, and the text of the standard and of its amendment A1:2013
 * was not at hand. What was checked is arithmetic: settling plus repetitions of both ramps and both
 * dwells gives the whole-second duration of every row and of every table as remembered with them.
 */
import type { Seconds, WattsPerSquareMetre } from '../quantities.js';

export interface TrapezoidTable {
  readonly low: WattsPerSquareMetre;
  readonly high: WattsPerSquareMetre;
  readonly rows: readonly TrapezoidRow[];
}

/** Up, dwell, down, dwell, `repetitions` times. The ramps last (high - low) / slope, unrounded. */
export interface TrapezoidRow {
  readonly repetitions: number;
  /** W/m²/s; unique in its table. */
  readonly slope: number;
  /** At the high and at the low level alike. */
  readonly dwell: Seconds;
}

export const TRAPEZOID_TABLE_NAMES = ['low-medium', 'medium-high', 'start-stop'] as const;
export type TrapezoidTableName = (typeof TRAPEZOID_TABLE_NAMES)[number];

/** Time at the low level before the first ramp of a row. */
export const USUAL_SETTLING: Seconds = 300;

const row = (repetitions: number, slope: number, dwell: Seconds = 10): TrapezoidRow => ({
  repetitions,
  slope,
  dwell,
});

export const TRAPEZOID_TABLES: Readonly<Record<TrapezoidTableName, TrapezoidTable>> = {
  // 10 % to 50 % of STC irradiance.
  'low-medium': {
    low: 100,
    high: 500,
    rows: [
      row(2, 0.5),
      row(2, 1),
      row(3, 2),
      row(4, 3),
      row(6, 5),
      row(8, 7),
      row(10, 10),
      row(10, 14),
      row(10, 20),
      row(10, 30),
      row(10, 50),
    ],
  },
  // 30 % to 100 %.
  'medium-high': {
    low: 300,
    high: 1000,
    rows: [row(10, 10), row(10, 14), row(10, 20), row(10, 30), row(10, 50), row(10, 100)],
  },
  // 0.2 % to 10 %: start-up and shut-down.
  'start-stop': { low: 2, high: 100, rows: [row(1, 0.1, 30)] },
};
