/** The file of an EN 50530 source: the rating of a test plan, in a few lines. */
import { z } from 'zod';
import { interpret } from '../../file/definition.js';
import type { InputDocument } from '../../file/document.js';
import { EN_50530_CONSTANTS, EN_50530_TECHNOLOGIES } from './constants.js';
import { En50530Generator, LARGEST } from './generator.js';

export const en50530Definition = z
  .strictObject({
    generator: z.literal('en-50530').describe('Marks the file as a source of this kind.'),
    name: z.string().min(1).max(80).optional().describe('Name of the source, for reports.'),
    technology: z
      .enum(EN_50530_TECHNOLOGIES)
      .describe('Which set of constants: crystalline silicon or thin film.'),
    umpp_stc_V: z.number().positive().max(LARGEST).describe('Nominal voltage at the peak, at STC.'),
    impp_stc_A: z.number().positive().max(LARGEST).describe('Nominal current at the peak, at STC.'),
    alpha_isc_pct_per_K: z
      .number()
      .min(-1)
      .max(1)
      .optional()
      .describe('Temperature coefficient of Isc in %/K; 0.04 for c-si, 0.02 for thin-film.'),
    beta_voc_pct_per_K: z
      .number()
      .min(-1)
      .max(0)
      .optional()
      .describe('Temperature coefficient of Voc in %/K; -0.4 for c-si, -0.2 for thin-film.'),
  })
  .meta({
    title: 'Hillproof EN 50530 source',
    description: 'A PV source patterned on EN 50530, for tests of static and dynamic efficiency.',
  });

/** @throws Fault `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`: every error of the file. */
export function parseEn50530(document: InputDocument): En50530Generator {
  const entries = interpret(document, en50530Definition);
  const { technology, alpha_isc_pct_per_K: alpha, beta_voc_pct_per_K: beta } = entries;
  const { title } = EN_50530_CONSTANTS[technology];
  return new En50530Generator(entries.name ?? `EN 50530 source, ${title}`, {
    technology,
    peakVoltage: entries.umpp_stc_V,
    peakCurrent: entries.impp_stc_A,
    ...(alpha === undefined ? {} : { shortCircuitCoefficient: alpha / 100 }),
    ...(beta === undefined ? {} : { openCircuitCoefficient: beta / 100 }),
  });
}
