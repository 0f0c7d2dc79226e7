import { describe, expect, it } from 'vitest';
import { describeProblem } from '../../src/fault.js';
import { hold, ramp, repeat, sequence, step } from '../../src/weather/blocks.js';
import type { Block } from '../../src/weather/definition.js';
import { compileWeather } from '../../src/weather/load.js';
import { problemsOf, weatherIn, weatherOf } from './reading.js';

interface Case {
  /** What follows `blocks:` in the file, with a ^ before the place that is to be blamed. */
  readonly blocks: string;
  readonly code: string;
  readonly field: string;
  readonly says: RegExp;
  readonly hint?: RegExp;
}

const CASES: Readonly<Record<string, Case>> = {
  'an unknown block': {
    blocks: '  - hold: { for_s: 1 }\n  - ^rmap: { for_s: 1 }',
    code: 'UNKNOWN_KEY',
    field: 'blocks[1].rmap',
    says: /not a key known here/,
    hint: /ramp/,
  },
  'an unknown key inside a repeat': {
    blocks: '  - repeat:\n      times: 2\n      blocks:\n        - hold: { for_s: 1, ^until_s: 2 }',
    code: 'UNKNOWN_KEY',
    field: 'blocks[0].repeat.blocks[0].hold.until_s',
    says: /not a key known here/,
    hint: /for_s/,
  },
  'a hold without a time': {
    blocks: '  - hold: ^{}',
    code: 'MISSING_KEY',
    field: 'blocks[0].hold.for_s',
    says: /is missing: expected a number/,
  },
  'two blocks in one entry': {
    blocks: '  - hold: { for_s: 1 }\n    ^step: { irradiance_W_per_m2: 800 }',
    code: 'ONE_BLOCK_PER_ENTRY',
    field: 'blocks[0].step',
    says: /exactly one block, found hold and step/,
    hint: /entry of its own/,
  },
  'an entry without a block': {
    blocks: '  - ^{}',
    code: 'ONE_BLOCK_PER_ENTRY',
    field: 'blocks[0]',
    says: /exactly one block, found none/,
    hint: /hold, step, ramp, repeat, sequence, trapezoids/,
  },
  'an entry that is a word': {
    blocks: '  - ^hold',
    code: 'INVALID_VALUE',
    field: 'blocks[0]',
    says: /must be a group of keys, found "hold"/,
  },
  'no blocks': {
    blocks: '  ^[]',
    code: 'INVALID_VALUE',
    field: 'blocks',
    says: /must have at least 1 entry, found a list of 0/,
  },
  'a repeat of no blocks': {
    blocks: '  - repeat: { times: 2, blocks: ^[] }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].repeat.blocks',
    says: /must have at least 1 entry, found a list of 0/,
  },
  'a hold of no time': {
    blocks: '  - hold: { for_s: ^0 }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].hold.for_s',
    says: /must be above 0, found 0/,
  },
  'a negative time': {
    blocks: '  - ramp: { irradiance_W_per_m2: 1, for_s: ^-3 }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].ramp.for_s',
    says: /must be above 0, found -3/,
  },
  'a time with a unit': {
    blocks: '  - hold: { for_s: ^60 s }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].hold.for_s',
    says: /must be a number, found "60 s"/,
    hint: /key names the unit/,
  },
  'a time that is no number': {
    blocks: '  - hold: { for_s: ^.nan }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].hold.for_s',
    says: /must be a number, found NaN/,
  },
  'an endless time': {
    blocks: '  - hold: { for_s: ^.inf }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].hold.for_s',
    says: /must be a number, found Infinity/,
  },
  'a time beyond the limit': {
    blocks: '  - hold: { for_s: ^1.1e10 }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].hold.for_s',
    says: /at most 10000000000, found 11000000000/,
  },
  'a step that sets nothing': {
    blocks: '  - step: ^{}',
    code: 'NOTHING_SET',
    field: 'blocks[0].step',
    says: /irradiance_W_per_m2, cell_temperature_C or both, found neither/,
  },
  'a ramp to nowhere': {
    blocks: '  - ramp: ^{ for_s: 3 }',
    code: 'NOTHING_SET',
    field: 'blocks[0].ramp',
    says: /found neither/,
  },
  'a ramp with a time and a slope': {
    blocks: '  - ramp: { irradiance_W_per_m2: 9, for_s: 3, slope_W_per_m2_per_s: ^3 }',
    code: 'RAMP_TIME',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /for_s or slope_W_per_m2_per_s, found both/,
    hint: /follows from the other/,
  },
  'a ramp with neither a time nor a slope': {
    blocks: '  - ramp: ^{ irradiance_W_per_m2: 9 }',
    code: 'RAMP_TIME',
    field: 'blocks[0].ramp',
    says: /for_s or slope_W_per_m2_per_s, found neither/,
    hint: /step/,
  },
  'a negative slope': {
    blocks: '  - ramp: { irradiance_W_per_m2: 9, slope_W_per_m2_per_s: ^-3 }',
    code: 'OUT_OF_RANGE',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /must be above 0, found -3/,
    hint: /rises or falls follows from the values/,
  },
  'a slope of the cell temperature': {
    blocks: '  - ramp: { cell_temperature_C: 9, slope_W_per_m2_per_s: ^3 }',
    code: 'RAMP_TIME',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /slope of the irradiance: expected irradiance_W_per_m2/,
    hint: /for_s/,
  },
  'a slope where nothing changes': {
    blocks: '  - ramp: { irradiance_W_per_m2: 0, slope_W_per_m2_per_s: ^3 }',
    code: 'NOTHING_CHANGES',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /two levels between them, found 0 W\/m² at both ends/,
    hint: /for_s, or use hold/,
  },
  'a slope where nothing changes from the second pass on': {
    blocks:
      '  - repeat:\n      times: 5\n      blocks:\n        - ramp: { irradiance_W_per_m2: 800, slope_W_per_m2_per_s: ^3 }',
    code: 'NOTHING_CHANGES',
    field: 'blocks[0].repeat.blocks[0].ramp.slope_W_per_m2_per_s',
    says: /found 800 W\/m² at both ends/,
    hint: /come back inside the repeat/,
  },
  'a slope so shallow that the ramp does not end': {
    blocks: '  - ramp: { irradiance_W_per_m2: 800, slope_W_per_m2_per_s: ^1e-9 }',
    code: 'TOO_LONG',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /at most 10000000000 s, found 8\d{11}(\.\d+)? s/,
  },
  'a slope that no double divides by': {
    blocks: '  - ramp: { irradiance_W_per_m2: 800, slope_W_per_m2_per_s: ^1e-320 }',
    code: 'TOO_LONG',
    field: 'blocks[0].ramp.slope_W_per_m2_per_s',
    says: /at most 10000000000 s, found Infinity s/,
  },
  'darkness below zero': {
    blocks: '  - step: { irradiance_W_per_m2: ^-1 }',
    code: 'OUT_OF_RANGE',
    field: 'blocks[0].step.irradiance_W_per_m2',
    says: /0 to 2000 W\/m², found -1/,
    hint: /Darkness is 0/,
  },
  'more light than the ground sees': {
    blocks: '  - ramp: { irradiance_W_per_m2: ^2000.5, for_s: 1 }',
    code: 'OUT_OF_RANGE',
    field: 'blocks[0].ramp.irradiance_W_per_m2',
    says: /0 to 2000 W\/m², found 2000.5/,
    hint: /1\.8 kW\/m² on the ground/,
  },
  'an irradiance that is no number': {
    blocks: '  - step: { irradiance_W_per_m2: ^.nan }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].step.irradiance_W_per_m2',
    says: /must be a number, found NaN/,
  },
  'a cell colder than any': {
    blocks: '  - step: { cell_temperature_C: ^-60.1 }',
    code: 'OUT_OF_RANGE',
    field: 'blocks[0].step.cell_temperature_C',
    says: /-60 to 120 °C, found -60.1/,
  },
  'a cell temperature in kelvin': {
    blocks: '  - ramp: { cell_temperature_C: ^298.15, for_s: 1 }',
    code: 'OUT_OF_RANGE',
    field: 'blocks[0].ramp.cell_temperature_C',
    says: /-60 to 120 °C, found 298.15/,
    hint: /looks like kelvin: 298.15 K is 25 °C/,
  },
  'a part of a pass': {
    blocks: '  - repeat: { times: ^2.5, blocks: [ hold: { for_s: 1 } ] }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].repeat.times',
    says: /must be a whole number, found 2.5/,
  },
  'no pass': {
    blocks: '  - repeat: { times: ^0, blocks: [ hold: { for_s: 1 } ] }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].repeat.times',
    says: /at least 1, found 0/,
  },
  'too many passes': {
    blocks: '  - repeat: { times: ^1000000001, blocks: [ hold: { for_s: 1 } ] }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].repeat.times',
    says: /at most 1000000000, found 1000000001/,
  },
  'passes that take too long': {
    blocks:
      '  - hold: { for_s: 1 }\n  - repeat: { times: ^1000000000, blocks: [ hold: { for_s: 11 } ] }',
    code: 'TOO_LONG',
    field: 'blocks[1].repeat.times',
    says: /at most 10000000000 s, found 11000000000 s/,
  },
  'blocks that take too long together': {
    blocks: '  ^- hold: { for_s: 1e10 }\n  - hold: { for_s: 1 }',
    code: 'TOO_LONG',
    field: 'blocks',
    says: /at most 10000000000 s, found 10000000001 s/,
  },
  'a weather that takes no time': {
    blocks: '  ^- step: { irradiance_W_per_m2: 1 }',
    code: 'NO_DURATION',
    field: 'blocks',
    says: /must take some time, found only blocks that take none/,
    hint: /hold/,
  },
  'a repeat that takes no time': {
    blocks:
      '  - hold: { for_s: 1 }\n  - repeat: ^{ times: 3, blocks: [ step: { irradiance_W_per_m2: 1 } ] }',
    code: 'NO_DURATION',
    field: 'blocks[1].repeat',
    says: /must take some time/,
    hint: /hold/,
  },
  'an unknown trapezoid table': {
    blocks: '  - trapezoids: { table: ^low-mediun }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].trapezoids.table',
    says: /one of low-medium, medium-high, start-stop, found "low-mediun"/,
    hint: /low-medium/,
  },
  'a slope that is no row of the table': {
    blocks: '  - trapezoids: { table: medium-high, slopes_W_per_m2_per_s: [10, ^7] }',
    code: 'NO_SUCH_ROW',
    field: 'blocks[0].trapezoids.slopes_W_per_m2_per_s[1]',
    says: /slope of a row of medium-high, found 7/,
    hint: /10, 14, 20, 30, 50, 100/,
  },
  'a negative settling': {
    blocks: '  - trapezoids: { table: medium-high, settle_s: ^-1 }',
    code: 'INVALID_VALUE',
    field: 'blocks[0].trapezoids.settle_s',
    says: /at least 0, found -1/,
  },
};

