import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import type { MeasuredPoint } from '../../../src/source/measured/curve-data.js';
import { fitMeasuredCurve } from '../../../src/source/measured/measured-fit.js';
import type { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { faultOf } from '../fault-of.js';
import { CELL_POINTS } from './easwarakhanthan.js';
import { CELLS, noisyPoints, TEMPERATURE, TRUTH } from './synthetic.js';

const MEASURED_AT = { cellsInSeries: CELLS, cellTemperature: TEMPERATURE };
const NOISE = 0.01;

/** Points with the currents at some places off by so many times the noise. */
function spoilt(seed: number, count: number, spoils: Readonly<Record<number, number>>) {
  return noisyPoints(new Random(seed), count, NOISE).map((point, index): MeasuredPoint => {
    const times = spoils[index] ?? 0;
    return { ...point, current: point.current + times * NOISE };
  });
}

const linesFound = (points: readonly MeasuredPoint[]): (number | undefined)[] =>
  fitMeasuredCurve(points, MEASURED_AT).outliers.map(({ line }) => line);

describe('Outliers', () => {
  test('are found by line, wherever in the curve and however far off they are', () => {
    for (const times of [15, -15, 100, -800]) {
      for (const place of [0, 7, 25, 33, 36, 39]) {
        expect(linesFound(spoilt(place, 40, { [place]: times })), `${place} ${times}`).toContain(
          place + 2,
        );
      }
    }
  });

  test('do not hide each other: six of forty on one side are all found', () => {
    const places = { 4: 60, 11: 45, 18: 80, 24: 50, 30: 70, 35: 55 };
    const found = linesFound(spoilt(5, 40, places));
    expect(found).toEqual([6, 13, 20, 26, 32, 37]);
  });

  test('are wrongly found in no more than one curve of twenty', () => {
    // One in thirty to seventy by longer simulation; 150 curves scatter by 1.3 %.
    let wrong = 0;
    for (let seed = 0; seed < 150; seed++) {
      if (linesFound(noisyPoints(new Random(seed), 40, NOISE)).length > 0) wrong += 1;
    }
    expect(wrong / 150).toBeLessThan(0.05);
  });

  test('are not seen in the rounding of a curve without noise', () => {
    expect(linesFound(noisyPoints(new Random(1), 40, 0))).toEqual([]);
    const rounded = noisyPoints(new Random(1), 60, 0).map((point) => ({
      ...point,
      current: Math.round(point.current * 100) / 100,
    }));
    expect(linesFound(rounded)).toEqual([]);
  });

  test('stay in the fit unless asked; the report gives how far off they are', () => {
    const points = spoilt(9, 40, { 20: 50 });
    const fit = fitMeasuredCurve(points, MEASURED_AT);
    expect(fit.points).toHaveLength(40);
    expect(fit.outliersLeftOut).toBe(false);
    const [outlier] = fit.outliers;
    // Within the noise of the point itself, three of its standard deviations.
    expect(Math.abs(outlier!.residual + 50 * NOISE)).toBeLessThan(3 * NOISE);
    expect(outlier!.studentised).toBeLessThan(-30);
  });

  test('left out give exactly the fit of the other points, and are reported still', () => {
    const points = spoilt(9, 40, { 20: 50, 31: -40 });
    const fit = fitMeasuredCurve(points, { ...MEASURED_AT, withoutOutliers: true });
    const others = points.filter((_, index) => index !== 20 && index !== 31);
    const clean = fitMeasuredCurve(others, MEASURED_AT);
    expect(fit.outliers.map(({ line }) => line)).toEqual([22, 33]);
    expect(fit.outliersLeftOut).toBe(true);
    expect((fit.curve as SingleDiodeCurve).diode).toEqual((clean.curve as SingleDiodeCurve).diode);
    expect(fit.rms).toEqual(clean.rms);
    const { seriesResistance } = (fit.curve as SingleDiodeCurve).diode;
    expect(Math.abs(seriesResistance / TRUTH.seriesResistance - 1)).toBeLessThan(0.03);
  });

  test('are all copies of a point that was repeated', () => {
    const points = spoilt(9, 40, { 20: 50 });
    const twice = [...points, { ...points[20]!, line: 99 }];
    expect(linesFound(twice)).toEqual([22, 99]);
  });

  test('are not left out where they are more than a fifth: that is another curve', () => {
    const spoils = Object.fromEntries(Array.from({ length: 9 }, (_, k) => [3 + 4 * k, 300]));
    const points = spoilt(2, 40, spoils);
    expect(linesFound(points)).toHaveLength(9);
    const fault = faultOf(() =>
      fitMeasuredCurve(points, { ...MEASURED_AT, withoutOutliers: true }),
    );
    expect(fault.problems[0]!.message).toContain('lose 9 of its 40 points');
  });

  test('are not judged with fewer than two points a parameter', () => {
    const nine = CELL_POINTS.filter((_, index) => index % 3 === 0);
    expect(nine).toHaveLength(9);
    const fit = fitMeasuredCurve(nine, { cellsInSeries: 1, cellTemperature: 306.15 });
    expect([fit.outliersJudged, fit.outliers]).toEqual([false, []]);
  });
});
