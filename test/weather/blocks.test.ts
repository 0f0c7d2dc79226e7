import { describe, expect, it } from 'vitest';
import { hold, ramp, repeat, sequence, step } from '../../src/weather/blocks.js';
import { compileWeather } from '../../src/weather/load.js';
import { writableConditions } from '../../src/weather/weather.js';
import { celsiusAt, irradianceAt, markText, problemsOf, weatherOf } from './reading.js';

describe('a weather', () => {
  it('starts dark and at 25 °C unless told otherwise', () => {
    const weather = weatherOf(hold(1));
    expect(irradianceAt(weather, 0)).toBe(0);
    expect(celsiusAt(weather, 0)).toBe(25);
  });

  it('starts from the values given', () => {
    const weather = compileWeather({
      name: 'cold',
      irradiance_W_per_m2: 640,
      cell_temperature_C: -10,
      blocks: [hold(1)],
    });
    expect(irradianceAt(weather, 0)).toBe(640);
    expect(celsiusAt(weather, 1)).toBe(-10);
  });

  it('clamps times before its start and after its end', () => {
    const weather = weatherOf(
      step({ irradiance_W_per_m2: 5 }),
      ramp({ irradiance_W_per_m2: 9, for_s: 2 }),
    );
    expect(irradianceAt(weather, -1)).toBe(5);
    expect(irradianceAt(weather, -Infinity)).toBe(5);
    expect(irradianceAt(weather, 3)).toBe(9);
    expect(irradianceAt(weather, Infinity)).toBe(9);
  });

  it('refuses a time that is no number and arrays of the wrong length', () => {
    const weather = weatherOf(hold(1));
    const one = writableConditions(1);
    const two = writableConditions(2);
    const mixed = { irradiance: one.irradiance, cellTemperature: two.cellTemperature };
    const fields = [
      () => {
        weather.conditionsAt(NaN, one);
      },
      () => {
        weather.conditionsAt(0, two);
      },
      () => {
        weather.conditionsAt(0, mixed);
      },
    ].map((act) => problemsOf(act).map(({ code, field }) => `${code} ${field!}`));
    expect(fields).toEqual([['ARGUMENT time'], ['ARGUMENT into'], ['ARGUMENT into']]);
  });
});

describe('many blocks', () => {
  it('begin at the sum of the times before them, free of the drift of a running sum', () => {
    // 100 000 times 0.1 in plain doubles come to 10 000.0000000188.
    const tenths = Array.from({ length: 100_000 }, () => hold(0.1));
    const weather = weatherOf(...tenths, step({ irradiance_W_per_m2: 800 }), hold(1));
    expect(weather.duration).toBe(10_001);
    expect(irradianceAt(weather, 10_000)).toBe(800);
    expect(irradianceAt(weather, 10_000 - 1e-9)).toBe(0);
  });
});

describe('a step', () => {
  it('takes no time, and its new value holds at its own instant', () => {
    const weather = weatherOf(hold(2), step({ irradiance_W_per_m2: 800 }), hold(3));
    expect(weather.duration).toBe(5);
    expect(irradianceAt(weather, 1.999999)).toBe(0);
    expect(irradianceAt(weather, 2)).toBe(800);
  });

  it('leaves what it does not set as it was', () => {
    const weather = weatherOf(
      step({ irradiance_W_per_m2: 800, cell_temperature_C: 31 }),
      hold(1),
      step({ cell_temperature_C: 40 }),
      hold(1),
    );
    expect([irradianceAt(weather, 0.5), celsiusAt(weather, 0.5)]).toEqual([800, 31]);
    expect([irradianceAt(weather, 1.5), celsiusAt(weather, 1.5)]).toEqual([800, 40]);
  });

  it('shows at the end of the weather if it is the last block', () => {
    const weather = weatherOf(hold(2), step({ irradiance_W_per_m2: 800 }));
    expect(irradianceAt(weather, 2)).toBe(800);
    expect(irradianceAt(weather, 1.9)).toBe(0);
  });

  it('is passed over by another at the same instant', () => {
    const weather = weatherOf(
      hold(1),
      step({ irradiance_W_per_m2: 800 }),
      step({ irradiance_W_per_m2: 300 }),
      hold(1),
    );
    expect(irradianceAt(weather, 1)).toBe(300);
  });
});

describe('a ramp', () => {
  it('runs straight from where the block before it ended', () => {
    const weather = weatherOf(
      step({ irradiance_W_per_m2: 800 }),
      hold(10),
      ramp({ irradiance_W_per_m2: 300, for_s: 20 }),
    );
    expect([10, 12, 20, 25, 30].map((time) => irradianceAt(weather, time))).toEqual([
      800, 750, 550, 425, 300,
    ]);
  });

  it('takes the change over the slope, up and down alike', () => {
    const weather = weatherOf(
      ramp({ irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 50 }),
      ramp({ irradiance_W_per_m2: 600, slope_W_per_m2_per_s: 100 }),
    );
    expect(weather.duration).toBe(900 / 50 + 300 / 100);
    expect(irradianceAt(weather, 9)).toBe(450);
    expect(irradianceAt(weather, 19)).toBe(800);
  });

  it('brings the cell temperature along over the same time', () => {
    const weather = weatherOf(
      ramp({ irradiance_W_per_m2: 900, slope_W_per_m2_per_s: 50, cell_temperature_C: 45 }),
    );
    expect([0, 9, 18].map((time) => celsiusAt(weather, time))).toEqual([25, 35, 45]);
  });

  it('may change the cell temperature alone', () => {
    const weather = weatherOf(ramp({ cell_temperature_C: -15, for_s: 8 }));
    expect([0, 2, 8].map((time) => celsiusAt(weather, time))).toEqual([25, 15, -15]);
    expect(irradianceAt(weather, 4)).toBe(0);
  });

  it('meets both ends exactly where they are no round numbers', () => {
    const weather = weatherOf(
      step({ irradiance_W_per_m2: 0.1 }),
      ramp({ irradiance_W_per_m2: 1234.567, for_s: 0.3 }),
    );
    expect(irradianceAt(weather, 0)).toBe(0.1);
    expect(irradianceAt(weather, 0.3)).toBe(1234.567);
  });
});

