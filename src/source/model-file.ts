/** The model file: a fitted module, which every command takes in place of a datasheet. */
import { existsSync, readFileSync, statSync } from 'node:fs';
import { stringify } from 'yaml';
import { z } from 'zod';
import { nameDefinition } from '../file/name-definition.js';
import { Fault } from '../fault.js';
import { interpret } from '../file/definition.js';
import type { InputDocument } from '../file/document.js';
import { writeWhole } from '../file/written-file.js';
import { STC_TEMPERATURE, thermalVoltage, type Volts } from '../quantities.js';
import { Module } from './module.js';
import { TECHNOLOGIES, type TechnologyName } from './technology.js';

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
  })
  .meta({
    title: 'Hillproof model',
    description: 'A PV module by the five parameters of its single-diode equation, at STC.',
  });

/** @throws Fault `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`: every error of the file. */
export function parseModel(document: InputDocument): Module {
  const entries = interpret(document, modelDefinition);
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
    {
      technology: entries.technology,
      shortCircuitCoefficient: entries.alpha_isc_A_per_K,
    },
  );
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
  const entries: z.infer<typeof modelDefinition> = {
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
  };
  return stringify(entries);
}

/** a / A: in one place, so that writing and reading round alike. */
const perFactor = (cellsInSeries: number): Volts => cellsInSeries * thermalVoltage(STC_TEMPERATURE);
