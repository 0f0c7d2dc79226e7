/** Distances between a double and an exact value, in units in the last place. */
import { Decimal } from 'decimal.js';
import type { Random } from '../../src/numeric/random.js';

/** 56 significant digits: a double between 1/2 and 2 needs up to 53 to be written down exactly. */
export const Precise = Decimal.clone({ precision: 56 });

/** A double as a Decimal, from its integer mantissa and power of two; never from its decimals. */
export function exactly(x: number): Decimal {
  if (!Number.isFinite(x)) throw new RangeError(`no exact value: ${String(x)}`);
  const { mantissa, exponent } = parts(x);
  return new Precise(mantissa.toString()).times(powerOfTwo(exponent));
}

/**
 * |found - exact| in units in the last place of doubles as large as `exact`. Below 2^-1022 the unit
 * is the smallest double. An infinite `found` counts as the ±2^1024 that overflow stands for.
 */
export function errorInUlps(found: number, exact: Decimal): number {
  if (Number.isNaN(found)) return Infinity;
  const value = Number.isFinite(found) ? exactly(found) : powerOfTwo(1024).times(Math.sign(found));
  return value.minus(exact).abs().div(unitInTheLastPlace(exact)).toNumber();
}

function unitInTheLastPlace(exact: Decimal): Decimal {
  const magnitude = exact.abs();
  const nearest = magnitude.toNumber();
  if (nearest === Infinity) return powerOfTwo(971);
  const { exponent } = parts(nearest);
  // Just below a power of two the nearest double may be that power, whose unit is twice as large.
  const isRoundedUp = exponent > -1074 && magnitude.lt(powerOfTwo(exponent + 52));
  return powerOfTwo(isRoundedUp ? exponent - 1 : exponent);
}

/** x = mantissa · 2^exponent with a mantissa of 53 bits, fewer for subnormal x. */
function parts(x: number): { mantissa: bigint; exponent: number } {
  const view = new DataView(new ArrayBuffer(8));
  view.setFloat64(0, x);
  const bits = view.getBigUint64(0);
  const biased = Number((bits >> 52n) & 0x7ffn);
  const fraction = bits & 0xfffffffffffffn;
  const magnitude = biased === 0 ? fraction : fraction | 0x10000000000000n;
  return { mantissa: x < 0 ? -magnitude : magnitude, exponent: Math.max(biased, 1) - 1075 };
}

const powers = new Map<number, Decimal>();

function powerOfTwo(exponent: number): Decimal {
  let power = powers.get(exponent);
  if (power === undefined) {
    power = new Precise(2).pow(exponent);
    powers.set(exponent, power);
  }
  return power;
}

/** Draws one argument. */
export type Region = (random: Random) => number;

/** The worst error of `f` against `reference` over arguments from a region, and where it is. */
export function worstErrorInUlps(
  f: (x: number) => number,
  reference: (x: Decimal) => Decimal,
  region: Region,
  random: Random,
  count: number,
): { error: number; place: string } {
  let worst = { error: 0, place: 'nowhere' };
  for (let i = 0; i < count; i += 1) {
    const x = region(random);
    const error = errorInUlps(f(x), reference(exactly(x)));
    if (!(error <= worst.error)) worst = { error, place: `f(${x}) = ${f(x)}` };
  }
  return worst;
}
