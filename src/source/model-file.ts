/** The model file: a fitted module, which every command takes in place of a datasheet. */
import { existsSync, readFileSync, statSync } from 'node:fs';
import { stringify } from 'yaml';
import { z } from 'zod';
import { Fault, type Problem } from '../fault.js';
import { fieldProblem, interpret } from '../file/definition.js';
import { nameDefinition } from '../file/name-definition.js';
import type { InputDocument } from '../file/document.js';
import { writeWhole } from '../file/written-file.js';
import { STC_TEMPERATURE, thermalVoltage, type Volts } from '../quantities.js';
import { Module } from './module.js';
import { TECHNOLOGIES, type TechnologyName } from './technology.js';
import { staysPositive } from './translate/villalva-2009.js';
import { TRANSLATIONS, type TemperatureBehaviour } from './translation.js';

const technologyNames = Object.keys(TECHNOLOGIES) as [TechnologyName, ...TechnologyName[]];

export const modelDefinition = z
  .strictObject({
    model: z.literal('single-diode').describe('Marks the file as a model of this kind.'),
    name: nameDefinition('Name of the module, for reports.'),
    technology: z.enum(technologyNames).describe('Material of the cells.'),
    cells_in_series: z.int().min(1).max(400).describe('Cells in series.'),
    photocurrent_A: z.number().positive().max(200).describe('Iph at STC.'),
    saturation_current_A: z.number().positive().max(1).describe('I0 at STC.'),
    ideality_factor: z.number().min(0.1).max(10).describe('A of one cell.'),
    series_resistance_ohm: z.number().min(0).max(1e4).describe('Rs of the module.'),
    shunt_resistance_ohm: z
      .union([z.number().positive(), z.literal('infinite')])
      .describe('Rsh of the module at STC, or infinite.'),
    alpha_isc_A_per_K: z.number().min(-1).max(1).describe('Temperature coefficient of Isc in A/K.'),
    translation: z
      .enum(TRANSLATIONS)
      .optional()
      .describe(
        'Rules by which the parameters move with the weather; de-soto-2006 if left out. ' +
          'villalva-2009 keeps the temperature coefficient of Voc and needs the next three.',
      ),
    isc_A: z.number().positive().max(200).optional().describe('Isc of the datasheet.'),
    voc_V: z.number().positive().max(1000).optional().describe('Voc of the datasheet.'),
    beta_voc_V_per_K: z
      .number()
      .min(-10)
      .max(0)
      .optional()
      .describe('Temperature coefficient of Voc in V/K, negative.'),
  })
  .meta({
    title: 'Hillproof model',
    description: 'A PV module by the five parameters of its single-diode equation, at STC.',
    if: { properties: { translation: { const: 'villalva-2009' } }, required: ['translation'] },
    then: { required: ['isc_A', 'voc_V', 'beta_voc_V_per_K'] },
  });

type ModelEntries = z.infer<typeof modelDefinition>;

/**
 * @throws Fault `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`; then, of a file without those, the
 * same and `IMPOSSIBLE_VALUE` for the keys that the rules of translation need. Every error of the
 * file is in it, with its place.
 */
export function parseModel(document: InputDocument): Module {
  const entries = interpret(document, modelDefinition);
  const problems = translationProblems(entries, document);
  if (problems.length > 0) throw new Fault('input', problems);
  const { ideality_factor: ideality, shunt_resistance_ohm: shunt } = entries;
  return new Module(
    entries.name,
    entries.cells_in_series,
    {
      photocurrent: entries.photocurrent_A,
      saturationCurrent: entries.saturation_current_A,
      idealityVoltage: ideality * perFactor(entries.cells_in_series),
      seriesResistance: entries.series_resistance_ohm,
      shuntConductance: shunt === 'infinite' ? 0 : 1 / shunt,
    },
    behaviourIn(entries),
  );
}

const VILLALVA_KEYS = ['isc_A', 'voc_V', 'beta_voc_V_per_K'] as const;

