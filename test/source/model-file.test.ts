import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { z } from 'zod';
import { parseInput } from '../../src/file/document.js';
import { Random } from '../../src/numeric/random.js';
import { fitDatasheet } from '../../src/source/fit/fit.js';
import { modelDefinition, modelText, parseModel } from '../../src/source/model-file.js';
import { Module } from '../../src/source/module.js';
import { datasheetOf, fillFactor } from './any-datasheet.js';
import { anyModule } from './any-diode.js';
import { faultOf } from './fault-of.js';

const TEXT = `model: single-diode
name: Any module
technology: mono-si
cells_in_series: 60
photocurrent_A: 9.2
saturation_current_A: 2.5e-9
ideality_factor: 1.12
series_resistance_ohm: 0.19
shunt_resistance_ohm: 410
alpha_isc_A_per_K: 0.0046
`;

const parse = (text: string) => parseModel(parseInput(text, 'model.yaml'));
const problemsOf = (text: string) => faultOf(() => parse(text)).problems;

describe('parseModel', () => {
  test('gives the module of a model file', () => {
    const module = parse(TEXT);
    expect(module).toBeInstanceOf(Module);
    expect(module).toMatchObject({ name: 'Any module', cellsInSeries: 60 });
    expect(module.behaviour).toEqual({ technology: 'mono-si', shortCircuitCoefficient: 0.0046 });
    // Ns A k T / q, k T / q at 25 °C being 0.02569257912108585 V.
    expect(module.reference.idealityVoltage).toBeCloseTo(60 * 1.12 * 0.02569257912108585, 14);
    expect(module.reference).toMatchObject({
      photocurrent: 9.2,
      saturationCurrent: 2.5e-9,
      seriesResistance: 0.19,
      shuntConductance: 1 / 410,
    });
  });

  test('takes "infinite" for no shunt path', () => {
    const module = parse(TEXT.replace('410', 'infinite'));
    expect(module.reference.shuntConductance).toBe(0);
  });

  test.each([
    [
      'model: single-diode',
      'model: two-diode',
      'model',
      'must be "single-diode", found "two-diode".',
    ],
    ['technology: mono-si', 'technology: si', 'technology', 'found "si".'],
    [
      'cells_in_series: 60',
      'cells_in_series: 0',
      'cells_in_series',
      'must be at least 1, found 0.',
    ],
    ['9.2', '0', 'photocurrent_A', 'must be above 0, found 0.'],
    ['2.5e-9', '-2.5e-9', 'saturation_current_A', 'must be above 0, found -2.5e-9.'],
    ['1.12', '0', 'ideality_factor', 'must be at least 0.1, found 0.'],
    ['0.19', '-0.19', 'series_resistance_ohm', 'must be at least 0, found -0.19.'],
    ['0.19', '0.19 ohm', 'series_resistance_ohm', 'must be a number, found "0.19 ohm".'],
    ['0.0046', '4.6', 'alpha_isc_A_per_K', 'must be at most 1, found 4.6.'],
    ['410', '0', 'shunt_resistance_ohm', 'found 0.'],
    ['410', '.inf', 'shunt_resistance_ohm', 'found Infinity.'],
    ['410', 'none', 'shunt_resistance_ohm', 'found "none".'],
  ])('refuses a file with %s replaced by %s', (from, to, field, message) => {
    const [problem, ...others] = problemsOf(TEXT.replace(from, to));
    expect(others).toEqual([]);
    const line = TEXT.split('\n').findIndex((text) => text.includes(from)) + 1;
    expect(problem).toMatchObject({ code: 'INVALID_VALUE', file: 'model.yaml', line, field });
    expect(problem!.message).toContain(message);
  });

  test('names all keys that are missing or unknown', () => {
    const text = TEXT.replace('ideality_factor', 'ideality').replace(/alpha.*\n/, '');
    expect(problemsOf(text).map(({ code, field }) => `${code} ${field}`)).toEqual([
      'MISSING_KEY ideality_factor',
      'MISSING_KEY alpha_isc_A_per_K',
      'UNKNOWN_KEY ideality',
    ]);
  });
});

