/** How far the numbers of a datasheet may be from what was printed on it. */
import type { InputDocument } from '../../file/document.js';
import type { Datasheet } from '../datasheet.js';
import type { DatasheetEntries } from '../datasheet-definition.js';

/** Half a unit of the last digit printed, in SI units; none where a number is not given. */
export interface DatasheetRounding {
  readonly shortCircuitCurrent: number;
  readonly openCircuitVoltage: number;
  readonly peakCurrent: number;
  readonly peakVoltage: number;
  readonly shortCircuitCoefficient: number;
  readonly openCircuitCoefficient: number;
  readonly peakPowerCoefficient?: number;
  readonly slopeAtShortCircuit?: number;
  readonly slopeAtOpenCircuit?: number;
}

/**
 * The rounding of the numbers as they stand in a datasheet file. The digits are taken from the text:
 * `38.10` is known ten times as well as `38.1`, though both are the same number once read. A value
 * whose text is not a plain decimal (an alias, a hexadecimal) counts as its shortest decimal.
 *
 * A coefficient in % of a rounded number inherits that number's rounding as well.
 * @param document One that `parseDatasheet` accepts.
 */
export function roundingOfDocument(document: InputDocument): DatasheetRounding {
  const entries = document.value as DatasheetEntries;
  const half = (key: keyof DatasheetEntries): number => {
    const value = entries[key];
    return typeof value === 'number' ? halfUnit(textOf(document, key, value)) : 0;
  };
  const share = (key: keyof DatasheetEntries, whole: keyof DatasheetEntries): number => {
    const [percent, of] = [entries[key], entries[whole]] as [number, number];
    const most = (Math.abs(percent) + half(key)) * (of + half(whole));
    return (most - Math.abs(percent) * of) / 100;
  };
  return {
    shortCircuitCurrent: half('isc_A'),
    openCircuitVoltage: half('voc_V'),
    peakCurrent: half('imp_A'),
    peakVoltage: half('vmp_V'),
    shortCircuitCoefficient:
      entries.alpha_isc_pct_per_K === undefined
        ? half('alpha_isc_mA_per_K') / 1000
        : share('alpha_isc_pct_per_K', 'isc_A'),
    openCircuitCoefficient:
      entries.beta_voc_pct_per_K === undefined
        ? half('beta_voc_mV_per_K') / 1000
        : share('beta_voc_pct_per_K', 'voc_V'),
    peakPowerCoefficient: half('gamma_pmp_pct_per_K') / 100,
    slopeAtShortCircuit: half('slope_at_isc_A_per_V'),
    slopeAtOpenCircuit: half('slope_at_voc_A_per_V'),
  };
}

/**
 * The same of numbers without a text: half a unit of the last digit of the shortest decimal that is
 * the number. Trailing zeros are lost that way (38.10 counts as 38.1), and a coefficient that was
 * converted from % counts as known to all its digits: where a document is at hand, ask it.
 */
export function roundingOfNumbers(datasheet: Datasheet): DatasheetRounding {
  const half = (value: number | undefined): number =>
    value === undefined ? 0 : halfUnit(String(value));
  return {
    shortCircuitCurrent: half(datasheet.shortCircuitCurrent),
    openCircuitVoltage: half(datasheet.openCircuitVoltage),
    peakCurrent: half(datasheet.peakCurrent),
    peakVoltage: half(datasheet.peakVoltage),
    shortCircuitCoefficient: half(datasheet.shortCircuitCoefficient),
    openCircuitCoefficient: half(datasheet.openCircuitCoefficient),
    peakPowerCoefficient: half(datasheet.peakPowerCoefficient),
    slopeAtShortCircuit: half(datasheet.slopeAtShortCircuit),
    slopeAtOpenCircuit: half(datasheet.slopeAtOpenCircuit),
  };
}

const DECIMAL = /^[+-]?(?:\d+(?:\.(\d*))?|\.(\d+))(?:[eE]([+-]?\d+))?/;

function textOf(document: InputDocument, key: string, value: number): string {
  const { line, column } = document.place([key]);
  const text = document.text.split(/\r\n|\n|\r/)[(line ?? 1) - 1]?.slice((column ?? 1) - 1) ?? '';
  const [decimal = ''] = DECIMAL.exec(text) ?? [];
  return decimal !== '' && Number(decimal) === value ? decimal : String(value);
}

function halfUnit(decimal: string): number {
  const [, fraction, bareFraction, exponent = '0'] = DECIMAL.exec(decimal) ?? [];
  const places = (fraction ?? bareFraction ?? '').length;
  // Read as a decimal, so that it is the double nearest to it.
  return Number(`0.5e${Number(exponent) - places}`);
}
