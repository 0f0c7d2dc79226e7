/**
 * Whole arrays against ngspice, a general circuit simulator: the circuit is generated from the same
 * file, and currents agree within 1e-4 of the short-circuit current everywhere.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { STC_TEMPERATURE, uniformConditions } from '../../../src/quantities.js';
import { parseArray } from '../../../src/source/network/array-file.js';
import { ARRAY_MODULE } from './array-module.js';
import { circuitOf } from './circuit.js';

const START = `array: any
module: module.yaml
substrings_per_module: 3
groups: { sun: 1, chimney: 0.3, tree: 0.62, wire: 0.85 }
`;
const SHADED = `strings:
  - modules: 4
    shade: { 2: chimney, 3: [tree, wire, sun] }
    deviation_pct: { 4: -3 }
`;
const TWO = `strings:
  - modules: 3
    shade: { 1: tree, 2: [sun, chimney, wire] }
    BLOCKING
  - modules: 3
    shade: { 3: wire }
    BLOCKING
`;
const IDEAL = 'bypass: { drop_V: 0.5 }\n';
const SCHOTTKY = 'bypass: { diode: { saturation_A: 1.0e-6, ideality: 1.05, series_ohm: 0.008 } }\n';
const SILICON = 'bypass: { diode: { saturation_A: 1.0e-10, ideality: 1.3, series_ohm: 0.01 } }\n';
const BISHOP = 'reverse: { bishop: { share: 0.1, exponent: 3.7, breakdown_V: -15 } }\n';
const ODD = `shaded_cells: [{ string: 1, module: 1, substring: 2, count: 1, factor: 0.2 }]\n`;
const FAULTS = `faults:
  - { string: 1, module: 1, substring: 1, bypass: shorted }
  - { string: 1, module: 3, substring: 3, bypass: open }
  - { string: 1, module: 2, substring: 2, cracked: { count: 2, lost_area: 0.4 } }
`;
const blocking = (text: string): string => TWO.replaceAll('BLOCKING', `blocking: ${text}`);

const CASES: readonly (readonly [title: string, yaml: string])[] = [
  ['a shaded string with ideal bypasses', START + IDEAL + SHADED],
  ['a shaded string with Schottky bypasses', START + SCHOTTKY + SHADED],
  ['a shaded string with silicon bypasses', START + SILICON + SHADED],
  ['a string without bypasses', `${START}bypass: none\n${SHADED}`],
  ['a string with a shaded cell', START + IDEAL + SHADED + ODD],
  ['a string in breakdown without bypasses', `${START}bypass: none\n${BISHOP}${SHADED}${ODD}`],
  ['a string with a cell in breakdown behind silicon', START + SILICON + BISHOP + SHADED + ODD],
  ['a string with faults', START + IDEAL + SHADED + FAULTS],
  ['a string with faults and Schottky bypasses', START + SCHOTTKY + SHADED + FAULTS],
  ['two strings that feed back', START + IDEAL + TWO.replaceAll('    BLOCKING\n', '')],
  ['two strings with ideal blocking', START + IDEAL + blocking('{ drop_V: 0.4 }')],
  [
    'two strings with blocking diodes',
    START +
      SCHOTTKY +
      blocking('{ diode: { saturation_A: 1.0e-9, ideality: 1.2, series_ohm: 0.02 } }'),
  ],
  [
    'two strings, one of them open',
    START +
      IDEAL +
      blocking('{ drop_V: 0.4 }') +
      'faults: [{ string: 2, module: 1, open: true }]\n',
  ],
];

const hasSimulator = spawnSync('ngspice', ['--version']).status === 0;

describe.skipIf(!hasSimulator)('the current of an array, against ngspice', () => {
  test.each(CASES)('agrees within 1e-4 of Isc everywhere: %s', (_, yaml) => {
    const { array } = parseArray(parseInput(yaml, 'array.yaml'), () => ARRAY_MODULE);
    const curve = array.at(uniformConditions(1000, STC_TEMPERATURE));
    const rows = simulated(yaml, curve.openCircuitVoltage, 120);
    expect(rows).toHaveLength(120);
    const errors = rows.map(([voltage, current]) => Math.abs(curve.current(voltage) - current));
    expect(Math.max(...errors)).toBeLessThan(1e-4 * curve.shortCircuitCurrent);
  });
});

/** The cell of the module at 25 °C and a share of 1000 W/m², and its shunt at 1000 W/m². */
const cellAt = (light: number) => {
  const { diode } = ARRAY_MODULE.at(uniformConditions(1000 * light, STC_TEMPERATURE));
  return {
    photocurrent: diode.photocurrent,
    saturationCurrent: diode.saturationCurrent,
    idealityVoltage: diode.idealityVoltage / 60,
    seriesResistance: diode.seriesResistance / 60,
    shuntConductance: diode.shuntConductance * 60,
  };
};

function simulated(yaml: string, to: number, points: number): [voltage: number, current: number][] {
  const folder = mkdtempSync(join(tmpdir(), 'hillproof-circuit-'));
  try {
    const output = join(folder, 'out.txt');
    const text = circuitOf(yaml, cellAt, 20, 60 / 350, { to, points, output });
    writeFileSync(join(folder, 'array.cir'), text);
    const { stdout, stderr, status } = spawnSync('ngspice', ['-b', 'array.cir'], {
      cwd: folder,
      encoding: 'utf8',
      timeout: 50_000,
    });
    if (status !== 0) throw new Error(`ngspice: ${stdout.slice(-500)} ${stderr.slice(-500)}`);
    return readFileSync(output, 'utf8')
      .trim()
      .split('\n')
      .map((line) => line.trim().split(/\s+/).map(Number) as [number, number])
      .filter(([voltage, current]) => Number.isFinite(voltage) && Number.isFinite(current));
  } finally {
    rmSync(folder, { recursive: true });
  }
}