describe('A model file with `translation`', () => {
  const VILLALVA = `${TEXT}translation: villalva-2009\nisc_A: 9.18\nvoc_V: 38.1\nbeta_voc_V_per_K: -0.13\n`;

  test('names the rules of 2009, and gives what they need', () => {
    expect(parse(VILLALVA).behaviour).toEqual({
      translation: 'villalva-2009',
      technology: 'mono-si',
      shortCircuitCoefficient: 0.0046,
      shortCircuitCurrent: 9.18,
      openCircuitVoltage: 38.1,
      openCircuitCoefficient: -0.13,
    });
  });

  test('names the usual rules, or none', () => {
    const named = parse(`${TEXT}translation: de-soto-2006\n`);
    expect(named.behaviour).toEqual(parse(TEXT).behaviour);
  });

  test('reads back from the text of its module', () => {
    const module = parse(VILLALVA);
    expect(parse(modelText(module)).behaviour).toEqual(module.behaviour);
    expect(modelText(parse(TEXT))).not.toContain('translation');
  });

  test('is refused without the numbers that the rules need, all of them named', () => {
    const text = `${TEXT}translation: villalva-2009\nvoc_V: 38.1\n`;
    expect(problemsOf(text).map(({ code, field }) => `${code} ${field}`)).toEqual([
      'MISSING_KEY isc_A',
      'MISSING_KEY beta_voc_V_per_K',
    ]);
  });

  test('is refused with numbers that its rules do not use', () => {
    const [problem, ...others] = problemsOf(`${TEXT}voc_V: 38.1\n`);
    expect(others).toEqual([]);
    expect(problem).toMatchObject({ code: 'UNKNOWN_KEY', field: 'voc_V', line: 11 });
    expect(problem!.message).toContain('translation: villalva-2009');
  });

  test.each([
    ['beta_voc_V_per_K: -0.13', 'beta_voc_V_per_K: -0.41', 'beta_voc_V_per_K', 'voc_V = 38.1'],
    ['alpha_isc_A_per_K: 0.0046', 'alpha_isc_A_per_K: 0.11', 'alpha_isc_A_per_K', 'isc_A = 9.18'],
  ])(
    'is refused with %s replaced by %s, at which a curve would vanish',
    (from, to, field, says) => {
      const [problem, ...others] = problemsOf(VILLALVA.replace(from, to));
      expect(others).toEqual([]);
      expect(problem).toMatchObject({ code: 'IMPOSSIBLE_VALUE', field });
      expect(problem!.message).toContain(`must leave ${says} above 0 from -60 to 120 °C`);
    },
  );

  test('says in its JSON Schema which keys go with the rules of 2009', () => {
    expect(z.toJSONSchema(modelDefinition, { io: 'input' })).toMatchObject({
      if: { properties: { translation: { const: 'villalva-2009' } }, required: ['translation'] },
      then: { required: ['isc_A', 'voc_V', 'beta_voc_V_per_K'] },
    });
  });

  test('is refused with rules that are not known', () => {
    const [problem] = problemsOf(`${TEXT}translation: villalva\n`);
    expect(problem).toMatchObject({ code: 'INVALID_VALUE', field: 'translation' });
    expect(problem!.message).toContain('one of de-soto-2006, villalva-2009');
  });
});

describe('modelText', () => {
  const modules = fc.integer({ min: 0, max: 1e9 }).map((seed) => {
    const { technology, cellsInSeries, diode } = anyModule(new Random(seed));
    const shortCircuitCoefficient = 0.0005 * diode.photocurrent;
    return new Module(`module ${seed}`, cellsInSeries, diode, {
      technology,
      shortCircuitCoefficient,
    });
  });

  test('reads back to within 1 ulp', () => {
    fc.assert(
      fc.property(modules, (module) => {
        const back = parse(modelText(module));
        expect(back.name).toBe(module.name);
        expect(back.cellsInSeries).toBe(module.cellsInSeries);
        expect(back.behaviour).toEqual(module.behaviour);
        const { idealityVoltage, shuntConductance, ...exact } = module.reference;
        expect(back.reference).toMatchObject(exact);
        // A quotient and back: half an ulp twice, 2^-52 of the number or less.
        for (const [found, made] of [
          [back.reference.idealityVoltage, idealityVoltage],
          [back.reference.shuntConductance, shuntConductance],
        ] as const) {
          expect(Math.abs(found - made)).toBeLessThanOrEqual(Number.EPSILON * made);
        }
      }),
      { seed: 81, numRuns: 500 },
    );
  });

  test('keeps names that YAML would take for something else', () => {
    const { reference, behaviour } = parse(TEXT);
    for (const name of ['1234', 'null', 'yes', '- x', 'a: b', '#1', '"', 'Größe 60 µ', ' x ']) {
      expect(parse(modelText(new Module(name, 60, reference, behaviour))).name).toBe(name);
    }
  });

  test('can be read back for whatever a fit makes, the nearest miss of a hopeless datasheet included', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 1e9 }),
        fc.constantFrom('both', 'at short circuit', 'at open circuit', 'none'),
        fc.constantFrom('exact', 'simultaneous', 'sweep', undefined),
        (seed, slopes, method) => {
          const sheet = datasheetOf(anyModule(new Random(seed)), { slopes, figures: 3 });
          fc.pre(fillFactor(sheet) > 0.3 && fillFactor(sheet) < 0.9);
          fc.pre(sheet.peakCurrent < sheet.shortCircuitCurrent);
          const { module } = fitDatasheet(sheet, method);
          expect(parse(modelText(module)).name).toBe(module.name);
        },
      ),
      { seed: 83 },
    );
  });
});