describe('a repeat', () => {
  it('starts each pass where the one before it ended, so nothing jumps that is no step', () => {
    const weather = weatherOf(
      repeat(3, [
        ramp({ irradiance_W_per_m2: 800, for_s: 10 }),
        ramp({ irradiance_W_per_m2: 400, for_s: 10 }),
      ]),
    );
    // First pass 0 to 800 to 400, later ones 400 to 800 to 400.
    expect(weather.duration).toBe(60);
    expect([0, 5, 10, 15, 20, 25, 30, 45, 60].map((t) => irradianceAt(weather, t))).toEqual([
      0, 400, 800, 600, 400, 600, 800, 600, 400,
    ]);
  });

  it('gives a first pass of another length where a slope starts from elsewhere', () => {
    const weather = weatherOf(
      repeat(3, [
        ramp({ irradiance_W_per_m2: 800, slope_W_per_m2_per_s: 100 }),
        ramp({ irradiance_W_per_m2: 400, slope_W_per_m2_per_s: 100 }),
      ]),
    );
    expect(weather.duration).toBe(8 + 4 + 2 * (4 + 4));
    expect([12, 16, 20, 24, 28].map((t) => irradianceAt(weather, t))).toEqual([
      400, 800, 400, 800, 400,
    ]);
  });

  it('carries through what its blocks never set', () => {
    const weather = weatherOf(
      step({ cell_temperature_C: 50 }),
      repeat(4, [
        step({ irradiance_W_per_m2: 700 }),
        hold(1),
        step({ irradiance_W_per_m2: 100 }),
        hold(1),
      ]),
      hold(1),
    );
    expect([0, 3, 7, 9].map((time) => celsiusAt(weather, time))).toEqual([50, 50, 50, 50]);
    expect([0, 3, 6, 8].map((time) => irradianceAt(weather, time))).toEqual([700, 100, 700, 100]);
  });

  it('shows the start of the new pass at the seam', () => {
    const weather = weatherOf(
      repeat(3, [
        step({ irradiance_W_per_m2: 700 }),
        hold(1),
        step({ irradiance_W_per_m2: 100 }),
        hold(1),
      ]),
    );
    expect([0, 2, 4].map((time) => irradianceAt(weather, time))).toEqual([700, 700, 700]);
    expect(irradianceAt(weather, 6)).toBe(100);
  });

  it('of one pass is its blocks, even if they could not be repeated', () => {
    const weather = weatherOf(
      repeat(1, [ramp({ irradiance_W_per_m2: 800, slope_W_per_m2_per_s: 100 })]),
    );
    expect(weather.duration).toBe(8);
    expect(irradianceAt(weather, 4)).toBe(400);
  });
});

describe('marks', () => {
  it('are the named sequences, an outer one before those inside it', () => {
    const weather = weatherOf(
      hold(1),
      sequence([hold(2), sequence([hold(3)], 'noon'), sequence([hold(4)])], 'day'),
      sequence([step({ irradiance_W_per_m2: 1 })], 'switch'),
    );
    expect([...weather.marks()].map(markText)).toEqual([
      'day: 1 to 10',
      'day / noon: 3 to 6',
      'switch: 10 to 10',
    ]);
  });

  it('come once for each pass of a repeat, with the number of the pass', () => {
    const weather = weatherOf(hold(5), repeat(3, [hold(1), sequence([hold(2)], 'dip')]));
    expect([...weather.marks()].map(markText)).toEqual([
      'pass 1 / dip: 6 to 8',
      'pass 2 / dip: 9 to 11',
      'pass 3 / dip: 12 to 14',
    ]);
  });

  it('follow a first pass that is longer than the others', () => {
    const up = ramp({ irradiance_W_per_m2: 800, slope_W_per_m2_per_s: 100 });
    const down = ramp({ irradiance_W_per_m2: 400, slope_W_per_m2_per_s: 100 });
    const weather = weatherOf(repeat(3, [sequence([up], 'up'), sequence([down], 'down')]));
    expect([...weather.marks()].map(markText)).toEqual([
      'pass 1 / up: 0 to 8',
      'pass 1 / down: 8 to 12',
      'pass 2 / up: 12 to 16',
      'pass 2 / down: 16 to 20',
      'pass 3 / up: 20 to 24',
      'pass 3 / down: 24 to 28',
    ]);
  });

  it('are none where nothing is named', () => {
    expect([...weatherOf(repeat(1e9, [hold(1)])).marks()]).toEqual([]);
  });
});
