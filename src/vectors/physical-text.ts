import type { CodeFormat } from '../fixed/code-format.js';

/**
 * Writes the physical value of a code as a decimal number: enough places to tell neighbouring
 * codes apart with three digits to spare, no trailing zeros. The digits are those of the exact
 * decimal expansion of the double, rounded, which the language defines to the last place.
 */
export function physicalText(format: CodeFormat): (code: number) => string {
  const places = decimalPlaces(format.step);
  const { origin, step } = format;
  return (code) => {
    const text = (origin + code * step).toFixed(places);
    return places === 0 ? text : trimZeros(text);
  };
}

// Smallest number of places of which one unit is at most a thousandth of a step, up to 15.
function decimalPlaces(step: number): number {
  if (Number.isInteger(step)) return 0;
  let places = 0;
  for (let unit = 1; unit > step / 1000 && places < 15; unit /= 10) places++;
  return places;
}

function trimZeros(text: string): string {
  let end = text.length;
  while (text[end - 1] === '0') end--;
  if (text[end - 1] === '.') end--;
  const trimmed = text.slice(0, end);
  return trimmed === '-0' ? '0' : trimmed;
}
