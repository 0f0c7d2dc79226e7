import { describe, expect, test } from 'vitest';
import { parse } from 'yaml';
import { z } from 'zod';
import type { CodedQuantity } from '../../src/fixed/coded-quantity.js';
import { converterCodes } from '../../src/fixed/converter-codes.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import {
  codeFormatDefinition,
  codeFormatFrom,
  type CodeFormatDefinition,
} from '../../src/fixed/file-definition.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { problemOf } from './faults.js';

const fromYaml = (text: string, quantity: CodedQuantity) =>
  codeFormatFrom(codeFormatDefinition.parse(parse(text)), quantity);

describe('codeFormatFrom', () => {
  test.each([
    ['UQ8.8', qCodes(parseQ('UQ8.8'))],
    ['Q15/32', qCodes(parseQ('Q15', 32))],
    ['{ q: UQ8.8 }', qCodes(parseQ('UQ8.8'))],
    ['{ q: Q4.12, bits: 17 }', qCodes(parseQ('Q4.12/17'))],
    [
      '{ q: UQ8.8, rounding: floor, overflow: refuse }',
      qCodes(parseQ('UQ8.8'), { rounding: 'floor', overflow: 'refuse' }),
    ],
  ])('reads the Q-format %s for any quantity', (text, format) => {
    expect(fromYaml(text, 'voltage')).toEqual(format);
    expect(fromYaml(text, 'time')).toEqual(format);
  });

  test('reads an ADC behind a divider', () => {
    const text =
      '{ adc: { bits: 12, reference_V: 3.3, divider: 11, offset_V: 0, full_scale: 2^N } }';
    const scaling = { bits: 12, reference: 3.3, dividerRatio: 11 };
    expect(fromYaml(text, 'voltage')).toEqual(converterCodes('ADC', scaling, 'V'));
  });

  test('reads a DAC with everything written out', () => {
    const text =
      '{ dac: { bits: 10, reference_V: 5, gain: 0.1, offset_V: 0.5, full_scale: 2^N-1, ' +
      'signed: true, rounding: toward-zero, overflow: refuse } }';
    expect(fromYaml(text, 'voltage')).toEqual(
      converterCodes(
        'DAC',
        {
          bits: 10,
          reference: 5,
          gain: 0.1,
          offset: 0.5,
          fullScale: '2^N-1',
          signed: true,
          rounding: 'toward-zero',
          overflow: 'refuse',
        },
        'V',
      ),
    );
  });

  test.each<[CodedQuantity, string, number, string]>([
    ['current', 'gain_V_per_A: 0.2', 0.2, 'A'],
    ['current', 'shunt_ohm: 0.01, amplifier: 20', 0.01 * 20, 'A'],
    ['current', 'shunt_ohm: 0.1', 0.1, 'A'],
    ['power', 'gain_V_per_W: 0.01', 0.01, 'W'],
    ['irradiance', 'gain_V_per_W_per_m2: 0.002', 0.002, 'W/m2'],
    ['temperature', 'gain_V_per_C: 0.01', 0.01, 'degC'],
  ])('reads a %s channel scaled by %s', (quantity, scaling, gain, unit) => {
    const text = `{ adc: { bits: 12, reference_V: 3.3, ${scaling} } }`;
    const expected = converterCodes('ADC', { bits: 12, reference: 3.3, gain }, unit);
    expect(fromYaml(text, quantity)).toEqual(expected);
  });

  test('reads a temperature sensor of 10 mV per degree Celsius and 500 mV at zero', () => {
    const text = '{ adc: { bits: 12, reference_V: 3.3, gain_V_per_C: 0.01, offset_V: 0.5 } }';
    expect(fromYaml(text, 'temperature').label).toBe('ADC12 -50..280 degC');
  });

  test.each<[CodedQuantity, string]>([
    ['voltage', 'V'],
    ['current', 'A'],
    ['power', 'W'],
    ['irradiance', 'W/m2'],
    ['temperature', 'degC'],
    ['time', 's'],
  ])('reads steps of a %s in %s', (quantity, unit) => {
    expect(fromYaml('{ step: 0.001, bits: 16 }', quantity)).toEqual(
      decimalCodes({ step: 0.001, bits: 16, signed: false }, unit),
    );
    expect(fromYaml('{ step: 0.5, bits: 8, signed: true, origin: -40 }', quantity)).toEqual(
      decimalCodes({ step: 0.5, bits: 8, signed: true, origin: -40 }, unit),
    );
  });

  const adc = (fields: string): string => `{ adc: { bits: 12, reference_V: 3.3, ${fields} } }`;
  test.each<[CodedQuantity, string, string, string]>([
    [
      'voltage',
      adc('gain_V_per_A: 0.2'),
      'adc.gain_V_per_A',
      'does not fit: a voltage channel takes divider or gain.',
    ],
    [
      'current',
      adc('divider: 11'),
      'adc.divider',
      'does not fit: a current channel takes gain_V_per_A or shunt_ohm.',
    ],
    ['voltage', adc('divider: 11, gain: 1'), 'adc.gain', 'must not stand beside divider.'],
    [
      'current',
      adc('gain_V_per_A: 0.2, shunt_ohm: 0.01'),
      'adc.shunt_ohm',
      'must not stand beside gain_V_per_A.',
    ],
    [
      'current',
      adc('gain_V_per_A: 0.2, amplifier: 20'),
      'adc.amplifier',
      'must stand beside shunt_ohm.',
    ],
    ['current', adc('amplifier: 20'), 'adc.amplifier', 'must stand beside shunt_ohm.'],
    [
      'voltage',
      '{ dac: { bits: 12, reference_V: 3.3 } }',
      'dac',
      'the scaling is missing: a voltage channel takes divider or gain.',
    ],
    ['time', adc('gain: 1'), 'adc', 'no converter measures time.'],
    ['voltage', '{ q: Q4.12, bits: 32 }', 'q', 'Q4.12 does not fill 32 bits.'],
  ])('refuses for a %s: %s', (quantity, text, field, message) => {
    const problem = problemOf(() => fromYaml(text, quantity));
    expect(problem).toMatchObject({ code: 'FORMAT', field, message });
  });

  test('names the whole path of a field that the codes themselves refuse', () => {
    const text = '{ adc: { bits: 1, reference_V: 3.3, gain: 1, signed: true, full_scale: 2^N-1 } }';
    expect(problemOf(() => fromYaml(text, 'voltage'))).toMatchObject({
      code: 'ARGUMENT',
      field: 'adc.bits',
    });
    expect(problemOf(() => fromYaml('{ step: 1.e-40, bits: 8 }', 'voltage')).field).toBe('step');
  });

  test('refuses text that is no Q-format with a hint', () => {
    expect(problemOf(() => fromYaml('U8.8', 'voltage'))).toMatchObject({
      code: 'FORMAT',
      hint: expect.stringContaining('Did you mean UQ8.8?') as string,
    });
  });
});

