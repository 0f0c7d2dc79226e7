/** The datasheet file: what a user copies from a module's datasheet. */
import { Fault, type Problem } from '../fault.js';
import { interpret } from '../file/definition.js';
import { refuseOtherKinds } from '../file/document-kind.js';
import type { InputDocument } from '../file/document.js';
import { fromCelsius } from '../quantities.js';
import { datasheetDefinition, type DatasheetEntries } from './datasheet-definition.js';
import { datasheetProblems } from './datasheet-plausibility.js';
import type { Datasheet } from './datasheet.js';

/** A datasheet, and what in it is odd without being wrong. */
export interface DatasheetReading {
  readonly datasheet: Datasheet;
  readonly warnings: readonly Problem[];
}

/**
 * Checks a datasheet document against its definition, then for plausibility, and converts to SI.
 * @throws Fault `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`; then, of a file without those,
 * `BOTH_FORMS`, `IMPOSSIBLE_VALUE`, `FILL_FACTOR`, `CELL_VOLTAGE`, `UNIT_SLIP`. Every error of the
 * file is in it, with its place.
 */
export function parseDatasheet(document: InputDocument): DatasheetReading {
  refuseOtherKinds(document, 'datasheet');
  const entries = interpret(document, datasheetDefinition);
  const { errors, warnings } = datasheetProblems(entries, document);
  if (errors.length > 0) throw new Fault('input', errors);
  return { datasheet: toDatasheet(entries), warnings };
}

function toDatasheet(entries: DatasheetEntries): Datasheet {
  const alpha =
    entries.alpha_isc_pct_per_K === undefined
      ? entries.alpha_isc_mA_per_K! / 1000
      : (entries.alpha_isc_pct_per_K / 100) * entries.isc_A;
  const beta =
    entries.beta_voc_pct_per_K === undefined
      ? entries.beta_voc_mV_per_K! / 1000
      : (entries.beta_voc_pct_per_K / 100) * entries.voc_V;
  return {
    name: entries.name,
    technology: entries.technology,
    cellsInSeries: entries.cells_in_series,
    shortCircuitCurrent: entries.isc_A,
    openCircuitVoltage: entries.voc_V,
    peakCurrent: entries.imp_A,
    peakVoltage: entries.vmp_V,
    shortCircuitCoefficient: alpha,
    openCircuitCoefficient: beta,
    ...given('peakPowerCoefficient', entries.gamma_pmp_pct_per_K, (pct) => pct / 100),
    ...given('nominalOperatingTemperature', entries.noct_C, fromCelsius),
    ...given('slopeAtShortCircuit', entries.slope_at_isc_A_per_V),
    ...given('slopeAtOpenCircuit', entries.slope_at_voc_A_per_V),
    ...given('tolerance', entries.tolerance_pct, (pct) => pct / 100),
  };
}

const given = <Key extends string>(
  key: Key,
  value: number | undefined,
  convert: (value: number) => number = (same) => same,
): Partial<Record<Key, number>> =>
  value === undefined ? {} : ({ [key]: convert(value) } as Record<Key, number>);
