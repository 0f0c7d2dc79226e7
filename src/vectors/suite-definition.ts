/** The suite file: which sources, which weather, coded how, written as what. */
import { z } from 'zod';
import { codeFormatDefinition } from '../fixed/file-definition.js';

export const OUTPUT_FORMS = ['binary', 'c', 'csv', 'json'] as const;
export type OutputForm = (typeof OUTPUT_FORMS)[number];

const outputs = z
  .array(z.enum(OUTPUT_FORMS))
  .min(1)
  .describe('Forms to write: binary vector file, C99 header and source, CSV, JSON.');

const irradiance = z.number().positive().max(2000);
const cellTemperature = z.number().min(-60).max(120);

const formats = z
  .strictObject({
    voltage: codeFormatDefinition,
    current: codeFormatDefinition,
    power: codeFormatDefinition
      .optional()
      .describe('Left out: the exact product of the voltage and current codes.'),
    irradiance: codeFormatDefinition.optional().describe('Left out: 0.1 W/m² in 16 bits.'),
    temperature: codeFormatDefinition
      .optional()
      .describe('In degrees Celsius. Left out: 0.01 °C in 16 bits, signed.'),
    time: codeFormatDefinition.optional().describe('Left out: milliseconds in 32 bits.'),
  })
  .describe('How each quantity becomes an integer, as the hardware under test sees it.');

const curves = z
  .strictObject({
    points: z.int().min(2).max(65_536).describe('Points of each curve.'),
    conditions: z
      .array(
        z.strictObject({
          irradiance_W_per_m2: irradiance.describe('In the plane of the module.'),
          cell_temperature_C: cellTemperature.describe('Temperature of the cells.'),
        }),
      )
      .min(1)
      .max(10_000)
      .optional()
      .describe('One curve for each entry.'),
    grid: z
      .strictObject({
        irradiance_W_per_m2: z.array(irradiance).min(1).max(100),
        cell_temperature_C: z.array(cellTemperature).min(1).max(100),
      })
      .optional()
      .describe('One curve for each pair of an irradiance and a temperature.'),
    outputs: outputs.optional(),
  })
  .describe('Curve set: I-V tables at chosen conditions.');

const timeline = z
  .strictObject({
    every_s: z.number().positive().max(1e9).describe('Sampling period in seconds.'),
    outputs: outputs.optional(),
  })
  .describe('Timeline: what the weather does to each source, sample by sample.');

export const suiteDefinition = z
  .strictObject({
    suite: z
      .string()
      .regex(/^[a-z][a-z0-9-]*$/, 'lower-case letters, digits and hyphens, a letter first')
      .max(32)
      .describe('Name of the suite; begins the names of its files.'),
    sources: z
      .record(
        z
          .string()
          .regex(/^[a-z][a-z0-9-]*$/, 'lower-case letters, digits and hyphens, a letter first')
          .max(24),
        z.string().min(1),
      )
      .describe('A label for each source, and its datasheet or model file.'),
    weather: z.string().min(1).optional().describe('The weather file; needed for a timeline.'),
    formats,
    curves: curves.optional(),
    timeline: timeline.optional(),
    outputs: outputs
      .optional()
      .describe('Left out: all four, but no C where an array would pass what C99 promises.'),
  })
  .meta({
    title: 'Hillproof suite',
    description: 'What one run of emit builds: vectors and their manifest.',
  });

export type SuiteEntries = z.output<typeof suiteDefinition>;
