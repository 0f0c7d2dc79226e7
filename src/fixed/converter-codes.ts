import { argumentFault } from '../fault.js';
import type { Volts } from '../quantities.js';
import {
  checkBits,
  checkedCodeFormat,
  codeRange,
  type CodeFormat,
  type HandlingChoice,
} from './code-format.js';
import { intendedDecimal } from './intended-decimal.js';

/** Which code stands for the reference voltage: one past the last (2^N) or the last (2^N-1). */
export const FULL_SCALES = ['2^N', '2^N-1'] as const;
type FullScale = (typeof FULL_SCALES)[number];

/** What stands between the quantity and the pin: a gain, or its inverse. */
export type PinScaling =
  | {
      /**
       * Pin voltage per unit of the quantity, above 0: V/V behind an amplifier, V/A for a shunt
       * with its amplifier (shunt resistance times gain), V/degC for a temperature sensor.
       */
      readonly gain: number;
      readonly dividerRatio?: never;
    }
  | {
      /** Quantity per volt at the pin, above 0: 11 for a divider of 100 kohm over 10 kohm. */
      readonly dividerRatio: number;
      readonly gain?: never;
    };

/** An analog-to-digital or digital-to-analog converter and its channel. */
export type ConverterScaling = Converter & PinScaling;

interface Converter extends HandlingChoice {
  /** Resolution of the converter, 1 to 32. */
  readonly bits: number;
  /** Voltage at the pin that makes full scale. */
  readonly reference: Volts;
  /** Pin voltage when the quantity is zero. Default 0. */
  readonly offset?: Volts | undefined;
  /** Default 2^N, as data sheets of converters with a step of reference / 2^N define it. */
  readonly fullScale?: FullScale | undefined;
  /** A bipolar converter: two's complement codes for pin voltages from -reference. Default false. */
  readonly signed?: boolean | undefined;
}

/**
 * The codes of an ADC or DAC. One code is reference / (gain * 2^N), or 2^N - 1 for the other full
 * scale; a signed converter spans twice the reference and has N - 1 bits above zero. Code 0 means
 * -offset / gain. Saturates unless told otherwise. An ADC rounds half up, as the hardware does:
 * code = floor(x / LSB + 1/2). A DAC code is computed, and rounds half to even.
 *
 * @param unit For the label only, plain ASCII.
 * @throws Fault ARGUMENT naming the field that is out of range.
 */
export function converterCodes(
  kind: 'ADC' | 'DAC',
  scaling: ConverterScaling,
  unit: string,
): CodeFormat {
  const { bits, reference, offset = 0, fullScale = '2^N', signed = false } = scaling;
  checkBits(bits);
  if (!(reference > 0 && Number.isFinite(reference))) {
    throw argumentFault('reference', 'a finite voltage above 0', reference);
  }
  if (!Number.isFinite(offset)) throw argumentFault('offset', 'a finite voltage', offset);
  const range = codeRange(bits, signed);
  const codesToReference = fullScale === '2^N' ? range.maxCode + 1 : range.maxCode;
  if (codesToReference === 0) throw argumentFault('bits', 'at least 2 for such a converter', bits);
  const span = atInput(reference, scaling);
  // Subtracting from 0 keeps -0 out.
  const origin = 0 - atInput(offset, scaling);
  const lowest = signed ? origin - span : origin;
  return checkedCodeFormat({
    bits,
    signed,
    step: span / codesToReference,
    origin,
    ...range,
    rounding: scaling.rounding ?? (kind === 'ADC' ? 'half-up' : 'half-even'),
    overflow: scaling.overflow ?? 'saturate',
    label: `${kind}${bits} ${short(lowest)}..${short(origin + span)} ${unit}`,
  });
}

/** What a pin voltage means in the unit of the quantity. */
function atInput(pin: Volts, scaling: PinScaling): number {
  return intendedDecimal(
    scaling.dividerRatio === undefined
      ? pin / checkedFactor('gain', scaling.gain)
      : pin * checkedFactor('dividerRatio', scaling.dividerRatio),
  );
}

function checkedFactor(field: string, factor: number): number {
  if (factor > 0 && Number.isFinite(factor)) return factor;
  throw argumentFault(field, 'finite and above 0 (codes rise with the quantity)', factor);
}

// Labels are for people: six digits hide 36.300000000000004.
const short = (value: number): string => String(Number(value.toPrecision(6)) + 0);
