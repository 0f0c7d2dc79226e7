/** What the data themselves say about where the parameters can be. */
import type { Volts } from '../../quantities.js';
import { IDEALITY, PER_DIODE, REFERENCE_CURRENT, SERIES_RESISTANCE } from './diode-balance.js';
import type { BalanceScale } from './diode-balance.js';
import type { CurveData } from './curve-data.js';

export interface SearchBox {
  readonly scale: BalanceScale;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
  readonly ideality: readonly [least: number, most: number];
}

/**
 * Bounds of the search. Rs lies below the mean slope -dV/dI between the highest and the lowest
 * current, because -dV/dI exceeds Rs everywhere; Rs, Gsh, photocurrent and diode currents are not
 * negative. Ideality of a cell, for each junction stacked in it: 0.3 to 6 with one diode; 1 to 2
 * with two (diffusion to recombination), since outside a second diode follows the noise: below 1 it
 * bends the last points alone, above 2 it takes over from the shunt.
 */
export function searchBox(
  data: CurveData,
  diodeCount: 1 | 2,
  perIdeality: Volts,
  junctions: number,
): SearchBox {
  const { voltages, currents, currentSpan } = data;
  const most = voltages.length - 1;
  const reference = voltages[most]!;
  const count = IDEALITY - 1 + PER_DIODE * diodeCount;
  const lower = new Float64Array(count);
  const upper = new Float64Array(count).fill(Infinity);
  const atMost = voltages[currents.indexOf(currents.reduce((a, b) => Math.max(a, b)))]!;
  const atLeast = voltages[currents.indexOf(currents.reduce((a, b) => Math.min(a, b)))]!;
  upper[SERIES_RESISTANCE] = Math.max((atLeast - atMost) / currentSpan, 0);
  const ideality = [
    IDEALITY_RANGE[diodeCount][0] * junctions,
    IDEALITY_RANGE[diodeCount][1] * junctions,
  ] as const;
  for (let k = 0; k < PER_DIODE * diodeCount; k += PER_DIODE) {
    lower[REFERENCE_CURRENT + k] = 0;
    lower[IDEALITY + k] = ideality[0];
    upper[IDEALITY + k] = ideality[1];
  }
  return { scale: { diodeCount, perIdeality, reference }, lower, upper, ideality };
}

const IDEALITY_RANGE = { 1: [0.3, 6], 2: [1, 2] } as const;
