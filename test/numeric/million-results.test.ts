import { expect, test } from 'vitest';
import { checksumOfAMillionResults, GOLDEN_CHECKSUM } from './million-results.js';

test('a million results of exp, expm1, log and log1p have the bits on record', () => {
  expect(checksumOfAMillionResults().toString(16)).toBe(GOLDEN_CHECKSUM.toString(16));
});
