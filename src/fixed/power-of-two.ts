/** 2^exponent, exactly, for whole exponents from -1022 to 1023. */
export function powerOfTwo(exponent: number): number {
  const factor = exponent < 0 ? 0.5 : 2;
  let power = 1;
  for (let left = Math.abs(exponent); left > 0; left--) power *= factor;
  return power;
}

/** The exponent e of x = 2^e, or undefined if x is not a power of two. */
export function exponentOfTwo(x: number): number | undefined {
  if (!(x > 0 && x < Infinity)) return undefined;
  let exponent = 0;
  let rest = x;
  for (; rest >= 2; rest /= 2) exponent++;
  for (; rest < 1; rest *= 2) exponent--;
  return rest === 1 ? exponent : undefined;
}
