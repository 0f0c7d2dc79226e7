import { Fault } from '../fault.js';
import type { Quantizer } from '../fixed/quantizer.js';
import type { Volts } from '../quantities.js';
import type { Peak } from '../source/curve.js';

/**
 * Voltage codes for the points of one curve, as even as the code grid allows: the first is the
 * lowest code at or above 0 V, the last the highest code not above the open-circuit voltage, and
 * they rise strictly. For each peak the inner point nearest to it moves onto the code nearest to its
 * voltage, so that a look-up finds the peak where it is.
 *
 * If the format ends below the open-circuit voltage, the table ends where the format ends.
 * @param count Number of points, at least 2.
 * @throws Fault `TOO_FEW_CODES` if that many different codes do not exist in the range.
 */
export function placeVoltageCodes(
  openCircuitVoltage: Volts,
  count: number,
  quantizer: Quantizer,
  peaks: readonly Peak[] = [],
): Float64Array {
  const first = lowestCodeFrom(0, quantizer);
  const last = highestCodeTo(openCircuitVoltage, quantizer);
  if (last - first < count - 1) {
    throw new Fault('input', {
      code: 'TOO_FEW_CODES',
      message:
        `${count} points need ${count} different voltage codes, but ${quantizer.format.label} ` +
        `has ${Math.max(last - first + 1, 0)} from 0 V to Voc ` +
        `(${openCircuitVoltage.toPrecision(4)} V).`,
      hint: 'Ask for fewer points, or give the voltage a finer format.',
    });
  }
  const codes = new Float64Array(count);
  for (let index = 0; index < count; index++) {
    codes[index] = first + Math.floor(((last - first) * index) / (count - 1) + 0.5);
  }
  for (const { voltage } of peaks) moveNearest(codes, quantizer.encode(voltage));
  return codes;
}

// The ends stay. The code lies between its neighbours in the list, or it would not be nearest.
function moveNearest(codes: Float64Array, code: number): void {
  let nearest = 0;
  for (let index = 1; index < codes.length - 1; index++) {
    if (nearest === 0 || Math.abs(codes[index]! - code) < Math.abs(codes[nearest]! - code)) {
      nearest = index;
    }
  }
  if (nearest === 0 || code <= codes[nearest - 1]! || code >= codes[nearest + 1]!) return;
  codes[nearest] = code;
}

// Division may be off by one code in the last bit; decoding is what counts, so it decides.
function lowestCodeFrom(voltage: Volts, quantizer: Quantizer): number {
  const { origin, step, minCode, maxCode } = quantizer.format;
  let code = Math.ceil((voltage - origin) / step);
  if (quantizer.decode(code) < voltage) code++;
  else if (quantizer.decode(code - 1) >= voltage) code--;
  return Math.min(Math.max(code, minCode), maxCode) + 0;
}

function highestCodeTo(voltage: Volts, quantizer: Quantizer): number {
  const { origin, step, minCode, maxCode } = quantizer.format;
  let code = Math.floor((voltage - origin) / step);
  if (quantizer.decode(code) > voltage) code--;
  else if (quantizer.decode(code + 1) <= voltage) code++;
  return Math.min(Math.max(code, minCode), maxCode) + 0;
}
