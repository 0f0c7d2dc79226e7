/**
 * What a datasheet says about heat. Its coefficients come in several units, and a slip between
 * them shows in their size: as a ratio, those of all cells are alike.
 */
import type { DatasheetEntries } from '../datasheet-definition.js';
import { impossible, odd, type Finding } from './finding.js';

export function* heatFindings(d: DatasheetEntries): Generator<Finding> {
  yield* oneFormOf(d, 'alpha_isc_pct_per_K', 'alpha_isc_mA_per_K');
  yield* oneFormOf(d, 'beta_voc_pct_per_K', 'beta_voc_mV_per_K');
  yield* currentCoefficient(d);
  yield* voltageCoefficient(d);
  yield* powerCoefficient(d);
  yield* operatingTemperature(d);
}

function* oneFormOf<Key extends keyof DatasheetEntries>(
  d: DatasheetEntries,
  relative: Key,
  absolute: Key,
): Generator<Finding> {
  if (d[relative] === undefined && d[absolute] === undefined) {
    yield impossible(relative, 'MISSING_KEY', `is missing: give ${relative} or ${absolute}.`);
  }
  if (d[relative] !== undefined && d[absolute] !== undefined) {
    yield impossible(
      absolute,
      'BOTH_FORMS',
      `is given beside ${relative}: the same coefficient twice.`,
      'Keep the form that the datasheet prints and delete the other.',
    );
  }
}

function* currentCoefficient(d: DatasheetEntries): Generator<Finding> {
  const isPercent = d.alpha_isc_pct_per_K !== undefined;
  const field = isPercent ? 'alpha_isc_pct_per_K' : 'alpha_isc_mA_per_K';
  const value = d[field];
  if (value === undefined) return;
  const percent = isPercent ? value : value / 10 / d.isc_A;
  const says = `is ${percent.toPrecision(2)} %/K of isc_A`;
  if (Math.abs(percent) > 0.5) {
    yield impossible(
      field,
      'UNIT_SLIP',
      `${says}; cells lie between -0.02 and 0.2 %/K.`,
      isPercent ? 'It looks like mA/K: write alpha_isc_mA_per_K.' : 'It looks like µA/K.',
    );
  } else if (percent > 0 && percent < 0.005) {
    yield odd(
      field,
      'UNIT_SLIP',
      `${says}; cells usually lie between 0.02 and 0.12 %/K.`,
      isPercent
        ? 'It looks like A/K, or a ratio per kelvin: convert it to %/K.'
        : 'It looks like %/K (then write alpha_isc_pct_per_K) or A/K (then multiply by 1000).',
    );
  } else if (percent < -0.02 || percent > 0.2) {
    yield odd(field, 'ODD_VALUE', `${says}; cells usually lie between 0.02 and 0.12 %/K.`);
  }
}

function* voltageCoefficient(d: DatasheetEntries): Generator<Finding> {
  const isPercent = d.beta_voc_pct_per_K !== undefined;
  const field = isPercent ? 'beta_voc_pct_per_K' : 'beta_voc_mV_per_K';
  const value = d[field];
  if (value === undefined) return;
  const percent = isPercent ? value : value / 10 / d.voc_V;
  const says = `is ${percent.toPrecision(2)} %/K of voc_V`;
  const asVolts = 'If the datasheet says V/K, write beta_voc_mV_per_K, a thousand times as much.';
  if (value >= 0) {
    yield impossible(
      field,
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${value}: open-circuit voltage falls as cells warm.`,
      'Datasheets sometimes print the size alone: write the minus sign.',
    );
  } else if (percent > -0.12) {
    yield impossible(
      field,
      'UNIT_SLIP',
      `${says}, far weaker than any cell.`,
      isPercent
        ? `It looks like V/K, or a ratio per kelvin. ${asVolts}`
        : 'It looks like %/K (then write beta_voc_pct_per_K) or V/K (then multiply by 1000).',
    );
  } else if (percent < -0.8) {
    yield impossible(
      field,
      'UNIT_SLIP',
      `${says}, far stronger than any cell.`,
      isPercent
        ? 'It looks like mV/K: write beta_voc_mV_per_K.'
        : 'It looks like a value for another number of cells, or µV/K.',
    );
  } else if (percent > -0.18 || percent < -0.55) {
    const hint = isPercent && percent > -0.18 ? asVolts : undefined;
    yield odd(field, 'ODD_VALUE', `${says}; cells usually lie between -0.45 and -0.2.`, hint);
  }
}

function* powerCoefficient(d: DatasheetEntries): Generator<Finding> {
  const value = d.gamma_pmp_pct_per_K;
  if (value === undefined) return;
  if (value >= 0) {
    yield impossible(
      'gamma_pmp_pct_per_K',
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${value}: peak power falls as cells warm.`,
      'Datasheets sometimes print the size alone: write the minus sign.',
    );
  } else if (value > -0.1 || value < -0.8) {
    yield odd(
      'gamma_pmp_pct_per_K',
      'ODD_VALUE',
      `is ${value} %/K; modules usually lie between -0.5 and -0.2 %/K.`,
      value > -0.1 ? 'It looks like a ratio per kelvin.' : 'It looks like W/K.',
    );
  }
}

function* operatingTemperature(d: DatasheetEntries): Generator<Finding> {
  const value = d.noct_C;
  if (value === undefined) return;
  const says = `is ${value} °C; modules usually lie between 40 and 50 °C.`;
  if (value > 200) {
    yield impossible('noct_C', 'UNIT_SLIP', says, 'It looks like kelvin: subtract 273.15.');
  } else if (value < 20 || value > 100) {
    yield impossible('noct_C', 'IMPOSSIBLE_VALUE', says);
  } else if (value < 35 || value > 60) {
    yield odd('noct_C', 'ODD_VALUE', says);
  }
}
