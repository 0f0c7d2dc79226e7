import { exponentOfTwo, powerOfTwo } from './power-of-two.js';

/** A step as numerator / denominator. */
export interface StepRatio {
  readonly numerator: number;
  readonly denominator: number;
}

/**
 * Writes a step so that code * numerator / denominator carries as little rounding as possible.
 * A power of two stays as it is, for then both operations are exact. A decimal step such as 0.001
 * becomes 1/1000: code 1001 is then 1.001, the double a person would type, where 1001 * 0.001 is
 * 1.0009999999999999. Any other step stays as it is, over 1.
 *
 * @param step Above 0.
 * @param largestCode The greatest magnitude of a code; products with it stay below 2^53, hence exact.
 */
export function stepRatio(step: number, largestCode: number): StepRatio {
  if (exponentOfTwo(step) !== undefined) return { numerator: step, denominator: 1 };
  for (let denominator = 1; denominator <= LARGEST_EXACT_POWER_OF_TEN; denominator *= 10) {
    const numerator = Math.round(step * denominator);
    if (numerator * largestCode > LARGEST_EXACT_INTEGER) break;
    if (numerator / denominator === step) return { numerator, denominator };
  }
  return { numerator: step, denominator: 1 };
}

const LARGEST_EXACT_POWER_OF_TEN = 1e22;
const LARGEST_EXACT_INTEGER = powerOfTwo(53);
