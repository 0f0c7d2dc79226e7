import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { codeCurve, currentCodeAt, interpolateCode } from '../../src/table/curve-lookup.js';
import { anyCurve } from '../firmware/any-curve.js';

describe('currentCodeAt', () => {
  test('is the exact straight line, its drop rounded to the nearest code, halves up', () => {
    fc.assert(
      fc.property(anyCurve(), (curve) => {
        const found = curve.questions.map((code) => currentCodeAt(curve, code));
        expect(found).toEqual(curve.questions.map((code) => exactCurrent(curve, code)));
      }),
      { seed: 11, numRuns: 200 },
    );
  });

  test('is the stored current at a stored voltage', () => {
    fc.assert(
      fc.property(anyCurve(), (curve) => {
        const found = Array.from(curve.voltage, (code) => currentCodeAt(curve, code));
        expect(found).toEqual(Array.from(curve.current));
      }),
      { seed: 12 },
    );
  });

  test('never rises with voltage', () => {
    fc.assert(
      fc.property(anyCurve(), (curve) => {
        const rising = curve.questions.toSorted((a, b) => a - b);
        const currents = rising.map((code) => currentCodeAt(curve, code));
        expect(currents).toEqual(currents.toSorted((a, b) => b - a));
      }),
      { seed: 13 },
    );
  });

  test('is constant on a curve of one point', () => {
    const curve = codeCurve(Uint8Array.of(3), Int16Array.of(-5));
    expect([0, 3, 4_000_000_000].map((code) => currentCodeAt(curve, code))).toEqual([-5, -5, -5]);
  });
});

describe('interpolateCode', () => {
  // By hand: a drop of 1 over a span of 4 is 0.25, 0.5 and 0.75 on the way.
  test('rounds half a code of drop down the curve', () => {
    expect([0, 1, 2, 3, 4].map((v) => interpolateCode(0, 10, 4, 9, v))).toEqual([10, 10, 9, 9, 9]);
  });

  // By hand: a drop of 1 over a span of 3 is 1/3 and 2/3 on the way.
  test('rounds to the nearer code over an odd span', () => {
    expect([0, 1, 2, 3].map((v) => interpolateCode(0, 10, 3, 9, v))).toEqual([10, 10, 9, 9]);
  });

  // By hand: (2^32 - 1) × 2^31 / (2^32 - 1) = 2^31 exactly.
  test('is exact over the whole range of 32-bit codes', () => {
    expect(interpolateCode(0, 0xffff_ffff, 0xffff_ffff, 0, 0x8000_0000)).toBe(0x7fff_ffff);
    expect(interpolateCode(-0x8000_0000, 0x7fff_ffff, 0x7fff_ffff, -0x8000_0000, 0)).toBe(-1);
  });

  test('holds the first current where the second is above it, up to the second voltage', () => {
    expect([0, 5, 9, 10].map((v) => interpolateCode(0, 3, 10, 8, v))).toEqual([3, 3, 3, 8]);
  });
});

describe('codeCurve', () => {
  const refusal = (voltage: number[], current: number[]): unknown => {
    try {
      return codeCurve(Int16Array.from(voltage), Int16Array.from(current));
    } catch (error) {
      return error instanceof Fault ? error.problems[0] : error;
    }
  };

  test('refuses an empty curve and a current too few', () => {
    expect(refusal([], [])).toMatchObject({ code: 'CURVE_LENGTH' });
    expect(refusal([1, 2], [1])).toMatchObject({ code: 'CURVE_LENGTH' });
  });

  test('refuses voltages that do not rise and currents that rise, naming the element', () => {
    expect(refusal([1, 4, 4], [3, 2, 1])).toMatchObject({
      code: 'CURVE_VOLTAGE_ORDER',
      field: 'voltage[2]',
      message: 'must be above the code before, 4, found 4.',
    });
    expect(refusal([1, 4, 5], [3, 4, 1])).toMatchObject({
      code: 'CURVE_CURRENT_ORDER',
      field: 'current[1]',
      message: 'must be at most the code before, 3, found 4.',
    });
  });
});

/**
 * Arbitrary precision and another way round: finds the segment by counting, and rounds the drop as
 * floor(drop × distance / span + 1/2), as a fraction over 2 × span.
 */
function exactCurrent(curve: Parameters<typeof currentCodeAt>[0], voltageCode: number): number {
  const { voltage, current } = curve;
  const k = Array.from(voltage).filter((code) => code <= voltageCode).length - 1;
  if (k < 0) return current[0]!;
  if (k === voltage.length - 1) return current[k]!;
  const [v0, v1] = [BigInt(voltage[k]!), BigInt(voltage[k + 1]!)];
  const [i0, i1] = [BigInt(current[k]!), BigInt(current[k + 1]!)];
  const span = v1 - v0;
  const numerator = 2n * (i0 - i1) * (BigInt(voltageCode) - v0) + span;
  return Number(i0 - numerator / (2n * span));
}
