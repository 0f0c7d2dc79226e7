/** Arbitrary curves in codes, for properties of the look-up. */
import fc from 'fast-check';
import { type CodeArray, type CodeCurve, codeCurve } from '../../src/table/curve-lookup.js';
import type { ColumnLayout } from './image-builder.js';

export interface AnyCurve extends CodeCurve {
  readonly voltageLayout: ColumnLayout;
  readonly currentLayout: ColumnLayout;
  /** Voltages to ask for, of the sign of the voltage column, reaching beyond its codes. */
  readonly questions: readonly number[];
}

/** 2 to 300 points in codes of 8, 16 or 32 bits of either sign, with plateaus and steep edges. */
export const anyCurve = (): fc.Arbitrary<AnyCurve> =>
  fc.tuple(anyLayout, anyLayout).chain(([voltageLayout, currentLayout]) =>
    fc
      .uniqueArray(anyCode(voltageLayout), { minLength: 2, maxLength: 300 })
      .chain((voltages) =>
        fc.record({
          voltages: fc.constant(voltages),
          currents: fc.array(anyCode(currentLayout), {
            minLength: voltages.length,
            maxLength: voltages.length,
          }),
          questions: fc.array(anyCode({ storage: 4, signed: voltageLayout.signed }), {
            maxLength: 30,
          }),
        }),
      )
      .map(({ voltages, currents, questions }) => {
        const voltage = codesOf(voltageLayout, voltages.sort(ascending));
        const current = codesOf(currentLayout, currents.sort(descending));
        return {
          ...codeCurve(voltage, current),
          ...{ voltageLayout, currentLayout },
          questions: [...questions, ...tellingVoltages(voltage, voltageLayout.signed)],
        };
      }),
  );

/** Lowest and highest code of a layout. */
function codeRange({ storage, signed }: ColumnLayout): [number, number] {
  const codes = 2 ** (8 * storage);
  return signed ? [-codes / 2, codes / 2 - 1] : [0, codes - 1];
}

function codesOf({ storage, signed }: ColumnLayout, codes: readonly number[]): CodeArray {
  const types = signed
    ? { 1: Int8Array, 2: Int16Array, 4: Int32Array }
    : { 1: Uint8Array, 2: Uint16Array, 4: Uint32Array };
  return types[storage].from(codes);
}

const anyLayout: fc.Arbitrary<ColumnLayout> = fc.record({
  storage: fc.constantFrom(1, 2, 4),
  signed: fc.boolean(),
});

// Few distinct values make plateaus; the ends of the range make edges as steep as codes allow.
function anyCode(layout: ColumnLayout): fc.Arbitrary<number> {
  const [min, max] = codeRange(layout);
  const near = Math.min(max, 40);
  return fc.oneof(
    { weight: 4, arbitrary: fc.integer({ min, max }) },
    { weight: 2, arbitrary: fc.integer({ min: Math.max(min, -near), max: near }) },
    { weight: 1, arbitrary: fc.constantFrom(min, min + 1, 0, max - 1, max) },
  );
}

function tellingVoltages(voltage: CodeArray, signed: boolean): number[] {
  const [min, max] = codeRange({ storage: 4, signed });
  const around = Array.from(voltage, (code, k) => {
    const next = voltage[k + 1] ?? code;
    const third = Math.floor((next - code) / 3);
    return [code - 1, code, code + 1, code + third, Math.floor((code + next) / 2), next - third];
  });
  return [min, max, ...around.flat().filter((code) => code >= min && code <= max)];
}

const ascending = (a: number, b: number): number => a - b;
const descending = (a: number, b: number): number => b - a;
