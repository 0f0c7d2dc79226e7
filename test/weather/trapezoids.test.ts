import { describe, expect, it } from 'vitest';
import { hold, trapezoids } from '../../src/weather/blocks.js';
import { standardSequence } from '../../src/weather/load.js';
import { TRAPEZOID_TABLES, type TrapezoidTableName } from '../../src/weather/trapezoid-tables.js';
import { SETTLING, TRAPEZOIDS } from '../../src/weather/trapezoids.js';
import { celsiusAt, irradianceAt, markText, problemsOf, weatherOf } from './reading.js';

// Rows patterned on EN 50530:2010, from memory: slope in W/m²/s and duration of the row in whole
// seconds, settling included. The durations were remembered apart from repetitions and slopes, so
// that they check each other.
const REMEMBERED: Readonly<Record<TrapezoidTableName, readonly (readonly [number, number])[]>> = {
  'low-medium': [
    [0.5, 3540],
    [1, 1940],
    [2, 1560],
    [3, 1447],
    [5, 1380],
    [7, 1374],
    [10, 1300],
    [14, 1071],
    [20, 900],
    [30, 767],
    [50, 660],
  ],
  'medium-high': [
    [10, 1900],
    [14, 1500],
    [20, 1200],
    [30, 967],
    [50, 780],
    [100, 640],
  ],
  'start-stop': [[0.1, 2320]],
};

describe.each(Object.entries(REMEMBERED))('the table %s', (name, rows) => {
  const table = name as TrapezoidTableName;

  it('has the remembered slopes', () => {
    expect(TRAPEZOID_TABLES[table].rows.map((row) => row.slope)).toEqual(
      rows.map(([slope]) => slope),
    );
  });

  it.each(rows)('has a row of %d W/m²/s that rounds to the remembered %d s', (slope, duration) => {
    const weather = weatherOf(trapezoids({ table, slopes_W_per_m2_per_s: [slope] }));
    expect(Math.round(weather.duration)).toBe(duration);
  });
});

describe('a standard sequence', () => {
  // Totals from memory: 15 939 s and 6987 s in whole seconds, 2320 s. Unrounded by arithmetic:
  // sum of 300 + n * (2 * dG / slope + 20), which 1 ms holds apart from any sum of rounded ramps.
  it.each([
    ['low-medium', 15_939.048],
    ['medium-high', 6986.667],
    ['start-stop', 2320],
  ] as const)('%s lasts %d s to a millisecond', (table, duration) => {
    expect(Math.abs(standardSequence(table).duration - duration)).toBeLessThan(1e-3);
  });

  it('ramps for the exact time, not the printed one', () => {
    const weather = weatherOf(trapezoids({ table: 'low-medium', slopes_W_per_m2_per_s: [7] }));
    // 400 / 7 = 57.142857 s, printed as 57.
    expect(weather.duration).toBe(300 + 8 * (2 * (400 / 7) + 20));
    expect(irradianceAt(weather, 300 + 57)).toBeCloseTo(499, 9);
    expect(irradianceAt(weather, 300 + 400 / 7)).toBe(500);
  });

  it('settles for 300 s, then goes up, dwells, comes down and dwells', () => {
    const weather = standardSequence('start-stop');
    const course = [0, 300, 301, 790, 1280, 1310, 1800, 2290, 2320];
    expect(course.map((time) => Number(irradianceAt(weather, time).toFixed(9)))).toEqual([
      2, 2, 2.1, 51, 100, 100, 51, 2, 2,
    ]);
    expect(celsiusAt(weather, 1300)).toBe(25);
  });

  it('steps down to the low level between blocks that end elsewhere', () => {
    const weather = weatherOf(
      hold(1),
      trapezoids({ table: 'medium-high' }),
      trapezoids({ table: 'low-medium' }),
    );
    expect(irradianceAt(weather, 0.5)).toBe(0);
    expect(irradianceAt(weather, 1)).toBe(300);
    expect(irradianceAt(weather, 1 + 6986.667)).toBe(100);
  });

  it('is refused under an unknown name', () => {
    const unknown = 'low-high' as TrapezoidTableName;
    expect(problemsOf(() => standardSequence(unknown))).toMatchObject([
      { code: 'INVALID_VALUE', field: 'blocks[0].trapezoids.table' },
    ]);
  });
});

describe('trapezoid rows', () => {
  it('run in the order asked for, each marked with its settling and its trapezoids', () => {
    const weather = weatherOf(
      hold(10),
      trapezoids({ table: 'medium-high', slopes_W_per_m2_per_s: [100, 10], settle_s: 60 }),
    );
    // 10 * (2 * 7 + 20) = 340 s and 10 * (2 * 70 + 20) = 1600 s.
    expect([...weather.marks()].map(markText)).toEqual([
      'medium-high 100 W/m²/s: 10 to 410',
      `medium-high 100 W/m²/s / ${SETTLING}: 10 to 70`,
      `medium-high 100 W/m²/s / ${TRAPEZOIDS}: 70 to 410`,
      'medium-high 10 W/m²/s: 410 to 2070',
      `medium-high 10 W/m²/s / ${SETTLING}: 410 to 470`,
      `medium-high 10 W/m²/s / ${TRAPEZOIDS}: 470 to 2070`,
    ]);
  });

  it('start with a ramp if no settling is wanted', () => {
    const weather = weatherOf(trapezoids({ table: 'start-stop', settle_s: 0 }));
    expect(weather.duration).toBe(2020);
    expect([...weather.marks()].map(markText)).toEqual([
      'start-stop 0.1 W/m²/s: 0 to 2020',
      `start-stop 0.1 W/m²/s / ${TRAPEZOIDS}: 0 to 2020`,
    ]);
  });

  it('cover a whole sequence with marks that leave no gap', () => {
    const weather = standardSequence('low-medium');
    const rows = [...weather.marks()].filter((mark) => mark.path.length === 1);
    expect(rows).toHaveLength(11);
    expect(rows[0]!.start).toBe(0);
    // Sums of the same durations in another order: a few units in the last place of 16 000 s.
    for (const [index, row] of rows.entries()) {
      expect(Math.abs((rows[index + 1]?.start ?? weather.duration) - row.end)).toBeLessThan(1e-11);
    }
  });
});
