/**
 * What a weather file may hold. This one definition validates files, gives the type of weather
 * written in code, and is printed as the JSON Schema for editors.
 *
 * Each block starts where the one before it ended. A pass of a repeat starts where the pass before
 * it ended, so a body that does not come back to its start never jumps: its first pass and the
 * later ones differ instead. Values are absolute, hence all passes from the second on are alike.
 */
import { z } from 'zod';
import { nameDefinition } from '../file/name-definition.js';
import { TRAPEZOID_TABLE_NAMES, USUAL_SETTLING } from './trapezoid-tables.js';

interface Range {
  readonly minimum: number;
  readonly maximum: number;
}

export const IRRADIANCE_RANGE_W_PER_M2: Range = { minimum: 0, maximum: 2000 };
export const CELL_TEMPERATURE_RANGE_C: Range = { minimum: -60, maximum: 120 };
/** 317 years; keeps the rounding of a time (2^-53 of it) near a microsecond. */
export const LONGEST_S = 1e10;
/** Repeats and sequences around one block. */
export const DEEPEST_NESTING = 16;
export const START_CELL_TEMPERATURE_C = 25;
export const START_IRRADIANCE_W_PER_M2 = 0;

const MOST_PASSES = 1e9;

// The limits given by `meta` reach the JSON Schema only: `check.ts` holds them, and knows a hint.
const irradiance = (what: string) =>
  z
    .number()
    .meta({ ...IRRADIANCE_RANGE_W_PER_M2 })
    .describe(`${what} (W/m²).`);
const cellTemperature = (what: string) =>
  z
    .number()
    .meta({ ...CELL_TEMPERATURE_RANGE_C })
    .describe(`${what} (°C).`);
const duration = (what: string) => z.number().positive().max(LONGEST_S).describe(`${what} (s).`);

const holdDefinition = z
  .strictObject({ for_s: duration('How long') })
  .describe('Everything stays as it is.');

const stepDefinition = z
  .strictObject({
    irradiance_W_per_m2: irradiance('New irradiance').optional(),
    cell_temperature_C: cellTemperature('New cell temperature').optional(),
  })
  .describe('A change that takes no time, of the irradiance, the cell temperature or both.');

const rampDefinition = z
  .strictObject({
    irradiance_W_per_m2: irradiance('Irradiance at the end').optional(),
    cell_temperature_C: cellTemperature('Cell temperature at the end').optional(),
    for_s: duration('How long, unless the slope says it').optional(),
    slope_W_per_m2_per_s: z
      .number()
      .meta({ exclusiveMinimum: 0 })
      .describe(
        'How steeply the irradiance changes (W/m²/s), above 0. Whether it rises or falls follows ' +
          'from the values; it takes the change over the slope, unrounded.',
      )
      .optional(),
  })
  .describe('A linear change to the values given, over a time or at a slope.');

const repeatDefinition = z
  .strictObject({
    times: z.int().min(1).max(MOST_PASSES).describe('Number of passes.'),
    get blocks() {
      return blockListDefinition;
    },
  })
  .describe('Passes over the same blocks; each pass starts where the one before it ended.');

const sequenceDefinition = z
  .strictObject({
    name: nameDefinition('Name of this span of time, for scores and reports.').optional(),
    get blocks() {
      return blockListDefinition;
    },
  })
  .describe('Blocks one after the other, as a group.');

const trapezoidsDefinition = z
  .strictObject({
    table: z
      .enum(TRAPEZOID_TABLE_NAMES)
      .describe('low-medium 100 to 500 W/m², medium-high 300 to 1000, start-stop 2 to 100.'),
    slopes_W_per_m2_per_s: z
      .array(z.number().describe('Slope of a row of the table (W/m²/s).'))
      .min(1)
      .describe('The rows to run, named by their slopes, in this order; all rows if left out.')
      .optional(),
    settle_s: z
      .number()
      .min(0)
      .max(LONGEST_S)
      .meta({ default: USUAL_SETTLING })
      .describe('Time at the low level before the first ramp of each row, 300 if left out (s).')
      .optional(),
  })
  .describe(
    'Rows of a trapezoid table patterned on EN 50530, recalled from memory and checked by ' +
      'arithmetic; no conformity is claimed.',
  );

// One object with a key for each block, not a union: a mistake then has one place and one cause.
export const blockDefinition = z
  .strictObject({
    hold: holdDefinition.optional(),
    step: stepDefinition.optional(),
    ramp: rampDefinition.optional(),
    repeat: repeatDefinition.optional(),
    sequence: sequenceDefinition.optional(),
    trapezoids: trapezoidsDefinition.optional(),
  })
  .meta({ id: 'weatherBlock', minProperties: 1, maxProperties: 1 })
  .describe('One block: a map with exactly one block name.');

const blockListDefinition = z
  .array(blockDefinition)
  .min(1)
  .describe('What happens, in order; each block starts where the one before it ended.');

export const weatherDefinition = z
  .strictObject({
    name: nameDefinition('Name of the weather, for reports.'),
    irradiance_W_per_m2: irradiance('Irradiance at the start, 0 if left out')
      .meta({ default: START_IRRADIANCE_W_PER_M2 })
      .optional(),
    cell_temperature_C: cellTemperature('Cell temperature at the start, 25 if left out')
      .meta({ default: START_CELL_TEMPERATURE_C })
      .optional(),
    blocks: blockListDefinition,
  })
  .describe('Irradiance and cell temperature over time.');

export type WeatherDefinition = z.infer<typeof weatherDefinition>;
export type Block = z.infer<typeof blockDefinition>;
type BlockName = keyof Block;
export type Step = z.infer<typeof stepDefinition>;
export type Ramp = z.infer<typeof rampDefinition>;
export type Repeat = z.infer<typeof repeatDefinition>;
export type Sequence = z.infer<typeof sequenceDefinition>;
export type Trapezoids = z.infer<typeof trapezoidsDefinition>;

/** The block names of an entry: one, if the entry is right. */
export const blockNames = (block: Block): BlockName[] =>
  (Object.keys(block) as BlockName[]).filter((key) => block[key] !== undefined);