describe('codeFormatDefinition', () => {
  test.each([
    '{ q: UQ8.8, roundin: floor }',
    '{ adc: { bits: 12, refrence_V: 3.3, divider: 11 } }',
    '{ adc: { bits: 12, reference_V: 3.3, divider: 11 }, rounding: floor }',
    '{ adc: { bits: 12, reference_V: -3.3, divider: 11 } }',
    '{ adc: { bits: 12, reference_V: 3.3, divider: 0 } }',
    '{ adc: { bits: 33, reference_V: 3.3, divider: 11 } }',
    '{ adc: { bits: 12.5, reference_V: 3.3, divider: 11 } }',
    '{ adc: { bits: 12, reference_V: 3.3, divider: 11, full_scale: 4096 } }',
    '{ step: 0.001 }',
    '{ step: 0, bits: 16 }',
    '{ step: .inf, bits: 16 }',
    '{ step: 0.001, bits: 16, rounding: half-down }',
    '{}',
    '12',
  ])('rejects %s', (text) => {
    expect(codeFormatDefinition.safeParse(parse(text)).success).toBe(false);
  });

  interface Node {
    readonly description?: string;
    readonly default?: unknown;
    readonly examples?: readonly unknown[];
    readonly properties?: Readonly<Record<string, Node>>;
    readonly additionalProperties?: boolean;
    readonly anyOf?: readonly Node[];
  }
  const schema = z.toJSONSchema(codeFormatDefinition, { io: 'input' }) as Node;
  const within = (node: Node): Node[] => [
    node,
    ...[...(node.anyOf ?? []), ...Object.values(node.properties ?? {})].flatMap(within),
  ];
  const objects = within(schema).filter((node) => node.properties !== undefined);

  test('describes every field in its JSON Schema and closes every object', () => {
    expect(objects).toHaveLength(6);
    for (const node of objects) {
      expect(node.additionalProperties).toBe(false);
      for (const [name, field] of Object.entries(node.properties!)) {
        expect(field.description ?? '', name).toMatch(/^.{10,}\.$/);
      }
    }
    for (const form of schema.anyOf!) expect(form.description ?? '').toMatch(/\.$/);
  });

  test('gives examples of every form that are themselves valid', () => {
    for (const form of schema.anyOf!) {
      expect(form.examples?.length ?? 0).toBeGreaterThan(0);
      for (const example of form.examples!) {
        const definition = codeFormatDefinition.parse(example);
        expect(() => codeFormatFrom(definition, 'voltage')).not.toThrow();
      }
    }
  });

  test.each<[string, CodeFormatDefinition]>([
    ['q', { q: 'UQ8.8' }],
    ['adc', { adc: { bits: 12, reference_V: 3.3, divider: 11 } }],
    ['dac', { dac: { bits: 12, reference_V: 3.3, divider: 11 } }],
    ['step', { step: 0.001, bits: 16 }],
  ])('states for %s the defaults that the conversion applies', (_, definition) => {
    const withDefaults = codeFormatDefinition.parse(definition);
    expect(withDefaults).not.toEqual(definition);
    expect(codeFormatFrom(withDefaults, 'voltage')).toEqual(codeFormatFrom(definition, 'voltage'));
  });
});
