import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { codeRange, type CodeFormat } from '../../src/fixed/code-format.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { parseQ } from '../../src/fixed/q-format.js';
import { physicalText } from '../../src/vectors/physical-text.js';
import { sinksFor } from '../../src/vectors/outputs.js';
import { layOut, type Product } from '../../src/vectors/product.js';
import { pour } from '../../src/vectors/sink.js';
import type { OutputForm } from '../../src/vectors/suite-definition.js';
import { anyProduct } from './any-product.js';

function textsOf(product: Product, form: OutputForm): Record<string, string> {
  const texts: Record<string, string> = {};
  const sinks = sinksFor(product, [form], (path) => {
    texts[path] = '';
    return (chunk) => {
      texts[path] = texts[path]! + Buffer.from(chunk).toString('utf8');
    };
  });
  pour(product, sinks);
  return texts;
}

/** Two points with codes at the ends of a signed and an unsigned format. */
function endsOf(voltage: CodeFormat, current: CodeFormat): Product {
  const layout = layOut([
    { name: 'voltage', quantity: 'voltage', format: voltage },
    { name: 'current', quantity: 'current', format: current },
  ]);
  return {
    name: 'two-ends',
    kind: 'timeline',
    sections: [
      {
        tag: 'SAMP',
        noun: 'sample',
        ...layout,
        count: 2,
        values: (index, into) => {
          into.fill(index === 0 ? -Infinity : Infinity);
        },
      },
    ],
  };
}

describe('CSV', () => {
  test('has a header of names with units, then value and code of each column', () => {
    const product = endsOf(
      qCodes(parseQ('Q2.5')),
      decimalCodes({ step: 0.01, bits: 8, signed: false }, 'A'),
    );
    expect(textsOf(product, 'csv')).toEqual({
      'two-ends.csv':
        'voltage_V,voltage_code,current_A,current_code\r\n' +
        '-4,-128,0,0\r\n' +
        '3.96875,127,2.55,255\r\n',
    });
  });

  test('shows physical values from which the code can be told', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(0.001, 2 ** -8, 2 ** -15, 0.0088623046875, 1, 0.1, 12.5, 1e-20, 1e-30),
        fc.constantFrom(0, 0.25, -40),
        fc.integer({ min: -32768, max: 32767 }),
        (step, steps, code) => {
          const origin = steps * step;
          const format = { ...qCodes(parseQ('Q15')), step, origin, label: 'any' };
          const value = Number(physicalText(format)(code));
          expect(Math.round((value - origin) / step)).toBe(code);
          expect(Math.abs(value - (origin + code * step))).toBeLessThanOrEqual(step / 1000);
        },
      ),
      { seed: 3, numRuns: 1000 },
    );
  });
});

describe('JSON', () => {
  test('parses back to the codes, with what each column means', () => {
    fc.assert(
      fc.property(anyProduct, ({ product, codes }) => {
        const parsed = JSON.parse(textsOf(product, 'json')['any-product.json']!) as {
          sections: { tag: string; count: number; columns: object[]; codes: number[][] }[];
        };
        expect(parsed.sections[0]).toMatchObject({ tag: 'SAMP', count: codes.length, codes });
        const { step, origin } = product.sections[0]!.columns[0]!.quantizer.format;
        expect(parsed.sections[0]!.columns[0]).toMatchObject({ unit: 'V', step, origin });
      }),
      { seed: 4, numRuns: 100 },
    );
  });
});

describe('C99 source', () => {
  test('names the fields with their formats in the header, and the values beside the codes', () => {
    const product = endsOf(qCodes(parseQ('Q2.13')), qCodes(parseQ('UQ8.8')));
    expect(textsOf(product, 'c')['two-ends.h']).toContain(
      'struct two_ends_sample {\n' +
        '    int16_t voltage;  /* Q2.13: V = code * 0.0001220703125 */\n' +
        '    uint16_t current; /* UQ8.8: A = code * 0.00390625 */\n' +
        '};\n',
    );
    expect(textsOf(product, 'c')['two-ends.c']).toContain(
      'const struct two_ends_sample two_ends_samples[2] = {\n' +
        '    { (-32767 - 1), 0x0000u }, /* -4 V  0 A */\n' +
        '    {  32767, 0xFFFFu }, /* 3.9998779 V  255.996094 A */\n' +
        '};\n',
    );
  });

  test('writes the lowest 32-bit number so that it is no overflow', () => {
    const format = { ...qCodes(parseQ('Q31')), ...codeRange(32, true) };
    expect(textsOf(endsOf(format, format), 'c')['two-ends.c']).toContain(
      '{ (-2147483647L - 1), (-2147483647L - 1) }',
    );
  });

  test('has an array of one zero element where there are no records', () => {
    const product = endsOf(qCodes(parseQ('UQ8.8')), qCodes(parseQ('UQ8.8')));
    const empty = { ...product, sections: [{ ...product.sections[0]!, count: 0 }] };
    expect(textsOf(empty, 'c')['two-ends.c']).toContain('two_ends_samples[1] = {\n    { 0 },\n};');
    expect(textsOf(empty, 'c')['two-ends.h']).toContain('#define TWO_ENDS_SAMPLE_COUNT 0u');
  });
});