function translationProblems(entries: ModelEntries, document: InputDocument): Problem[] {
  const { translation, alpha_isc_A_per_K: alpha, beta_voc_V_per_K: beta } = entries;
  if (translation !== 'villalva-2009') {
    return VILLALVA_KEYS.filter((key) => entries[key] !== undefined).map((key) => ({
      code: 'UNKNOWN_KEY',
      ...document.placeOfKey([key]),
      message: 'is a key of models with `translation: villalva-2009` only.',
      hint: 'Add that line, or take this one out.',
    }));
  }
  const missing = VILLALVA_KEYS.filter((key) => entries[key] === undefined);
  if (missing.length > 0) {
    return missing.map((key) =>
      fieldProblem(document, [key], {
        code: 'MISSING_KEY',
        message: 'is missing: expected a number, for `translation: villalva-2009`.',
        hint: 'Copy it from the datasheet.',
      }),
    );
  }
  return [
    ...vanishing(document, 'isc_A', entries.isc_A!, 'alpha_isc_A_per_K', alpha),
    ...vanishing(document, 'voc_V', entries.voc_V!, 'beta_voc_V_per_K', beta!),
  ];
}

function vanishing(
  document: InputDocument,
  key: string,
  value: number,
  coefficientKey: string,
  coefficient: number,
): Problem[] {
  if (staysPositive(value, coefficient)) return [];
  const message = `must leave ${key} = ${value} above 0 from -60 to 120 °C, found ${coefficient}.`;
  const hint = 'The unit is that of the key: a datasheet may give %/K or mV/K.';
  return [fieldProblem(document, [coefficientKey], { code: 'IMPOSSIBLE_VALUE', message, hint })];
}

function behaviourIn(entries: ModelEntries): TemperatureBehaviour {
  const { technology, alpha_isc_A_per_K: shortCircuitCoefficient } = entries;
  if (entries.translation !== 'villalva-2009') return { technology, shortCircuitCoefficient };
  return {
    translation: 'villalva-2009',
    technology,
    shortCircuitCoefficient,
    openCircuitCoefficient: entries.beta_voc_V_per_K!,
    shortCircuitCurrent: entries.isc_A!,
    openCircuitVoltage: entries.voc_V!,
  };
}

/**
 * Writes a model file. Only an older model file is replaced: anything else of that name is likely
 * there by mistake, such as the datasheet itself.
 * @throws Fault `IN_THE_WAY`, or those of `writeWhole`.
 */
export function writeModel(path: string, module: Module): void {
  if (existsSync(path) && statSync(path).isFile() && !/^model:/m.test(readFileSync(path, 'utf8'))) {
    throw new Fault('input', {
      code: 'IN_THE_WAY',
      file: path,
      message: 'is there and is not a model file: it is left as it is.',
      hint: 'Choose another name, or remove the file first.',
    });
  }
  writeWhole(path, modelText(module));
}

/** The text of a model file. Numbers are written so that they read back to within 1 ulp. */
export function modelText(module: Module): string {
  const { reference, behaviour } = module;
  const entries: ModelEntries = {
    model: 'single-diode',
    name: module.name,
    technology: behaviour.technology,
    cells_in_series: module.cellsInSeries,
    photocurrent_A: reference.photocurrent,
    saturation_current_A: reference.saturationCurrent,
    ideality_factor: reference.idealityVoltage / perFactor(module.cellsInSeries),
    series_resistance_ohm: reference.seriesResistance,
    shunt_resistance_ohm:
      reference.shuntConductance === 0 ? 'infinite' : 1 / reference.shuntConductance,
    alpha_isc_A_per_K: behaviour.shortCircuitCoefficient,
    ...(behaviour.translation === 'villalva-2009'
      ? {
          translation: behaviour.translation,
          isc_A: behaviour.shortCircuitCurrent,
          voc_V: behaviour.openCircuitVoltage,
          beta_voc_V_per_K: behaviour.openCircuitCoefficient,
        }
      : {}),
  };
  return stringify(entries);
}

/** a / A: in one place, so that writing and reading round alike. */
const perFactor = (cellsInSeries: number): Volts => cellsInSeries * thermalVoltage(STC_TEMPERATURE);
