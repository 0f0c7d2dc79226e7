/** The keys of a datasheet file: one definition checks it, types it and becomes its JSON Schema. */
import { z } from 'zod';
import { nameDefinition } from '../file/name-definition.js';
import { TECHNOLOGIES, type TechnologyName } from './technology.js';

const technologyNames = Object.keys(TECHNOLOGIES) as [TechnologyName, ...TechnologyName[]];

export const datasheetDefinition = z
  .strictObject({
    name: nameDefinition('Name of the module, for reports.'),
    technology: z.enum(technologyNames).describe('Material of the cells.'),
    cells_in_series: z
      .int()
      .min(1)
      .max(400)
      .describe('Cells in series. A half-cut module of 120 half cells has 60.'),
    isc_A: z.number().positive().max(100).describe('Short-circuit current at STC.'),
    voc_V: z.number().positive().max(1000).describe('Open-circuit voltage at STC.'),
    imp_A: z.number().positive().max(100).describe('Current at the peak, at STC.'),
    vmp_V: z.number().positive().max(1000).describe('Voltage at the peak, at STC.'),
    alpha_isc_pct_per_K: z
      .number()
      .optional()
      .describe('Temperature coefficient of Isc in %/K; give this or alpha_isc_mA_per_K.'),
    alpha_isc_mA_per_K: z.number().optional().describe('The same in mA/K.'),
    beta_voc_pct_per_K: z
      .number()
      .optional()
      .describe('Temperature coefficient of Voc in %/K, negative; or give beta_voc_mV_per_K.'),
    beta_voc_mV_per_K: z.number().optional().describe('The same in mV/K for the whole module.'),
    gamma_pmp_pct_per_K: z
      .number()
      .optional()
      .describe('Temperature coefficient of peak power in %/K, negative.'),
    noct_C: z.number().optional().describe('Nominal operating cell temperature in °C.'),
    slope_at_isc_A_per_V: z
      .number()
      .optional()
      .describe('dI/dV of the curve at short circuit, zero or negative.'),
    slope_at_voc_A_per_V: z
      .number()
      .optional()
      .describe('dI/dV of the curve at open circuit, negative.'),
    tolerance_pct: z
      .number()
      .min(0)
      .max(50)
      .optional()
      .describe('Spread of peak power between modules, plus or minus, in %.'),
  })
  .meta({
    title: 'Hillproof datasheet',
    description: 'A PV module by the numbers of its datasheet, at STC.',
  });

export type DatasheetEntries = z.infer<typeof datasheetDefinition>;
