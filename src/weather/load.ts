/** The ways in: a file, a parsed document, a definition written in code, a standard sequence. */
import { Fault } from '../fault.js';
import { refuseOtherKinds } from '../file/document-kind.js';
import { interpret } from '../file/definition.js';
import { fieldText, readInput, type FieldPath, type InputDocument } from '../file/document.js';
import { trapezoids } from './blocks.js';
import { mistakesIn } from './check.js';
import { compile } from './compile.js';
import { weatherDefinition, type WeatherDefinition } from './definition.js';
import { refuseDeepNesting } from './nesting.js';
import type { TrapezoidTableName } from './trapezoid-tables.js';
import type { Weather } from './weather.js';

/** @throws Fault those of `readInput` and of `parseWeather`. */
export function loadWeather(file: string): Weather {
  return parseWeather(readInput(file));
}

/**
 * Reads a weather file, whose form `weatherDefinition` gives.
 * @throws Fault with every mistake and its place: `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`
 * against the definition; then `ONE_BLOCK_PER_ENTRY`, `NOTHING_SET`, `RAMP_TIME`, `OUT_OF_RANGE`,
 * `NO_SUCH_ROW` in single blocks; then `NOTHING_CHANGES`, `NO_DURATION`, `TOO_LONG` where blocks
 * meet. `TOO_DEEP` comes before all of them.
 */
export function parseWeather(document: InputDocument): Weather {
  refuseDeepNesting(document);
  refuseOtherKinds(document, 'weather');
  const definition = interpret(document, weatherDefinition);
  const mistakes = mistakesIn(definition, document);
  if (mistakes.length > 0) throw new Fault('input', mistakes);
  return compile(definition, document);
}

/**
 * The same from plain data, as the constructors of `blocks.ts` give it.
 * @throws Fault those of `parseWeather`, with the field for a place.
 * @example compileWeather({ name: 'dip', irradiance_W_per_m2: 800, blocks: [
 *   hold(60), step({ irradiance_W_per_m2: 300 }), hold(60)] })
 */
export function compileWeather(definition: WeatherDefinition): Weather {
  return parseWeather(writtenInCode(definition));
}

/**
 * A whole trapezoid table as a weather, 300 s of settling before each row, at 25 °C. Lasts
 * 15 939.048 s (low-medium), 6986.667 s (medium-high), 2320 s (start-stop). Patterned on EN 50530;
 * see `trapezoid-tables.ts` for what is known of the rows.
 */
export function standardSequence(table: TrapezoidTableName): Weather {
  return compileWeather({ name: table, blocks: [trapezoids({ table })] });
}

// Data without a text: a place is a field.
function writtenInCode(value: unknown): InputDocument {
  const place = (path: FieldPath) => ({ field: fieldText(path) });
  return { file: '', text: '', value, place, placeOfKey: place };
}
