/** The keys of an array file: one definition checks it, types it and becomes its JSON Schema. */
import { z } from 'zod';

const groupName = z
  .string()
  .regex(/^[a-z][a-z0-9-]*$/, 'lower-case letters, digits and hyphens, a letter first')
  .max(24);
const number = (what: string) => z.int().min(1).max(1000).describe(what);
/** Module numbers are keys here. */
const byModule = z.string().regex(/^[1-9][0-9]{0,2}$/, 'the number of a module, from 1');

const drop = z.strictObject({
  drop_V: z.number().min(0).max(5).describe('Voltage it takes while it conducts, at any current.'),
});
const junction = z.strictObject({
  diode: z
    .strictObject({
      saturation_A: z.number().min(1e-20).max(0.1).describe('Saturation current Is.'),
      ideality: z.number().min(0.5).max(5).describe('Ideality factor n.'),
      series_ohm: z.number().min(0).max(10).default(0).describe('Resistance in series.'),
      temperature_C: z
        .number()
        .min(-60)
        .max(200)
        .default(25)
        .describe('Temperature of the diode: fixed, whatever the cells do.'),
    })
    .describe('I = Is (exp((V - I Rs) / (n k T / q)) - 1).'),
});

const reverse = z
  .strictObject({
    bishop: z.strictObject({
      share: z.number().positive().max(5).describe('Share of the shunt conductance, above 0.'),
      exponent: z.number().min(1.1).max(10).describe('Exponent m.'),
      breakdown_V: z.number().min(-200).max(-1).describe('Breakdown voltage of one cell.'),
    }),
  })
  .describe(
    'Reverse breakdown of each cell, after Bishop 1988: beside the shunt flows ' +
      'share u / Rsh (1 - u / breakdown_V)^-exponent.',
  );

const string = z.strictObject({
  modules: number('Modules in series.'),
  count: z.int().min(1).max(1000).default(1).describe('Strings like this one, in parallel.'),
  shade: z
    .record(byModule, z.union([groupName, z.array(groupName).min(1).max(100)]))
    .optional()
    .describe('By module number: the group of the whole module, or a list by substring.'),
  deviation_pct: z
    .record(byModule, z.number().min(-50).max(50))
    .optional()
    .describe('By module number: how much more photocurrent than nominal it gives.'),
  blocking: z
    .union([drop, junction])
    .optional()
    .describe('Blocking diode: a drop, or a junction diode. Left out: none.'),
});

const place = {
  string: number('Which string, from 1.'),
  module: number('Which module of it, from 1.'),
};
const inSubstring = { ...place, substring: number('Which substring of it, from 1.') };

const shadedCells = z.strictObject({
  ...inSubstring,
  count: number('Cells that are shaded.').default(1),
  factor: z.number().min(0).max(2).describe('Their irradiance, on that of their substring.'),
});

const fault = z.union([
  z.strictObject({
    ...inSubstring,
    bypass: z.enum(['shorted', 'open']).describe('How the bypass diode has failed.'),
  }),
  z.strictObject({
    ...inSubstring,
    cracked: z
      .strictObject({
        count: number('Cells that are cracked.').default(1),
        lost_area: z.number().positive().max(0.99).describe('Share of a cell that is cut off.'),
      })
      .describe('Cells that have lost a part of their area.'),
  }),
  z.strictObject({
    ...place,
    open: z.literal(true).describe('The module is open: its string carries nothing.'),
  }),
]);

export const arrayDefinition = z
  .strictObject({
    array: z.string().min(1).max(80).describe('Name of the array, for reports.'),
    module: z.string().min(1).describe('Datasheet or model file, from the folder of this file.'),
    substrings_per_module: z
      .int()
      .min(1)
      .max(100)
      .default(3)
      .describe('Bypass diodes of a module; its cells are shared out evenly.'),
    bypass: z
      .union([drop, junction, z.literal('none')])
      .default({ drop_V: 0.5 })
      .describe('Across each substring: an ideal clamp with a drop, a junction diode, or none.'),
    reverse: reverse.optional(),
    soiling_pct: z.number().min(0).max(99).default(0).describe('Light lost to dirt, everywhere.'),
    groups: z
      .record(groupName, z.number().min(0).max(2))
      .optional()
      .describe(
        'Shading groups: a factor on the irradiance of each. The first one lights what shade ' +
          'does not name. Left out: sun: 1.',
      ),
    strings: z.array(string).min(1).max(1000).describe('Strings, connected in parallel.'),
    shaded_cells: z
      .array(shadedCells)
      .max(1000)
      .optional()
      .describe('Cells lit differently from the rest of their substring.'),
    faults: z.array(fault).max(1000).optional().describe('What is broken.'),
  })
  .meta({
    title: 'Hillproof array',
    description: 'Modules in strings, strings in parallel, with shade, diodes and faults.',
  });

export type ArrayEntries = z.output<typeof arrayDefinition>;
