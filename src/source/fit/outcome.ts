import { STC_TEMPERATURE, thermalVoltage, type Volts } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import type { SingleDiode } from '../single-diode.js';
import { TECHNOLOGIES } from '../technology.js';

/** What one method makes of a datasheet's STC numbers. */
export interface MethodOutcome {
  /** False where the datasheet admits no solution; `diode` is then the nearest miss. */
  readonly solved: boolean;
  /** A of one cell. */
  readonly ideality: number;
  readonly diode: SingleDiode;
  /** In words, without a full stop: which conditions decided, or what the nearest curve misses. */
  readonly account: string;
  /** Where there is no solution: where one would be, if anywhere, and what that says to look for. */
  readonly advice?: string;
}

/** The ideality factor of a diffusion-dominated junction is 1, of a recombination-dominated one 2. */
export const IDEALITY_RANGE = [1, 2] as const;

/** The range of a whole cell: that of a junction times the junctions stacked in it. */
export function cellIdealityRange(datasheet: Datasheet): readonly [least: number, most: number] {
  const { junctions } = TECHNOLOGIES[datasheet.technology];
  return [IDEALITY_RANGE[0] * junctions, IDEALITY_RANGE[1] * junctions];
}

/** a = Ns A k T / q at STC. */
export const idealityVoltageAtStc = (
  datasheet: Pick<Datasheet, 'cellsInSeries'>,
  ideality: number,
): Volts => datasheet.cellsInSeries * ideality * thermalVoltage(STC_TEMPERATURE);

/** A ratio as people read it, with its sign: `-0.31 %`. Adding 0 turns -0 into 0. */
export function signedPercent(ratio: number): string {
  const percent = Number((100 * ratio).toFixed(2)) + 0;
  return `${percent > 0 ? '+' : ''}${percent.toFixed(2)} %`;
}
