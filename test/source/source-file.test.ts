import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { describeProblem } from '../../src/fault.js';
import { parseInput } from '../../src/file/document.js';
import { modelText } from '../../src/source/model-file.js';
import { fitDatasheet } from '../../src/source/fit/fit.js';
import { parseDatasheet } from '../../src/source/datasheet-file.js';
import { loadSource, parseSource } from '../../src/source/source-file.js';
import { faultOf } from './fault-of.js';

const DATASHEET = `name: Any module 200 W
technology: poly-si
cells_in_series: 54
isc_A: 8.21
voc_V: 32.9
imp_A: 7.61
vmp_V: 26.3
alpha_isc_mA_per_K: 3.2
beta_voc_mV_per_K: -123
`;

const parse = (text: string) => parseSource(parseInput(text, 'module.yaml'));

describe('parseSource', () => {
  test('fits a datasheet', () => {
    const { module, fit, warnings } = parse(DATASHEET);
    expect(fit!.solved).toBe(true);
    expect(fit!.module).toBe(module);
    expect(fit!.method).toBe('exact');
    expect(warnings).toEqual([]);
  });

  test('takes a model file as it is', () => {
    const text = modelText(parse(DATASHEET).module!);
    const { module, fit, warnings } = parse(text);
    expect(fit).toBeUndefined();
    expect(warnings).toEqual([]);
    expect(modelText(module!)).toBe(text);
  });

  test('passes on what is odd about a datasheet and its fit, with the file', () => {
    const text = `${DATASHEET.replace('54', '100')}noct_C: 30\n`;
    const { warnings } = parse(text);
    expect(warnings.map(({ code, file }) => `${code} ${file}`)).toEqual([
      'ODD_VALUE module.yaml',
      'CONDITION_MISSED module.yaml',
    ]);
    expect(describeProblem(warnings[1]!).split('\n')).toHaveLength(2);
  });

  test('refuses a datasheet that no curve meets, and names the way to its nearest curve', () => {
    const text = DATASHEET.replace('7.61', '7.95');
    const { kind, problems } = faultOf(() => parse(text));
    expect(kind).toBe('input');
    expect(problems).toHaveLength(1);
    const [{ code, file, message, hint }] = problems as [(typeof problems)[0]];
    expect(code).toBe('INFEASIBLE_DATASHEET');
    expect(file).toBe('module.yaml');
    expect(message).toMatch(
      /^no single-diode curve meets this datasheet: the knee is squarer than any junction's/,
    );
    expect(message).toMatch(
      /check imp_A first, found 7\.95: the nearest feasible is imp_A 7\.88\d+ /,
    );
    expect(hint).toContain('`hillproof fit module.yaml -o MODEL`');

    // The way works: what that command writes is taken as it is.
    const { datasheet } = parseDatasheet(parseInput(text, 'module.yaml'));
    const model = modelText(fitDatasheet(datasheet).module);
    expect(parse(model).warnings).toEqual([]);
  });

  test('refuses what is neither, by the rules of a datasheet', () => {
    for (const text of ['7', '[]', 'name: x']) {
      expect(faultOf(() => parse(text)).kind).toBe('input');
    }
  });
});

describe('loadSource', () => {
  test('reads from a file, and names it in what it refuses', () => {
    const folder = mkdtempSync(join(tmpdir(), 'source-'));
    try {
      const file = join(folder, 'module.yaml');
      writeFileSync(file, DATASHEET);
      expect(loadSource(file).source.name).toBe('Any module 200 W');
      writeFileSync(file, DATASHEET.replace('7.61', '9'));
      expect(faultOf(() => loadSource(file)).problems[0]).toMatchObject({ file, line: 6 });
      const absent = join(folder, 'absent.yaml');
      expect(faultOf(() => loadSource(absent)).problems[0]).toMatchObject({
        code: 'FILE_MISSING',
        file: absent,
      });
    } finally {
      rmSync(folder, { recursive: true });
    }
  });
});
