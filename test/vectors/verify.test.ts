import { cpSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createHash } from 'node:crypto';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import type { Problem } from '../../src/fault.js';
import { Fault } from '../../src/fault.js';
import { crc32 } from '../../src/numeric/crc32.js';
import { emitSuite } from '../../src/vectors/emit.js';
import { manifestText, type Manifest } from '../../src/vectors/manifest.js';
import { readManifest } from '../../src/vectors/suite-folder.js';
import { verifySuite } from '../../src/vectors/verify.js';
import { newFolder } from '../new-folder.js';
import { writeInputs } from './small-suite.js';

let inputs: string;
let whole: string;

beforeAll(() => {
  inputs = newFolder();
  whole = join(inputs, 'whole');
  emitSuite(writeInputs(inputs), whole);
});

/** The problems that verify finds, whether it reports them or cannot even start. */
function problemsOf(folder: string): readonly Problem[] {
  try {
    return verifySuite(folder).problems;
  } catch (error) {
    if (error instanceof Fault) return error.problems;
    throw error;
  }
}

function copyOf(folder: string): string {
  const copy = join(newFolder(), 'copy');
  cpSync(folder, copy, { recursive: true });
  return copy;
}

/** Changes a file and makes hash and seal fit again, as a careful forger would. */
function forge(folder: string, path: string, change: (bytes: Buffer) => void): void {
  const bytes = readFileSync(join(folder, path));
  change(bytes);
  writeFileSync(join(folder, path), bytes);
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  const relist = <T extends { readonly path: string }>(files: readonly T[]): T[] =>
    files.map((file) => (file.path === path ? { ...file, sha256 } : file));
  const old = readManifest(folder);
  const products = old.products.map((product) => ({ ...product, files: relist(product.files) }));
  const text = manifestText({ ...old, inputs: relist(old.inputs), products });
  writeFileSync(join(folder, 'manifest.json'), text);
}

/** Adds to a byte of a section and repairs the CRC of the section. */
function bend(bytes: Buffer, tag: string, at: number, by: number): void {
  const entry = bytes.indexOf(tag, 32, 'latin1');
  const [offset, size, count] = [4, 8, 12].map((field) => bytes.readUInt32LE(entry + field));
  const end = offset! + size! * count!;
  bytes[offset! + at] = (bytes[offset! + at]! + by) & 0xff;
  bytes.writeUInt32LE(crc32(bytes.subarray(offset, end)), end);
}

