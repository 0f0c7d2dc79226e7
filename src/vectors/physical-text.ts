import type { CodeFormat } from '../fixed/code-format.js';

/**
 * Writes the physical value of a code as a decimal number: enough places to tell neighbouring
 * codes apart with three digits to spare, no trailing zeros. The digits are those of the exact
 * decimal expansion of the double, rounded, which the language defines to the last place.
 */
export function physicalText(format: CodeFormat): (code: number) => string {
  const { origin, step } = format;
  const places = Number.isInteger(step) && Number.isInteger(origin) ? 0 : decimalPlaces(step);
  return (code) => {
    const text = (origin + code * step).toFixed(places);
    return places === 0 ? text : trimZeros(text);
  };
}

// Smallest number of places of which one unit is at most a thousandth of a step. Steps go down to
// 1e-30, and the language writes up to 100 places.
function decimalPlaces(step: number): number {
  let places = 0;
  for (let unit = 1; unit > step / 1000; unit /= 10) places++;
  return Math.max(places, 3);
}

function trimZeros(text: string): string {
  let end = text.length;
  while (text[end - 1] === '0') end--;
  if (text[end - 1] === '.') end--;
  const trimmed = text.slice(0, end);
  return trimmed === '-0' ? '0' : trimmed;
}
