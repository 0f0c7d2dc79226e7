import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { fieldText, parseInput, readInput } from '../../src/file/document.js';

function faultOf(action: () => unknown): Fault {
  try {
    action();
  } catch (error) {
    if (error instanceof Fault) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}

const TEXT = `# A comment
name: demo
curves:
  points: 48
  conditions:
    - { irradiance: 1000 }
    - irradiance: 800
      temperature: 47
"odd key": 1
`;

describe('parseInput', () => {
  const document = parseInput(TEXT, 'suite.yaml');

  test('gives plain data and the text', () => {
    expect(document.value).toEqual({
      name: 'demo',
      curves: {
        points: 48,
        conditions: [{ irradiance: 1000 }, { irradiance: 800, temperature: 47 }],
      },
      'odd key': 1,
    });
    expect(document).toMatchObject({ file: 'suite.yaml', text: TEXT });
  });

  test.each([
    [['name'], 2, 7],
    [['curves', 'points'], 4, 11],
    [['curves', 'conditions', 0, 'irradiance'], 6, 21],
    [['curves', 'conditions', 1], 7, 7],
    [['curves', 'conditions', 1, 'temperature'], 8, 20],
    [['odd key'], 9, 12],
  ])('knows where the value at %o is: line %d, column %d', (path, line, column) => {
    expect(document.place(path)).toEqual({
      file: 'suite.yaml',
      line,
      column,
      field: fieldText(path),
    });
  });

  test.each([
    [['curves', 'absent'], 4, 3],
    [['curves', 'conditions', 7], 6, 5],
    [['name', 'inside text'], 2, 7],
    [['absent', 'further'], 2, 1],
  ])('gives the nearest parent of what is absent, %o: line %d, column %d', (path, line, column) => {
    expect(document.place(path)).toMatchObject({ line, column, field: fieldText(path) });
  });

  test('knows where a key is', () => {
    expect(document.placeOfKey(['curves', 'points'])).toMatchObject({ line: 4, column: 3 });
    expect(document.placeOfKey(['odd key'])).toMatchObject({ line: 9, column: 1 });
    expect(document.placeOfKey(['curves', 'absent'])).toMatchObject({ line: 4, column: 3 });
  });

  test('names no field for the whole document', () => {
    expect(document.place([])).toEqual({ file: 'suite.yaml', line: 2, column: 1 });
  });

  test('reads JSON, and lines that end the Windows way', () => {
    const json = parseInput('{\r\n  "name": "demo",\r\n  "points": 48\r\n}\r\n', 'suite.json');
    expect(json.value).toEqual({ name: 'demo', points: 48 });
    expect(json.place(['points'])).toMatchObject({ line: 3, column: 13 });
  });

  test('reads YAML 1.2: yes and on are text, 0o17 is octal, 017 is not', () => {
    const { value } = parseInput('[yes, on, true, 0o17, 017, 1e3, .5]', 'a.yaml');
    expect(value).toEqual(['yes', 'on', true, 15, 17, 1000, 0.5]);
  });

  test('follows anchors, whose values stand where they are written', () => {
    const anchored = parseInput('a: &x { v: 1 }\nb: *x\n', 'a.yaml');
    expect(anchored.value).toEqual({ a: { v: 1 }, b: { v: 1 } });
  });

  test('refuses a document whose aliases expand without bound', () => {
    const levels = Array.from({ length: 9 }, (_, n) => {
      const below = n === 0 ? 'x' : `*l${n - 1}`;
      return `l${n}: &l${n} [${Array.from({ length: 9 }, () => below).join(', ')}]`;
    });
    const { kind, problems } = faultOf(() => parseInput(levels.join('\n'), 'bomb.yaml'));
    expect(kind).toBe('input');
    expect(problems[0]).toMatchObject({ code: 'YAML_SYNTAX', file: 'bomb.yaml' });
  });

  test('names every error of syntax with its place', () => {
    const { kind, problems } = faultOf(() => parseInput('a: 1\na: 2\nb: [1, 2\n', 'bad.yaml'));
    expect(kind).toBe('input');
    expect(problems.map(({ code, line }) => `${code} ${line}`)).toEqual([
      'YAML_SYNTAX 2',
      'YAML_SYNTAX 4',
    ]);
    for (const { file, message } of problems) {
      expect(file).toBe('bad.yaml');
      expect(message).toMatch(/\.$/);
      expect(message).not.toContain('\n');
    }
  });

  test.each(['', '\n\n', '# nothing but words\n', '~', 'null\n', '---\n'])(
    'refuses a file without data: %j',
    (text) => {
      expect(faultOf(() => parseInput(text, 'empty.yaml')).problems).toEqual([
        { code: 'EMPTY_FILE', file: 'empty.yaml', message: 'the file holds no data.' },
      ]);
    },
  );

  test('refuses several documents in one file', () => {
    expect(faultOf(() => parseInput('a: 1\n---\nb: 2\n', 'two.yaml')).problems[0]).toMatchObject({
      code: 'YAML_SYNTAX',
      line: 2,
    });
  });
});

describe('readInput', () => {
  const folder = mkdtempSync(join(tmpdir(), 'document-'));
  afterAll(() => {
    rmSync(folder, { recursive: true });
  });
  const path = (name: string): string => join(folder, name);

  test('reads a file and names it', () => {
    writeFileSync(path('a.yaml'), 'name: Größe\n');
    const document = readInput(path('a.yaml'));
    expect(document.value).toEqual({ name: 'Größe' });
    expect(document.file).toBe(path('a.yaml'));
  });

  test('passes over a byte-order mark', () => {
    writeFileSync(path('bom.yaml'), '\ufeffname: demo\n');
    expect(readInput(path('bom.yaml')).value).toEqual({ name: 'demo' });
  });

  test('refuses a file that is not there, a folder, and a path through a file', () => {
    mkdirSync(path('folder'));
    writeFileSync(path('file'), 'a: 1\n');
    const cases = [
      [path('absent.yaml'), 'there is no such file or folder.'],
      [path('folder'), 'expected a file, found a folder.'],
      [join(path('file'), 'inside'), 'a part of the path is a file, not a folder.'],
    ] as const;
    for (const [file, message] of cases) {
      const fault = faultOf(() => readInput(file));
      expect(fault.kind).toBe('input');
      expect(fault.problems).toEqual([{ code: 'FILE_MISSING', file, message }]);
    }
  });

  test('refuses a file above 8 MiB before it is parsed', () => {
    writeFileSync(path('large.yaml'), Buffer.alloc(8 * 1024 * 1024 + 1, 0x20));
    expect(faultOf(() => readInput(path('large.yaml'))).problems[0]).toMatchObject({
      code: 'FILE_TOO_LARGE',
      message: 'an input file has at most 8388608 bytes, found 8388609.',
    });
  });
});

describe('fieldText', () => {
  test('writes a path as in code', () => {
    expect(fieldText([])).toBe('');
    expect(fieldText(['curves', 'conditions', 2, 'irradiance'])).toBe(
      'curves.conditions[2].irradiance',
    );
    expect(fieldText([3, 'x'])).toBe('[3].x');
  });
});
