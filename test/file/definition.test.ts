import { describe, expect, test } from 'vitest';
import { z } from 'zod';
import { Fault, type Problem } from '../../src/fault.js';
import { fieldProblem, interpret } from '../../src/file/definition.js';
import { parseInput } from '../../src/file/document.js';

const definition = z.strictObject({
  name: z.string().min(1).max(8),
  mode: z.enum(['fast', 'slow']).default('fast'),
  kind: z.literal('demo').optional(),
  points: z.int().min(2).max(10).optional(),
  flag: z.boolean().optional(),
  list: z.array(z.number().positive()).min(2).max(3).optional(),
  inner: z
    .strictObject({
      depth: z.number(),
      further: z.record(z.string(), z.strictObject({ x: z.number() })).optional(),
    })
    .optional(),
  level: z
    .union([
      z.number(),
      z.strictObject({ hold: z.strictObject({ for_s: z.number().positive() }) }),
      z.strictObject({ ramp: z.strictObject({ for_s: z.number(), to: z.number() }) }),
    ])
    .optional(),
});

const interpretText = (text: string) => interpret(parseInput(text, 'a.yaml'), definition);

function problemsOf(text: string): readonly Problem[] {
  try {
    interpretText(text);
  } catch (error) {
    expect(error).toBeInstanceOf(Fault);
    expect((error as Fault).kind).toBe('input');
    return (error as Fault).problems;
  }
  throw new Error('nothing was thrown');
}

describe('interpret', () => {
  test('gives the data by the definition, defaults filled in', () => {
    expect(interpretText('name: a\n')).toEqual({ name: 'a', mode: 'fast' });
  });

  test('says what a missing key takes', () => {
    expect(problemsOf('mode: slow\n')).toEqual([
      {
        code: 'MISSING_KEY',
        file: 'a.yaml',
        line: 1,
        column: 1,
        field: 'name',
        message: 'is missing: expected text.',
      },
    ]);
  });

  test('says where in a group a key is missing', () => {
    expect(problemsOf('name: a\ninner:\n  further: {}\n')[0]).toMatchObject({
      code: 'MISSING_KEY',
      line: 3,
      column: 3,
      field: 'inner.depth',
      message: 'is missing: expected a number.',
    });
  });

  test.each([
    ['name: a\nponts: 3\n', 'ponts', 2, 1, 'Did you mean points?'],
    ['name: a\ninner: { depth: 1, dpeth: 2 }\n', 'inner.dpeth', 2, 20, 'Did you mean depth?'],
    [
      'name: a\ninner: { depth: 1, further: { any: { x: 1, xx: 2 } } }\n',
      'inner.further.any.xx',
      2,
      44,
      'Did you mean x?',
    ],
    [
      'name: a\nlevel: { hold: { for_s: 1, fors: 2 } }\n',
      'level.hold.fors',
      2,
      28,
      'Did you mean for_s?',
    ],
    [
      'name: a\nlevel: { hold: { for_s: 1 }, colour: 2 }\n',
      'level.colour',
      2,
      30,
      'Known here: hold, ramp.',
    ],
  ])('refuses an unknown key and names the nearest: %j', (text, field, line, column, hint) => {
    expect(problemsOf(text)).toEqual([
      {
        code: 'UNKNOWN_KEY',
        file: 'a.yaml',
        line,
        column,
        field,
        message: 'is not a key known here.',
        hint,
      },
    ]);
  });

  test.each([
    ['points: 1', 'must be at least 2, found 1.'],
    ['points: 11', 'must be at most 10, found 11.'],
    ['points: 2.5', 'must be a whole number, found 2.5.'],
    ['points: three', 'must be a number, found "three".'],
    ['points: true', 'must be a number, found true.'],
    ['points: {}', 'must be a number, found a group of keys.'],
    ['points: ~', 'must be a number, found nothing.'],
    ['flag: yes', 'must be true or false, found "yes".'],
    ['mode: medium', 'must be one of fast, slow, found "medium".'],
    ['kind: demi', 'must be "demo", found "demi".'],
    ['list: 3', 'must be a list, found 3.'],
    ['list: [1]', 'must have at least 2 entries, found a list of 1.'],
    ['list: [1, 2, 3, 4]', 'must have at most 3 entries, found a list of 4.'],
    ['inner: 3', 'must be a group of keys, found 3.'],
    ['level: fast', 'must be a number or a group of keys, found "fast".'],
  ])('refuses %s: it %s', (line, message) => {
    const [problem, ...others] = problemsOf(`name: a\n${line}\n`);
    expect(others).toEqual([]);
    const field = line.split(':')[0]!;
    expect(problem).toMatchObject({
      code: 'INVALID_VALUE',
      file: 'a.yaml',
      line: 2,
      field,
      message,
    });
  });

  test('names the entry of a list', () => {
    expect(problemsOf('name: a\nlist: [1, -2]\n')).toEqual([
      {
        code: 'INVALID_VALUE',
        file: 'a.yaml',
        line: 2,
        column: 11,
        field: 'list[1]',
        message: 'must be above 0, found -2.',
      },
    ]);
  });

  test('speaks of the alternative that the writer meant, not of all', () => {
    expect(problemsOf('name: a\nlevel: { ramp: { for_s: 1, to: high } }\n')).toEqual([
      expect.objectContaining({
        field: 'level.ramp.to',
        message: 'must be a number, found "high".',
      }),
    ]);
    expect(problemsOf('name: a\nlevel: { hold: { for_s: -1 } }\n')).toEqual([
      expect.objectContaining({ field: 'level.hold.for_s', message: 'must be above 0, found -1.' }),
    ]);
    expect(problemsOf('name: a\nlevel: { ramp: { for_s: 1 } }\n')).toEqual([
      expect.objectContaining({ code: 'MISSING_KEY', field: 'level.ramp.to' }),
    ]);
  });

  test.each([
    ['points: 3,5', 'Write the decimal mark as a point.'],
    ['points: "-3,5"', 'Write the decimal mark as a point.'],
    ['points: 3 V', 'Write the number alone: the key names the unit.'],
    ['points: 3W/m2', undefined],
    ['points: three', undefined],
    ['mode: slwo', 'Did you mean slow?'],
    ['mode: medium', undefined],
  ])('hints at how to mend %s: %s', (line, hint) => {
    expect(problemsOf(`name: a\n${line}\n`)[0]!.hint).toBe(hint);
  });

  test('names every departure at once, in the order of the definition, keys unknown last', () => {
    const problems = problemsOf('nam: a\npoints: 1\nflag: 3\n');
    expect(problems.map(({ code, field }) => `${code} ${field}`)).toEqual([
      'MISSING_KEY name',
      'INVALID_VALUE points',
      'INVALID_VALUE flag',
      'UNKNOWN_KEY nam',
    ]);
  });

  test('cuts long text in messages', () => {
    const [problem] = problemsOf(`name: a\npoints: ${'x'.repeat(1000)}\n`);
    expect(problem!.message).toBe(`must be a number, found "${'x'.repeat(60)}".`);
  });
});

describe('fieldProblem', () => {
  test('gives a problem the place and path of its field', () => {
    const document = parseInput('a:\n  b: 1\n', 'a.yaml');
    expect(fieldProblem(document, ['a', 'b'], { code: 'ODD', message: 'is odd.' })).toEqual({
      code: 'ODD',
      message: 'is odd.',
      file: 'a.yaml',
      line: 2,
      column: 6,
      field: 'a.b',
    });
  });
});
