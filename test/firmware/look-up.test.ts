import fc from 'fast-check';
import { expect, test } from 'vitest';
import { currentCodeAt, interpolateCode } from '../../src/table/curve-lookup.js';
import { type AnyCurve, anyCurve } from './any-curve.js';
import { HP } from './c-library.js';
import { buildCurveSet } from './image-builder.js';
import { describeEveryWay } from './ways.js';

describeEveryWay('the look-up', (library) => {
  const askC = async (curve: AnyCurve, voltages: readonly number[]): Promise<number[]> => {
    const dark = { voltage: [0], current: [0] };
    const file = buildCurveSet([dark, curve], curve.voltageLayout, curve.currentLayout);
    expect(await library().open(file)).toBe(HP.OK);
    expect(await library().check()).toBe(HP.OK);
    expect(await library().curve(1)).toMatchObject({ result: HP.OK, points: curve.voltage.length });
    const words = await library().currents(voltages.map((code) => code >>> 0));
    return Array.from(words, (word) => (curve.currentLayout.signed ? word | 0 : word));
  };

  test('gives what the TypeScript twin gives, bit for bit', async () => {
    await fc.assert(
      fc.asyncProperty(anyCurve(), async (curve) => {
        const expected = curve.questions.map((code) => currentCodeAt(curve, code));
        expect(await askC(curve, curve.questions)).toEqual(expected);
      }),
      { seed: 1, numRuns: 200 },
    );
  });

  test('never rises with voltage', async () => {
    await fc.assert(
      fc.asyncProperty(anyCurve(), async (curve) => {
        const currents = await askC(
          curve,
          curve.questions.toSorted((a, b) => a - b),
        );
        expect(currents).toEqual(currents.toSorted((a, b) => b - a));
      }),
      { seed: 2, numRuns: 100 },
    );
  });

  test('is exact at the points', async () => {
    await fc.assert(
      fc.asyncProperty(anyCurve(), async (curve) => {
        const currents = await askC(curve, Array.from(curve.voltage));
        expect(currents).toEqual(Array.from(curve.current));
      }),
      { seed: 3, numRuns: 100 },
    );
  });

  const anyWord = fc.oneof(
    fc.integer({ min: 0, max: 0xffff_ffff }),
    fc.integer({ min: 0, max: 0x1_0002 }),
    fc.constantFrom(0xffff, 0x1_0000, 0x7fff_ffff, 0x8000_0000, 0xffff_ffff),
  );
  test('interpolates between any two points, in whatever order, as the twin does', async () => {
    const fives = fc.sample(fc.tuple(anyWord, anyWord, anyWord, anyWord, anyWord), {
      seed: 4,
      numRuns: 20_000,
    });
    const expected = fives.map((five) => interpolateCode(...five));
    expect(Array.from(await library().interpolate(fives))).toEqual(expected);
  });

  test('interpolates next to every power of two, of drop and of span, as the twin does', async () => {
    const edges = Array.from({ length: 32 }, (_, bit) => [-1, 0, 1].map((by) => 2 ** bit + by));
    const sizes = [...edges.flat(), 2 ** 32 - 1].filter((size) => size > 1);
    const fives = sizes.flatMap((drop) =>
      sizes.flatMap((span) =>
        [1, Math.floor(span / 2), Math.floor(span / 2) + 1, span - 1].map(
          (distance) => [0, drop, span, 0, distance] as const,
        ),
      ),
    );
    const expected = fives.map((five) => interpolateCode(...five));
    expect(Array.from(await library().interpolate(fives))).toEqual(expected);
  });
});
