import { describe, expect, test } from 'vitest';
import { stepRatio } from '../../src/fixed/step-ratio.js';

describe('stepRatio', () => {
  test.each([
    [0.001, { numerator: 1, denominator: 1000 }],
    [0.1, { numerator: 1, denominator: 10 }],
    [0.3, { numerator: 3, denominator: 10 }],
    [2.5, { numerator: 25, denominator: 10 }],
    [50, { numerator: 50, denominator: 1 }],
    // 3.3 V over 4096 codes is 0.0008056640625 V exactly.
    [3.3 / 4096, { numerator: 8056640625, denominator: 1e13 }],
  ])('writes the decimal step %d as a ratio of whole numbers', (step, ratio) => {
    expect(stepRatio(step, 65535)).toEqual(ratio);
  });

  test('leaves powers of two as they are, since multiplying by them is exact', () => {
    expect(stepRatio(2 ** -8, 65535)).toEqual({ numerator: 2 ** -8, denominator: 1 });
  });

  test('leaves steps that are no short decimal as they are', () => {
    expect(stepRatio(3.3 / 4095, 4095)).toEqual({ numerator: 3.3 / 4095, denominator: 1 });
    expect(stepRatio(1 / 3, 255)).toEqual({ numerator: 1 / 3, denominator: 1 });
  });

  test('keeps products with codes below 2^53, where doubles count exactly', () => {
    const step = 0.123456789;
    expect(stepRatio(step, 65535)).toEqual({ numerator: 123456789, denominator: 1e9 });
    expect(stepRatio(step, 2 ** 32)).toEqual({ numerator: step, denominator: 1 });
  });
});
