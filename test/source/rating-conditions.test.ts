import { describe, expect, test } from 'vitest';
import { toCelsius } from '../../src/quantities.js';
import { PERFORMANCE_MATRIX, RATING_CONDITIONS } from '../../src/source/rating-conditions.js';

const celsius = (temperature: number): number => Number(toCelsius(temperature).toFixed(9));

describe('The performance matrix', () => {
  // IEC 61853-1:2011: irradiances, two copies; temperatures, one; the corners left out, from memory.
  test('has the 22 pairs, each once', () => {
    const pairs = PERFORMANCE_MATRIX.map(
      ({ irradiance, cellTemperature }) => `${irradiance}/${celsius(cellTemperature)}`,
    );
    expect(pairs).toHaveLength(22);
    expect(new Set(pairs).size).toBe(22);
    const at = (irradiance: number) =>
      pairs
        .filter((pair) => pair.startsWith(`${irradiance}/`))
        .map((pair) => Number(pair.split('/')[1]));
    expect([1100, 1000, 800, 600, 400, 200, 100].map(at)).toEqual([
      [25, 50, 75],
      [15, 25, 50, 75],
      [15, 25, 50, 75],
      [15, 25, 50, 75],
      [15, 25, 50],
      [15, 25],
      [15, 25],
    ]);
  });

  test('holds every rating condition that has a cell temperature, but for LTC', () => {
    const named = Object.entries(RATING_CONDITIONS).filter(([, condition]) => {
      const cells = 'cellTemperature' in condition ? condition.cellTemperature : undefined;
      return PERFORMANCE_MATRIX.some(
        (pair) => pair.irradiance === condition.irradiance && pair.cellTemperature === cells,
      );
    });
    // 500 W/m² is no irradiance of the matrix.
    expect(named.map(([name]) => name)).toEqual(['stc', 'lic', 'htc']);
  });
});

describe('The rating conditions', () => {
  // From memory.
  test('are STC 1000/25, NOCT 800 with air of 20, LIC 200/25, HTC 1000/75, LTC 500/15', () => {
    const rows = Object.entries(RATING_CONDITIONS).map(([name, condition]) => [
      name,
      condition.irradiance,
      'cellTemperature' in condition
        ? celsius(condition.cellTemperature)
        : `air ${celsius(condition.airTemperature)}`,
    ]);
    expect(rows).toEqual([
      ['stc', 1000, 25],
      ['noct', 800, 'air 20'],
      ['lic', 200, 25],
      ['htc', 1000, 75],
      ['ltc', 500, 15],
    ]);
  });
});
