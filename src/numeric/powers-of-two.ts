/**
 * 2^e at POWERS_OF_TWO[e + 1023] for e from -1023 to 1024; the last is therefore Infinity.
 * Multiplying by an entry scales a double by an exponent that is only known at run time.
 */
export const POWERS_OF_TWO = powersOfTwo();

function powersOfTwo(): Float64Array {
  const powers = new Float64Array(2048);
  // 2^-1023. Doubling is exact, for this subnormal too.
  let power = 1.1125369292536007e-308;
  for (let i = 0; i < powers.length; i += 1) {
    powers[i] = power;
    power *= 2;
  }
  return powers;
}
