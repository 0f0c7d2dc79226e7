/** What README shows works as it stands there. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, expect, test } from 'vitest';
import { newFolder } from '../new-folder.js';
import { run } from './run-program.js';

const readme = readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
const blocks = [...readme.matchAll(/^```yaml\n(.*?)^```$/gms)].map(([, text]) => text!);
const blockWith = (key: string): string =>
  blocks.find((text) => new RegExp(`^${key}:`, 'm').test(text))!;

let folder: string;
beforeAll(() => {
  folder = newFolder();
  writeFileSync(join(folder, 'module.yaml'), blockWith('isc_A'));
  writeFileSync(join(folder, 'day.yaml'), blockWith('blocks'));
  writeFileSync(join(folder, 'suite.yaml'), blockWith('suite'));
  writeFileSync(join(folder, 'generator.yaml'), blockWith('generator'));
});

test('the six steps of README lead from its datasheet to a verified suite', () => {
  expect(run(['fit', 'module.yaml', '-o', 'model.yaml'], folder).status).toBe(0);
  expect(run(['curve', 'model.yaml', '--irradiance', '800'], folder).status).toBe(0);
  expect(run(['emit', 'suite.yaml', '--out', 'vectors'], folder)).toMatchObject({ status: 0 });
  expect(run(['verify', 'vectors'], folder).stdout).toContain('whole: demo holds');
}, 120_000);

test('the source patterned on a standard is one that curve takes', () => {
  const { status, stdout } = run(['curve', 'generator.yaml', '--json'], folder);
  expect(status).toBe(0);
  expect((JSON.parse(stdout) as { voc_V: number }).voc_V).toBeCloseTo(499.575, 2);
});

test('every command of the program is in the table of README', () => {
  const help = run(['--help']).stdout;
  const commands = [...help.matchAll(/^ {2}([a-z][a-z-]+) /gm)].map(([, name]) => name!);
  expect(commands.length).toBeGreaterThan(5);
  for (const name of commands.filter((command) => command !== 'help')) {
    expect(readme, name).toMatch(new RegExp(`^\\| \`hillproof ${name}[ \`]`, 'm'));
  }
});
