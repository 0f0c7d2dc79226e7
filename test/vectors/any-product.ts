/** Products of random tables, for properties that hold for every product. */
import fc from 'fast-check';
import { codeRange, type CodeFormat } from '../../src/fixed/code-format.js';
import { layOut, type Product } from '../../src/vectors/product.js';

const anyFormat: fc.Arbitrary<CodeFormat> = fc
  .record({
    bits: fc.integer({ min: 1, max: 32 }),
    signed: fc.boolean(),
    step: fc.constantFrom(1, 0.5, 0.001, 2 ** -12, 0.0088623046875),
    origin: fc.constantFrom(0, -40, 0.25),
  })
  .map(({ bits, signed, step, origin }) => ({
    ...{ bits, signed, step, origin },
    ...codeRange(bits, signed),
    rounding: 'half-even',
    overflow: 'saturate',
    label: 'any',
  }));

/** A product whose records hold the codes given, and those codes. */
export interface KnownProduct {
  readonly product: Product;
  readonly codes: readonly (readonly number[])[];
}

export const anyProduct: fc.Arbitrary<KnownProduct> = fc
  .tuple(fc.array(anyFormat, { minLength: 1, maxLength: 8 }), fc.integer({ min: 0, max: 40 }))
  .chain(([formats, count]) =>
    fc
      .array(
        fc.tuple(
          ...formats.map(({ minCode, maxCode }) => fc.integer({ min: minCode, max: maxCode })),
        ),
        { minLength: count, maxLength: count },
      )
      .map((codes) => known(formats, codes)),
  );

function known(
  formats: readonly CodeFormat[],
  codes: readonly (readonly number[])[],
): KnownProduct {
  const layout = layOut(
    formats.map((format, index) => ({
      ...{ name: `column_${index}`, group: index, format },
      quantity: 'voltage',
    })),
  );
  return {
    codes,
    product: {
      name: 'any-product',
      kind: 'timeline',
      sections: [
        {
          tag: 'SAMP',
          noun: 'sample',
          ...layout,
          count: codes.length,
          values: (index, into) => {
            layout.columns.forEach(({ quantizer }, column) => {
              into[column] = quantizer.decode(codes[index]![column]!);
            });
          },
        },
      ],
    },
  };
}
