import { STC_TEMPERATURE, thermalVoltage, type Volts } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import type { SingleDiode } from '../single-diode.js';

/** What one method makes of a datasheet's STC numbers. */
export interface MethodOutcome {
  /** False where the datasheet admits no solution; `diode` is then the nearest miss. */
  readonly solved: boolean;
  readonly ideality: number;
  readonly diode: SingleDiode;
  /** In words: which conditions decided, and what the nearest one misses if none is met. */
  readonly account: string;
}

/** The ideality factor of a diffusion-dominated diode is 1, of a recombination-dominated one 2. */
export const IDEALITY_RANGE = [1, 2] as const;

/** a = Ns A k T / q at STC. */
export const idealityVoltageAtStc = (datasheet: Datasheet, ideality: number): Volts =>
  datasheet.cellsInSeries * ideality * thermalVoltage(STC_TEMPERATURE);
