import { exponentOfTwo, powerOfTwo } from './power-of-two.js';

/**
 * The decimal that a product or quotient of decimals was meant to be. In doubles 1.65 / 0.1 is
 * 16.499999999999996 and 0.1 * 0.1 is 0.010000000000000002: if a decimal of 12 digits lies within
 * 4 units of 2^-52, it is taken, here 16.5 and 0.01. Everything else, powers of two among it, is
 * given back unchanged.
 */
export function intendedDecimal(x: number): number {
  if (exponentOfTwo(Math.abs(x)) !== undefined) return x;
  const decimal = Number(x.toPrecision(DIGITS));
  return Math.abs(decimal - x) <= ROUNDING_ERRORS * Math.abs(x) ? decimal : x;
}

// More than people write, and so few that a number near one by chance is one in a thousand.
const DIGITS = 12;

// Two inputs rounded once each, and the operation itself, at 2^-53 each; with some room.
const ROUNDING_ERRORS = 4 * powerOfTwo(-52);
