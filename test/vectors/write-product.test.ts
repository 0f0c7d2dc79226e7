import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import {
  codeFormatFrom,
  curveSet,
  fromCelsius,
  loadSource,
  readVectorFile,
  uniformConditions,
  writeProduct,
} from '../../src/index.js';
import { newFolder } from '../new-folder.js';

test('a curve set made in code is written and read back without a suite file', () => {
  const { source } = loadSource(
    new URL('../../vectors/demo/module.yaml', import.meta.url).pathname,
  );
  const product = curveSet({
    name: 'by-hand',
    source,
    conditions: [uniformConditions(700, fromCelsius(35))],
    points: 16,
    formats: {
      voltage: codeFormatFrom('UQ6.10', 'voltage'),
      current: codeFormatFrom('UQ4.12', 'current'),
      power: codeFormatFrom('UQ10.22', 'power'),
      irradiance: codeFormatFrom({ step: 1, bits: 16 }, 'irradiance'),
      temperature: codeFormatFrom({ step: 0.1, bits: 16, signed: true }, 'temperature'),
      time: codeFormatFrom({ step: 1, bits: 32 }, 'time'),
    },
  });
  const folder = join(newFolder(), 'out');
  const files = writeProduct(product, ['binary', 'csv'], folder);
  expect(files.map(({ path }) => path)).toEqual([
    'by-hand.hpv',
    'by-hand-curves.csv',
    'by-hand-points.csv',
    'by-hand-peaks.csv',
  ]);
  const read = readVectorFile(readFileSync(join(folder, 'by-hand.hpv')), 'by-hand.hpv');
  expect(read.sections.map(({ tag, count }) => [tag, count])).toEqual([
    ['CURV', 1],
    ['POIN', 16],
    ['PEAK', 1],
  ]);
  expect(() => writeProduct(product, ['csv'], folder)).toThrow(/holds what is not of a suite/);
});
