/**
 * The current of a tabulated I-V curve at a voltage, in integer codes: what the firmware library
 * computes (`hp_curve_current`, `hp_interpolate`), bit for bit.
 */
import { Fault } from '../fault.js';

/** Codes as a firmware table stores them; the array type carries width and sign. */
export type CodeArray =
  Int8Array | Uint8Array | Int16Array | Uint16Array | Int32Array | Uint32Array;

/** The points of one curve: as many currents as voltages. Made by {@link codeCurve}. */
export interface CodeCurve {
  /** Voltage codes, rising strictly. */
  readonly voltage: CodeArray;
  /** Current codes, never rising. */
  readonly current: CodeArray;
}

/**
 * Current code of a curve at a voltage code, interpolated between its points as
 * {@link interpolateCode} does. Below the first point it is the current of the first point, above
 * the last that of the last. Allocates nothing unless a segment has a drop of current times a
 * span of voltage of 2⁵³ and more, which needs codes of 22 bits at least.
 *
 * @param curve From {@link codeCurve}, which has checked its order.
 * @param voltageCode An integer of the sign of `curve.voltage`, from -2³¹ to 2³¹ - 1 or from 0 to
 *   2³² - 1: an ADC may well reach beyond the codes of the column.
 * @returns Exact at a point. Never rises with voltage.
 * @see hp_curve_current in firmware-fixtures/include/hillproof.h: equal for every input.
 */
export function currentCodeAt(curve: CodeCurve, voltageCode: number): number {
  const { voltage, current } = curve;
  let low = 0;
  let high = voltage.length - 1;
  if (voltageCode <= voltage[low]!) return current[low]!;
  if (voltageCode >= voltage[high]!) return current[high]!;
  while (high - low > 1) {
    const middle = (low + high) >>> 1;
    if (voltage[middle]! <= voltageCode) low = middle;
    else high = middle;
  }
  return interpolateCode(voltage[low]!, current[low]!, voltage[high]!, current[high]!, voltageCode);
}

/**
 * Current code at `v` on the straight line from (v0, i0) down to (v1, i1):
 *
 *     i0 - floor((drop × distance + floor(span / 2)) / span)
 *     with drop = i0 - i1, distance = v - v0, span = v1 - v0
 *
 * the drop rounded to the nearest code, halves up. Exact for all 32-bit codes of either sign.
 * Falls from i0 at v0 to i1 at v1 and never rises in between. Defined everywhere: i0 where
 * v <= v0, else i1 where v >= v1; between them i0 if i1 is above i0.
 *
 * @param v0,i0,v1,i1,v Integers; voltages of one sign and 32 bits, currents of one sign and 32 bits.
 * @see hp_interpolate in firmware-fixtures/include/hillproof.h: equal for every input.
 */
export function interpolateCode(v0: number, i0: number, v1: number, i1: number, v: number): number {
  if (v <= v0) return i0;
  if (v >= v1) return i1;
  if (i1 >= i0) return i0;
  return i0 - scaledDrop(i0 - i1, v - v0, v1 - v0);
}

function scaledDrop(drop: number, distance: number, span: number): number {
  const dividend = drop * distance + Math.floor(span / 2);
  // Below 2^53 the dividend is exact. Its quotient by the span lies at least 1 / span below the
  // next integer, and rounding moves it by less than that: by dividend / span / 2^53 at most.
  if (dividend < Number.MAX_SAFE_INTEGER) return Math.floor(dividend / span);
  const exact = BigInt(drop) * BigInt(distance) + (BigInt(span) >> 1n);
  return Number(exact / BigInt(span));
}

/**
 * Checks the points of a curve once, so that look-ups need not.
 *
 * @param voltage Voltage codes, at least one, rising strictly.
 * @param current As many current codes, never rising.
 * @returns The two arrays themselves, not copies: leave them as they are.
 * @throws Fault CURVE_LENGTH, CURVE_VOLTAGE_ORDER or CURVE_CURRENT_ORDER, naming the element.
 */
export function codeCurve(voltage: CodeArray, current: CodeArray): CodeCurve {
  if (voltage.length === 0 || voltage.length !== current.length) {
    throw new Fault('input', {
      code: 'CURVE_LENGTH',
      message: `a curve must have as many currents as voltages, at least 1, found ${voltage.length} voltages and ${current.length} currents.`,
    });
  }
  for (let k = 1; k < voltage.length; k++) {
    if (voltage[k]! <= voltage[k - 1]!) {
      throw orderFault('CURVE_VOLTAGE_ORDER', 'voltage', k, 'above', voltage);
    }
    if (current[k]! > current[k - 1]!) {
      throw orderFault('CURVE_CURRENT_ORDER', 'current', k, 'at most', current);
    }
  }
  return { voltage, current };
}

function orderFault(
  code: string,
  name: string,
  k: number,
  relation: string,
  codes: CodeArray,
): Fault {
  return new Fault('input', {
    code,
    field: `${name}[${k}]`,
    message: `must be ${relation} the code before, ${codes[k - 1]!}, found ${codes[k]!}.`,
    hint: 'Take curves whose voltages rise strictly and whose currents never rise.',
  });
}
