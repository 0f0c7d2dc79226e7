/** What is left behind when emit fails or is killed: nothing that could be taken for a result. */
import { spawn, spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, renameSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { emitSuite } from '../../src/vectors/emit.js';
import { verifySuite } from '../../src/vectors/verify.js';
import { newFolder } from '../new-folder.js';
import { SMALL_SUITE, writeInputs } from './small-suite.js';

const program = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));

// Long enough that nobody's machine finishes it in the moment before the kill.
const LONG_WEATHER = `name: Long
irradiance_W_per_m2: 500
blocks: [{ repeat: { times: 1000000, blocks: [{ hold: { for_s: 50 } }] } }]
`;
const LONG_SUITE = SMALL_SUITE.replace(
  'power: UQ8.8',
  'power: UQ8.8, time: { step: 1, bits: 32 }',
).replace('timeline: { every_s: 1 }', 'timeline: { every_s: 1 }\noutputs: [binary]');

const partialBeside = (folder: string): string => join(folder, '.out.partial');

async function killMidWrite(inputs: string): Promise<void> {
  const suite = writeInputs(inputs, { suite: LONG_SUITE, weather: LONG_WEATHER });
  const child = spawn(process.execPath, [program, 'emit', suite, '--out', join(inputs, 'out')]);
  const ended = new Promise((resolve) => child.once('exit', resolve));
  const growing = join(partialBeside(inputs), 'small-one-timeline.hpv');
  const hasGrown = (): boolean => existsSync(growing) && statSync(growing).size > 1_000_000;
  while (child.exitCode === null && !hasGrown())
    await new Promise((resolve) => setTimeout(resolve, 20));
  expect(child.exitCode, 'the run ended before it could be killed').toBe(null);
  child.kill('SIGKILL');
  await ended;
}

describe('a run killed while it writes', () => {
  test('leaves nothing that verify accepts', async () => {
    const inputs = newFolder();
    await killMidWrite(inputs);
    for (const folder of [join(inputs, 'out'), partialBeside(inputs)]) {
      expect(() => verifySuite(folder)).toThrow(Fault);
    }
  });

  test('leaves the suite that was in the folder whole', async () => {
    const inputs = newFolder();
    const out = join(inputs, 'out');
    emitSuite(writeInputs(inputs), out);
    await killMidWrite(inputs);
    expect(verifySuite(out).problems).toEqual([]);
  });

  test('does not stand in the way of the next run, which clears up after it', async () => {
    const inputs = newFolder();
    await killMidWrite(inputs);
    emitSuite(writeInputs(inputs), join(inputs, 'out'));
    expect(verifySuite(join(inputs, 'out')).problems).toEqual([]);
    expect(readdirSync(inputs).sort()).toEqual(['model.yaml', 'out', 'suite.yaml', 'weather.yaml']);
  });
});

describe('a run killed between the two renames', () => {
  test('is mended by the next verify: the old suite is back in its place', () => {
    const inputs = newFolder();
    const out = join(inputs, 'out');
    emitSuite(writeInputs(inputs), out);
    // Above the largest number that systems give to a process.
    writeFileSync(join(inputs, '.out.lock'), '999999999\n');
    renameSync(out, join(inputs, '.out.previous'));
    expect(verifySuite(out).problems).toEqual([]);
    expect(existsSync(join(inputs, '.out.previous'))).toBe(false);
  });
});

// A file system of one megabyte: needs the right to mount one.
const small = newFolder();
const mounted =
  process.platform === 'linux' &&
  spawnSync('mount', ['-t', 'tmpfs', '-o', 'size=1m', 'tmpfs', small]).status === 0;
afterAll(() => {
  if (mounted) spawnSync('umount', ['-l', small]);
});

describe('a run that fills the disk', () => {
  test.skipIf(!mounted)(
    'ends with exit code 3 and leaves the suite that was in the folder whole (needs the right to mount a tmpfs)',
    () => {
      const out = join(small, 'out');
      emitSuite(writeInputs(small), out);
      const suite = writeInputs(small, { suite: LONG_SUITE, weather: LONG_WEATHER });
      const run = spawnSync(process.execPath, [program, 'emit', suite, '--out', out], {
        encoding: 'utf8',
      });
      expect(run.stderr).toContain('no space is left on the disk.');
      expect(run.status).toBe(3);
      expect(verifySuite(out).problems).toEqual([]);
      expect(readdirSync(small).sort()).toEqual([
        'model.yaml',
        'out',
        'suite.yaml',
        'weather.yaml',
      ]);
    },
  );
});

describe('emit', () => {
  test('leaves a folder alone that holds other things', () => {
    const inputs = newFolder();
    const out = join(inputs, 'out');
    mkdirSync(out);
    writeFileSync(join(out, 'thesis.txt'), 'mine');
    expect(() => emitSuite(writeInputs(inputs), out)).toThrow(/such as thesis\.txt/);
    expect(readdirSync(out)).toEqual(['thesis.txt']);
  });

  test('refuses a folder without a name, and one around the inputs, and touches neither', () => {
    const inputs = newFolder();
    const suite = writeInputs(inputs);
    for (const out of ['', inputs, join(inputs, '..')]) {
      expect(() => emitSuite(suite, out), out).toThrow(Fault);
      expect(readdirSync(inputs).sort()).toEqual(['model.yaml', 'suite.yaml', 'weather.yaml']);
    }
  });

  test('refuses the folder in which it runs', () => {
    expect(() => emitSuite(writeInputs(newFolder()), process.cwd())).toThrow(/replaced whole/);
  });
});
