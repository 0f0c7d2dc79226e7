import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { POWERS_OF_TWO } from '../../src/numeric/powers-of-two.js';

const numeric = join(import.meta.dirname, '../../src/numeric');

test('the generator reproduces the committed tables byte for byte', () => {
  const folder = mkdtempSync(join(tmpdir(), 'tables-'));
  try {
    execFileSync(process.execPath, [join(numeric, 'generate-tables.mjs'), folder]);
    for (const name of ['exponential-table.ts', 'logarithm-table.ts']) {
      const fresh = readFileSync(join(folder, name));
      expect(fresh.equals(readFileSync(join(numeric, name))), name).toBe(true);
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
});

test('the powers of two run from 2^-1023 to 2^1023 and then to infinity', () => {
  // IEEE 754: a double with exponent field e + 1023 and fraction 0 is 2^e; 2^-1023 is subnormal.
  const words = new DataView(new ArrayBuffer(8));
  for (let e = -1022; e <= 1023; e += 1) {
    words.setUint32(0, (e + 1023) << 20);
    expect(POWERS_OF_TWO[e + 1023]).toBe(words.getFloat64(0));
  }
  expect(POWERS_OF_TWO[0]! * 2).toBe(POWERS_OF_TWO[1]);
  expect(POWERS_OF_TWO[2047]).toBe(Infinity);
  expect(POWERS_OF_TWO).toHaveLength(2048);
});
