/** Part of the build: writes the JSON Schemas that ship with the package to dist/schema. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { SCHEMA_NAMES, schemaText } from '../index.js';

const folder = new URL('../schema/', import.meta.url);
mkdirSync(folder, { recursive: true });
for (const name of SCHEMA_NAMES) {
  writeFileSync(fileURLToPath(new URL(`${name}.schema.json`, folder)), schemaText(name));
}
