import fc from 'fast-check';
import { OVERFLOWS, type CodeFormat } from '../../src/fixed/code-format.js';
import { converterCodes, FULL_SCALES } from '../../src/fixed/converter-codes.js';
import { decimalCodes } from '../../src/fixed/decimal-codes.js';
import { qCodes } from '../../src/fixed/q-codes.js';
import { ROUNDINGS } from '../../src/fixed/rounding.js';

const handling = {
  rounding: fc.constantFrom(...ROUNDINGS),
  overflow: fc.constant(OVERFLOWS[0]),
};
const bits = fc.integer({ min: 1, max: 32 });
const signed = fc.boolean();

/** Any Q-format with at most as many fraction bits as a double can count in its highest value. */
export const anyQCodes = (): fc.Arbitrary<CodeFormat> =>
  fc
    .record({ bits, signed, fractionBits: fc.integer({ min: 0, max: 63 }), ...handling })
    .map(({ rounding, overflow, ...q }) => qCodes(q, { rounding, overflow }));

/** Round steps from a microunit to a kilounit, with and without an origin. */
const anyDecimalCodes = (): fc.Arbitrary<CodeFormat> =>
  fc
    .record({
      bits,
      signed,
      step: fc
        .tuple(fc.constantFrom(1, 2, 3, 5, 25), fc.integer({ min: -6, max: 3 }))
        .map(([digits, exponent]) => Number(`${digits}e${exponent}`)),
      origin: fc.constantFrom(0, -40, 0.5, 273.15),
      ...handling,
    })
    .map((scaling) => decimalCodes(scaling, 'V'));

/** Converters with realistic references and channels, unipolar and bipolar. */
const anyConverterCodes = (): fc.Arbitrary<CodeFormat> =>
  fc
    .record({
      bits: fc.integer({ min: 2, max: 32 }),
      signed,
      reference: fc.constantFrom(1.024, 2.5, 3.3, 4.096, 5),
      gain: fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
      offset: fc.constantFrom(0, 0.5, 1.65, -0.02),
      fullScale: fc.constantFrom(...FULL_SCALES),
      ...handling,
    })
    .map((scaling) => converterCodes('ADC', scaling, 'A'));

/** Every kind of format the room makes. All of them saturate. */
export const anyCodeFormat = (): fc.Arbitrary<CodeFormat> =>
  fc.oneof(anyQCodes(), anyDecimalCodes(), anyConverterCodes());
