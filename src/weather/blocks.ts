/**
 * Blocks for weather written in code. Each gives the plain data that the same block of a file
 * gives; nothing is checked before `compileWeather`.
 */
import type { Seconds } from '../quantities.js';
import type { Block, Ramp, Step, Trapezoids } from './definition.js';

/** Everything stays as it is for `duration`. */
export const hold = (duration: Seconds): Block => ({ hold: { for_s: duration } });

/** A change that takes no time. */
export const step = (to: Step): Block => ({ step: to });

/** A linear change over a time (`for_s`) or at a slope (`slope_W_per_m2_per_s`). */
export const ramp = (to: Ramp): Block => ({ ramp: to });

/** Passes over the same blocks; each pass starts where the one before it ended. */
export const repeat = (times: number, blocks: Block[]): Block => ({ repeat: { times, blocks } });

/** Blocks as a group; with a name, the group becomes a mark of the weather. */
export const sequence = (blocks: Block[], name?: string): Block => ({ sequence: { name, blocks } });

/** Rows of a table patterned on EN 50530. */
export const trapezoids = (rows: Trapezoids): Block => ({ trapezoids: rows });
