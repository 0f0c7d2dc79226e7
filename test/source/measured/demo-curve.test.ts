/** The measured curve of the demo: of an invented module, by the recipe below. */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { expm1 } from '../../../src/numeric/exponential.js';
import { Random } from '../../../src/numeric/random.js';
import { fromCelsius, thermalVoltage } from '../../../src/quantities.js';
import { readMeasuredCurve } from '../../../src/source/measured/curve-file.js';
import { fitMeasuredCurve } from '../../../src/source/measured/measured-fit.js';
import { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';

const FILE = fileURLToPath(new URL('../../../vectors/demo/measured.csv', import.meta.url));

const CELLS = 60;
const TEMPERATURE = fromCelsius(43);
const idealityVoltage = 1.15 * CELLS * thermalVoltage(TEMPERATURE);
const TRUTH = {
  photocurrent: 7.84,
  saturationCurrent: 7.84 / expm1(35.6 / idealityVoltage),
  idealityVoltage,
  seriesResistance: 0.29,
  shuntConductance: 1 / 340,
};

/** 48 points swept upwards, noise of 6 mA, millivolts and milliamperes, one reading with a slip. */
function recipe(): string {
  const random = new Random(1186);
  const curve = new SingleDiodeCurve(TRUTH);
  const rows = Array.from({ length: 48 }, (_, index) => {
    const share = index / 47;
    // Closer together towards open circuit, where the curve is steep; from a little below 0 V.
    const voltage = -0.4 + 36.4 * share * (1.55 - 0.55 * share);
    const current = curve.current(voltage) + 0.006 * random.normal();
    const slip = index === 17 ? -0.18 : 0;
    return `${(1000 * voltage).toFixed(0)},${(current + slip).toFixed(3)}`;
  });
  return [
    '# An invented module of 60 polycrystalline cells, swept at 860 W/m2 and 43 C.',
    '# One reading was written down wrong: hillproof fit-curve finds it.',
    'voltage_mV,current_A',
    ...rows,
    '',
  ].join('\n');
}

test('The measured curve of the demo is the one of the recipe', () => {
  // If the change is meant, write recipe() to the file and say so in the change log.
  expect(readFileSync(FILE, 'utf8')).toBe(recipe());
});

describe('The fit of the demo curve', () => {
  const { points } = readMeasuredCurve(FILE);
  const options = { cellsInSeries: CELLS, cellTemperature: TEMPERATURE };

  test('finds the one reading that was written down wrong, at line 21', () => {
    expect(fitMeasuredCurve(points, options).outliers.map(({ line }) => line)).toEqual([21]);
  });

  test('without it has the parameters of the recipe within three standard errors', () => {
    const { estimates, noise } = fitMeasuredCurve(points, { ...options, withoutOutliers: true });
    const truth: Record<string, number> = { ...TRUTH, ideality: 1.15 };
    for (const { name, value, standardError } of estimates) {
      expect(Math.abs(value - truth[name]!), name).toBeLessThan(3 * standardError!);
    }
    // 42 degrees of freedom scatter a standard deviation by 11 %.
    expect(Math.abs(noise / 0.006 - 1)).toBeLessThan(3 * 0.11);
  });
});