describe('a weather file is refused for', () => {
  it.each(Object.entries(CASES))('%s', (_title, { blocks, code, field, says, hint }) => {
    const [before, after] = `name: sky\nblocks:\n${blocks}\n`.split('^') as [string, string];
    const problems = problemsOf(() => weatherIn(before + after));
    expect(problems).toHaveLength(1);
    const [problem] = problems;
    const line = before.split('\n').length;
    const column = before.length - before.lastIndexOf('\n');
    expect(problem).toMatchObject({ code, file: 'sky.yaml', line, column, field });
    expect(problem!.message).toMatch(says);
    expect(problem!.hint ?? '').toMatch(hint ?? /^$/);
  });

  it('start values out of range, and a name of no length', () => {
    const start =
      'cell_temperature_C: 310\nirradiance_W_per_m2: -5\nblocks: [ hold: { for_s: 1 } ]';
    const places = problemsOf(() => weatherIn(`name: sky\n${start}`)).map(
      ({ code, line, column, field }) => `${code} ${line!}:${column!} ${field!}`,
    );
    expect(places).toEqual([
      'OUT_OF_RANGE 3:22 irradiance_W_per_m2',
      'OUT_OF_RANGE 2:21 cell_temperature_C',
    ]);
    const nameless = problemsOf(() => weatherIn('name: ""\nblocks: [ hold: { for_s: 1 } ]'));
    expect(nameless).toMatchObject([{ code: 'INVALID_VALUE', line: 1, column: 7, field: 'name' }]);
  });

  it('blocks seventeen deep, and not for sixteen', () => {
    const nested = (depth: number): string =>
      `name: sky\nblocks: ${'[{ sequence: { blocks: '.repeat(depth)}[{ hold: { for_s: 1 } }]${' } }]'.repeat(depth)}`;
    expect(weatherIn(nested(16)).duration).toBe(1);
    expect(problemsOf(() => weatherIn(nested(17)))).toMatchObject([
      {
        code: 'TOO_DEEP',
        line: 2,
        column: 9 + 17 * '[{ sequence: { blocks: '.length,
        field: `${'blocks[0].sequence.'.repeat(17)}blocks`,
        message: 'at most 16 repeats and sequences may stand around a block, found 17.',
      },
    ]);
  });

  it('blocks that contain themselves', () => {
    const endless = 'name: sky\nblocks: &all\n  - repeat: { times: 2, blocks: *all }\n';
    expect(problemsOf(() => weatherIn(endless))).toMatchObject([{ code: 'TOO_DEEP', line: 3 }]);
    const blocks: Block[] = [hold(1)];
    blocks.push(repeat(2, blocks));
    expect(problemsOf(() => weatherOf(...blocks))).toMatchObject([{ code: 'TOO_DEEP' }]);
  });

  it('every mistake at once, each in its place', () => {
    const problems = problemsOf(() =>
      weatherIn(
        [
          'name: sky',
          'blocks:',
          '  - step: { irradiance_W_per_m2: 3000, cell_temperature_C: 300 }',
          '  - sequence:',
          '      blocks:',
          '        - ramp: { irradiance_W_per_m2: 500 }',
          '        - { hold: { for_s: 1 }, step: { cell_temperature_C: 20 } }',
        ].join('\n'),
      ),
    );
    expect(problems.map(({ code, line, column }) => `${code} ${line!}:${column!}`)).toEqual([
      'OUT_OF_RANGE 3:34',
      'OUT_OF_RANGE 3:60',
      'RAMP_TIME 6:17',
      'ONE_BLOCK_PER_ENTRY 7:33',
    ]);
    expect(describeProblem(problems[1]!)).toBe(
      'sky.yaml:3:60: blocks[0].step.cell_temperature_C: must be -60 to 120 °C, found 300.\n' +
        '  This looks like kelvin: 300 K is 26.85 °C.',
    );
  });

  it('a mistake in a repeat once, though its blocks are compiled for two passes', () => {
    const still = ramp({ irradiance_W_per_m2: 0, slope_W_per_m2_per_s: 5 });
    const warm = ramp({ cell_temperature_C: 40, for_s: 1 });
    const problems = problemsOf(() => weatherOf(repeat(3, [still, warm]), still));
    expect(problems.map((problem) => problem.field)).toEqual([
      'blocks[0].repeat.blocks[0].ramp.slope_W_per_m2_per_s',
      'blocks[1].ramp.slope_W_per_m2_per_s',
    ]);
  });
});

describe('weather written in code is refused', () => {
  it('for the same mistakes, with the field for a place', () => {
    const blocks = [sequence([step({ irradiance_W_per_m2: NaN })]), hold(-1)];
    const texts = problemsOf(() => compileWeather({ name: 'test', blocks })).map(describeProblem);
    expect(texts).toEqual([
      'blocks[0].sequence.blocks[0].step.irradiance_W_per_m2: must be a number, found NaN.',
      'blocks[1].hold.for_s: must be above 0, found -1.',
    ]);
  });
});
