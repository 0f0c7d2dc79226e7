/** The JSON Schemas of all input files, from the definitions that validate them. */
import { z } from 'zod';
import { arrayDefinition } from './source/network/array-definition.js';
import { datasheetDefinition } from './source/datasheet-definition.js';
import { en50530Definition } from './source/en-50530/file.js';
import { modelDefinition } from './source/model-file.js';
import { suiteDefinition } from './vectors/suite-definition.js';
import { weatherDefinition } from './weather/definition.js';

const DEFINITIONS = {
  array: arrayDefinition,
  datasheet: datasheetDefinition,
  generator: en50530Definition,
  model: modelDefinition,
  suite: suiteDefinition,
  weather: weatherDefinition,
} as const;

export type SchemaName = keyof typeof DEFINITIONS;

export const SCHEMA_NAMES = Object.keys(DEFINITIONS) as SchemaName[];

/** The JSON Schema (draft 2020-12) of one kind of input file, as text. */
export function schemaText(name: SchemaName): string {
  const schema = z.toJSONSchema(DEFINITIONS[name], { io: 'input' });
  return `${JSON.stringify(schema, undefined, 2)}\n`;
}
