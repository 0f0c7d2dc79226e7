/** Small vector files for the tests of the reader. */
import { buildCurveSet, buildFile, table } from './image-builder.js';

/** Two curves of 16-bit voltages and signed 16-bit currents, with two peaks and one. */
export const twoCurves = {
  curves: [
    {
      voltage: [20, 100, 180, 240, 300],
      current: [900, 890, 500, 490, -3],
      peaks: [1, 3],
      globalPeak: 1,
    },
    { voltage: [20, 110, 310], current: [450, 440, 0], peaks: [1], globalPeak: 0 },
  ],
  voltage: { storage: 2, signed: false },
  current: { storage: 2, signed: true },
} as const;

export const smallCurveSet = (): Uint8Array =>
  buildCurveSet(twoCurves.curves, twoCurves.voltage, twoCurves.current);

/** Times in 32 bits, irradiances of two groups in 16 bits, a signed temperature in 8 bits. */
export const timelineRows = [
  [0, 10_000, 9_000, -128, 0xffff_ffff],
  [1_000, 0, 65_535, 127, 0],
  [4_000_000_000, 1, 2, -1, 0x8000_0000],
] as const;

export function smallTimeline(): Uint8Array {
  const { channels, section } = table('SAMP', timelineRows, [
    { quantity: 1, storage: 4, signed: false, step: 0.001, name: 'time' },
    { quantity: 2, group: 0, storage: 2, signed: false, step: 0.1, name: 'irradiance' },
    { quantity: 2, group: 1, storage: 2, signed: false, step: 0.1, name: 'irradiance_1' },
    {
      ...{ quantity: 3, storage: 1, signed: true, width: 7, rounding: 3, overflow: 1 },
      ...{ step: 0.5, origin: -40, name: 'fifteen_letters' },
    },
    { quantity: 6, storage: 4, signed: true, step: 2 ** -20, name: 'power' },
  ]);
  return buildFile(2, channels, [section]);
}