describe('verify', () => {
  test('finds nothing in a suite as emit left it', () => {
    const { problems, checked } = verifySuite(whole);
    expect(problems).toEqual([]);
    expect(checked.map(({ held, of }) => [held, of])).toEqual([
      [15, 15],
      [44, 44],
      [12, 12],
    ]);
  });

  test('names the file that is missing, and the file that is too many', () => {
    const copy = copyOf(whole);
    rmSync(join(copy, 'small-one-timeline.csv'));
    writeFileSync(join(copy, 'notes.txt'), 'mine');
    const found = problemsOf(copy).map(({ code, file }) => [code, file]);
    expect(found).toContainEqual(['FILE_ABSENT', join(copy, 'small-one-timeline.csv')]);
    expect(found).toContainEqual(['FILE_UNLISTED', join(copy, 'notes.txt')]);
  });

  test('names section and record of a code that is one step off, though all sums agree', () => {
    const copy = copyOf(whole);
    // Record 2 of POIN: voltage, current; the current's low byte is the third of its four bytes.
    forge(copy, 'small-one-curves.hpv', (bytes) => {
      bend(bytes, 'POIN', 2 * 4 + 2, 1);
    });
    const found = problemsOf(copy).find(({ code }) => code === 'RECORD');
    expect(found?.field).toBe('section POIN, record 2');
    expect(found?.message).toMatch(
      /^current: code \d+ stands for .* the model says .*: off by [01]\.\d+ steps\.$/,
    );
  });

  test('names the record where current rises with voltage', () => {
    const copy = copyOf(whole);
    forge(copy, 'small-one-curves.hpv', (bytes) => {
      bend(bytes, 'POIN', 1 * 4 + 3, 3);
    });
    expect(problemsOf(copy).map(({ field, message }) => `${field}: ${message}`)).toContain(
      'section POIN, record 1: the current rises with voltage.',
    );
  });

  test('names a peak that is no peak', () => {
    const copy = copyOf(whole);
    forge(copy, 'small-one-curves.hpv', (bytes) => {
      bend(bytes, 'PEAK', 5, 256 - 32);
    });
    const messages = problemsOf(copy).map(({ field, message }) => `${field}: ${message}`);
    expect(messages).toContain(
      'section PEAK, record 0: the power is not the product of voltage and current.',
    );
    expect(
      messages.some((text) => /POIN, record \d: the power is above that of the global/.test(text)),
    ).toBe(true);
  });

  test('names the sample that differs from the model', () => {
    const copy = copyOf(whole);
    forge(copy, 'small-one-timeline.hpv', (bytes) => {
      bend(bytes, 'SAMP', bytes.readUInt32LE(bytes.indexOf('SAMP', 32) + 8) * 2 + 8, 2);
    });
    expect(problemsOf(copy).find(({ code }) => code === 'RECORD')?.field).toBe(
      'section SAMP, record 2',
    );
  });

  test('finds outputs that the inputs do not give, though all sums agree', () => {
    const copy = copyOf(whole);
    forge(copy, 'small-one-timeline.csv', (bytes) => {
      bytes.write('9', bytes.length - 3);
    });
    expect(problemsOf(copy)).toEqual([
      {
        code: 'NOT_REPRODUCED',
        file: join(copy, 'small-one-timeline.csv'),
        message: 'the inputs do not give these bytes when built again.',
      },
    ]);
  });

  test('finds inputs that were changed after the fact, though all sums agree', () => {
    // All outputs but the two C headers, which hold no figures, then come out differently.
    const copy = copyOf(whole);
    forge(copy, 'inputs/model.yaml', (bytes) => {
      bytes.write('6', bytes.indexOf('photocurrent_A: 5') + 16);
    });
    expect(problemsOf(copy).filter(({ code }) => code === 'NOT_REPRODUCED')).toHaveLength(10);
  });

  describe('is not taken in by a manifest that is sealed but', () => {
    /** Writes a manifest changed by `change`, with a seal that fits. */
    function reseal(change: (manifest: Manifest) => unknown): string {
      const copy = copyOf(whole);
      const text = manifestText(change(readManifest(copy)) as Manifest);
      writeFileSync(join(copy, 'manifest.json'), text);
      return copy;
    }
    const codesOf = (folder: string): string[] => problemsOf(folder).map(({ code }) => code);

    test('no longer lists a file that is gone', () => {
      const copy = reseal((manifest) => ({
        ...manifest,
        products: manifest.products.map((product) => ({
          ...product,
          files: product.files.filter(({ path }) => path !== 'small-one-curves.hpv'),
        })),
      }));
      rmSync(join(copy, 'small-one-curves.hpv'));
      expect(codesOf(copy)).toEqual(['MANIFEST_DIFFERS']);
    });

    test.each([
      ['names another suite', (manifest: Manifest) => ({ ...manifest, suite: 'other' })],
      ['names a seed', (manifest: Manifest) => ({ ...manifest, seeds: { noise: 4 } })],
      [
        'counts values that saturated',
        (manifest: Manifest) => ({
          ...manifest,
          products: manifest.products.map((product) => ({
            ...product,
            saturated: [{ column: 'curve.voc', low: 1, high: 0 }],
          })),
        }),
      ],
    ])('%s', (_, change) => {
      expect(codesOf(reseal(change))).toEqual(['MANIFEST_DIFFERS']);
    });

    test('lists no suite file among its inputs', () => {
      const copy = reseal((manifest) => ({
        ...manifest,
        inputs: manifest.inputs.map((input) => ({ ...input, named_as: input.named_as ?? 'x' })),
      }));
      expect(codesOf(copy)).toContain('INPUTS_DIFFER');
    });

    test('lists fewer products than the suite file asks for', () => {
      const copy = reseal((manifest) => ({ ...manifest, products: [] }));
      expect(codesOf(copy)).toContain('INPUTS_DIFFER');
    });

    test.each([
      ['has another shape', (manifest: Manifest) => ({ ...manifest, products: 5 })],
      ['lacks a key', (manifest: Manifest) => ({ ...manifest, inputs: undefined })],
      [
        'leads out of the folder',
        (manifest: Manifest) => ({
          ...manifest,
          inputs: manifest.inputs.map((input) => ({ ...input, path: '../../etc/passwd' })),
        }),
      ],
      [
        'lists a file twice',
        (manifest: Manifest) => ({ ...manifest, inputs: [...manifest.inputs, ...manifest.inputs] }),
      ],
    ])('%s', (_, change) => {
      expect(codesOf(reseal(change))).toEqual(['MANIFEST']);
    });

    test('was written by another version: says what was not checked', () => {
      const copy = reseal((manifest) => ({
        ...manifest,
        tool: { ...manifest.tool, version: '0.0.1' },
      }));
      const { remark, problems, checked } = verifySuite(copy);
      expect(problems).toEqual([]);
      expect(remark).toMatch(/^Written by version 0\.0\.1, read by /);
      expect(checked.map(({ what }) => what)).not.toContain('output files rebuilt byte for byte');
    });
  });

  test('counts the codes that are wrong, however few of them it shows', () => {
    const copy = copyOf(whole);
    forge(copy, 'small-one-curves.hpv', (bytes) => {
      for (let point = 0; point < 4; point++) bend(bytes, 'POIN', point * 4 + 2, 2);
    });
    expect(verifySuite(copy).checked[1]).toEqual({
      what: 'codes against the model',
      held: 40,
      of: 44,
    });
  });

  test('finds a folder in the place of a file', () => {
    const copy = copyOf(whole);
    rmSync(join(copy, 'small-one-curves.hpv'));
    mkdirSync(join(copy, 'small-one-curves.hpv'));
    expect(problemsOf(copy)[0]).toMatchObject({ message: 'is not a plain file.' });
  });

  test('refuses a folder that holds no suite', () => {
    expect(problemsOf(inputs)[0]).toMatchObject({ code: 'NOT_A_SUITE', file: inputs });
    expect(problemsOf(join(inputs, 'nowhere'))[0]?.message).toBe('there is no such folder.');
  });
});
