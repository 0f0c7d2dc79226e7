/**
 * How a user writes a code format in a file, and what it becomes once the quantity is known. The
 * schema checks shapes only and transforms nothing, so that its JSON Schema tells the whole truth;
 * what depends on the quantity is checked by codeFormatFrom.
 */
import { z } from 'zod';
import { Fault } from '../fault.js';
import { OVERFLOWS, type CodeFormat } from './code-format.js';
import { CODED_UNITS, type CodedQuantity } from './coded-quantity.js';
import { channelScaling } from './channel-scaling.js';
import { converterCodes, FULL_SCALES } from './converter-codes.js';
import { decimalCodes } from './decimal-codes.js';
import { qCodes } from './q-codes.js';
import { parseQ } from './q-format.js';
import { ROUNDINGS, type Rounding } from './rounding.js';

const overflow = z
  .enum(OVERFLOWS)
  .default('saturate')
  .describe('A value beyond the last code takes that code and is counted, or is refused.');

const roundingOf = (usual: Rounding) =>
  z
    .enum(ROUNDINGS)
    .default(usual)
    .describe('How values between two codes round: half-up is (x + half) >> n, floor is >>.');

const bits = z.int().min(1).max(32);

const qText = z
  .string()
  .describe(
    'Name of a Q-format. UQm.n is unsigned. In Qm.n, m excludes the sign, unless m + n is 8, 16 or 32. ' +
      'Q15 gives the fraction bits of the narrowest word. A suffix sets the width: Q15/32.',
  )
  .meta({ examples: ['UQ8.8', 'Q3.12', 'Q15', 'Q15/32'] });

const qDefinition = z
  .strictObject({
    q: qText,
    bits: bits.optional().describe('Width of the word, where the name alone is ambiguous.'),
    rounding: roundingOf('half-even'),
    overflow,
  })
  .describe('A Q-format with its handling of values that no code meets exactly.')
  .meta({ examples: [{ q: 'UQ8.8', rounding: 'half-even', overflow: 'saturate' }] });

const factor = z.number().positive();

const converterOf = (usual: Rounding) =>
  z
    .strictObject({
      bits: bits.describe('Resolution of the converter.').meta({ examples: [10, 12] }),
      reference_V: factor
        .describe('Pin voltage that makes full scale, in volts.')
        .meta({ examples: [3.3] }),
      divider: factor
        .optional()
        .describe('Voltage channels: measured voltage over pin voltage; 100k over 10k is 11.')
        .meta({ examples: [11] }),
      gain: factor.optional().describe('Voltage channels: pin voltage over measured voltage.'),
      gain_V_per_A: factor.optional().describe('Current channels: pin volts per ampere.'),
      shunt_ohm: factor
        .optional()
        .describe('Current channels: shunt resistance in ohms, in place of gain_V_per_A.')
        .meta({ examples: [0.01] }),
      amplifier: factor
        .optional()
        .describe('Gain of the amplifier behind shunt_ohm; 1 if not given.')
        .meta({ examples: [20] }),
      gain_V_per_W: factor.optional().describe('Power channels: pin volts per watt.'),
      gain_V_per_W_per_m2: factor.optional().describe('Irradiance channels: pin volts per W/m².'),
      gain_V_per_C: factor
        .optional()
        .describe('Temperature channels: pin volts per degree Celsius.'),
      offset_V: z.number().default(0).describe('Pin voltage when the quantity is zero, in volts.'),
      full_scale: z
        .enum(FULL_SCALES)
        .default('2^N')
        .describe('The code that stands for the reference: one past the last, or the last.'),
      signed: z
        .boolean()
        .default(false)
        .describe("Bipolar converter: two's complement codes from -reference_V to reference_V."),
      rounding: roundingOf(usual),
      overflow,
    })
    .describe('The converter and its channel, which is scaled by the one key for its quantity.');

type ConverterDefinition = z.input<ReturnType<typeof converterOf>>;

const adcExample = { bits: 12, reference_V: 3.3, divider: 11, offset_V: 0, full_scale: '2^N' };
const dacExample = { bits: 12, reference_V: 5, divider: 12 };

const stepDefinition = z
  .strictObject({
    step: factor
      .describe(
        'Value of one code in the SI unit of the quantity; in degrees Celsius for temperatures.',
      )
      .meta({ examples: [0.001] }),
    bits: bits.describe('Width of the word.').meta({ examples: [16] }),
    signed: z.boolean().default(false).describe("Two's complement codes."),
    origin: z.number().default(0).describe('Value of code 0, in the same unit as step.'),
    rounding: roundingOf('half-even'),
    overflow,
  })
  .describe('Whole multiples of a step, such as millivolts.')
  .meta({ examples: [{ step: 0.001, bits: 16, signed: false }] });

/** A code format as a user writes it. */
export const codeFormatDefinition = z
  .union([
    qText,
    qDefinition,
    z
      .strictObject({ adc: converterOf('half-up') })
      .describe('Codes of an analog-to-digital converter behind its divider, shunt or sensor.')
      .meta({ examples: [{ adc: adcExample }] }),
    z
      .strictObject({ dac: converterOf('half-even') })
      .describe('Codes of a digital-to-analog converter; divider and gains as for an ADC.')
      .meta({ examples: [{ dac: dacExample }] }),
    stepDefinition,
  ])
  .describe('How physical values become integers in files.');

/** Fields with defaults may be left out. */
export type CodeFormatDefinition = z.input<typeof codeFormatDefinition>;

/**
 * The code format that a definition means for a quantity. Temperatures are coded in degrees
 * Celsius: give the format Celsius values.
 * @throws Fault FORMAT or ARGUMENT; `field` is the path inside the definition (`adc.divider`).
 */
export function codeFormatFrom(
  definition: CodeFormatDefinition,
  quantity: CodedQuantity,
): CodeFormat {
  if (typeof definition === 'string') return qCodes(parseQ(definition));
  if ('q' in definition) {
    const { q, bits: width } = definition;
    return qCodes(
      within('q', () => parseQ(q, width)),
      definition,
    );
  }
  if ('step' in definition) {
    const { signed = false } = definition;
    return decimalCodes({ ...definition, signed }, CODED_UNITS[quantity]);
  }
  return 'adc' in definition
    ? within('adc', () => converterFrom('ADC', definition.adc, quantity))
    : within('dac', () => converterFrom('DAC', definition.dac, quantity));
}

function converterFrom(
  kind: 'ADC' | 'DAC',
  definition: ConverterDefinition,
  quantity: CodedQuantity,
): CodeFormat {
  const scaling = {
    bits: definition.bits,
    reference: definition.reference_V,
    offset: definition.offset_V,
    fullScale: definition.full_scale,
    signed: definition.signed,
    rounding: definition.rounding,
    overflow: definition.overflow,
    ...channelScaling(definition, quantity),
  };
  return converterCodes(kind, scaling, CODED_UNITS[quantity]);
}

// The conversions name their own fields; the writer of the file needs the whole path.
function within<T>(outer: string, convert: () => T): T {
  try {
    return convert();
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    const problems = error.problems.map((problem) => ({
      ...problem,
      field: problem.field === undefined ? outer : `${outer}.${problem.field}`,
    }));
    throw new Fault(error.kind, problems, { cause: error });
  }
}
