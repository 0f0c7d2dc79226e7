/**
 * What a datasheet cannot say, and what it says only by a slip of the pen. Impossible values are
 * errors, odd ones warnings; each tells why.
 */
import type { Problem } from '../fault.js';
import { fieldProblem } from '../file/definition.js';
import type { InputDocument } from '../file/document.js';
import type { DatasheetEntries } from './datasheet-file.js';
import { TECHNOLOGIES } from './technology.js';

export interface DatasheetProblems {
  readonly errors: readonly Problem[];
  readonly warnings: readonly Problem[];
}

type Finding = { readonly severity: 'error' | 'warning' } & FindingText;

interface FindingText {
  readonly field: keyof DatasheetEntries;
  readonly code: string;
  readonly message: string;
  readonly hint?: string;
}

export function datasheetProblems(
  entries: DatasheetEntries,
  document: InputDocument,
): DatasheetProblems {
  const findings = [
    ...coefficientForms(entries),
    ...peakInsideCurve(entries),
    ...cellVoltage(entries),
    ...voltageCoefficient(entries),
    ...currentCoefficient(entries),
    ...powerCoefficient(entries),
    ...slopes(entries),
    ...operatingTemperature(entries),
  ];
  const problems = (wanted: Finding['severity']): Problem[] =>
    findings
      .filter(({ severity }) => severity === wanted)
      .map(({ field, code, message, hint }) =>
        fieldProblem(document, [field], {
          code,
          message,
          ...(hint === undefined ? {} : { hint }),
        }),
      );
  return { errors: problems('error'), warnings: problems('warning') };
}

const error = (
  field: keyof DatasheetEntries,
  code: string,
  message: string,
  hint?: string,
): Finding => ({
  severity: 'error',
  field,
  code,
  message,
  ...(hint === undefined ? {} : { hint }),
});

const warning = (
  field: keyof DatasheetEntries,
  code: string,
  message: string,
  hint?: string,
): Finding => ({ ...error(field, code, message, hint), severity: 'warning' });

function* coefficientForms(d: DatasheetEntries): Generator<Finding> {
  const pairs = [
    ['alpha_isc_pct_per_K', 'alpha_isc_mA_per_K'],
    ['beta_voc_pct_per_K', 'beta_voc_mV_per_K'],
  ] as const;
  for (const [relative, absolute] of pairs) {
    if (d[relative] === undefined && d[absolute] === undefined) {
      yield error(relative, 'MISSING_KEY', `is missing: give ${relative} or ${absolute}.`);
    }
    if (d[relative] !== undefined && d[absolute] !== undefined) {
      yield error(
        absolute,
        'BOTH_FORMS',
        `is given beside ${relative}: the same coefficient twice.`,
        'Keep the form that the datasheet prints and delete the other.',
      );
    }
  }
}

function* peakInsideCurve(d: DatasheetEntries): Generator<Finding> {
  if (d.vmp_V >= d.voc_V) {
    yield error(
      'vmp_V',
      'IMPOSSIBLE_VALUE',
      `must be below voc_V (${d.voc_V} V), found ${d.vmp_V} V: the peak lies left of open circuit.`,
      'Are the two swapped?',
    );
  }
  if (d.imp_A >= d.isc_A) {
    yield error(
      'imp_A',
      'IMPOSSIBLE_VALUE',
      `must be below isc_A (${d.isc_A} A), found ${d.imp_A} A: current falls with voltage.`,
      'Are the two swapped?',
    );
  }
  if (d.vmp_V >= d.voc_V || d.imp_A >= d.isc_A) return;
  const fillFactor = (d.vmp_V * d.imp_A) / (d.voc_V * d.isc_A);
  if (fillFactor < 0.3 || fillFactor > 0.9) {
    yield error(
      'vmp_V',
      'FILL_FACTOR',
      `gives a fill factor (vmp_V imp_A) / (voc_V isc_A) of ${fillFactor.toFixed(3)}; ` +
        'PV modules lie between 0.3 and 0.9.',
      'One of the four values probably has another unit, or belongs to another column.',
    );
  }
}

function* cellVoltage(d: DatasheetEntries): Generator<Finding> {
  const {
    title,
    cellVoltage: [least, most],
  } = TECHNOLOGIES[d.technology];
  const perCell = d.voc_V / d.cells_in_series;
  if (perCell >= least && perCell <= most) return;
  const fitting = Math.round(d.voc_V / (d.technology.endsWith('-si') ? 0.65 : (least + most) / 2));
  yield error(
    'cells_in_series',
    'CELL_VOLTAGE',
    `gives ${perCell.toFixed(3)} V of voc_V for each cell; ${title} lies between ${least} and ` +
      `${most} V.`,
    `About ${Math.max(fitting, 1)} cells in series would fit. Half-cut modules count cells in ` +
      'series, not cell pieces; parallel groups do not add.',
  );
}

function* voltageCoefficient(d: DatasheetEntries): Generator<Finding> {
  const percentForm = d.beta_voc_pct_per_K !== undefined;
  const field = percentForm ? 'beta_voc_pct_per_K' : 'beta_voc_mV_per_K';
  const value = d[field];
  if (value === undefined) return;
  if (value >= 0) {
    yield error(
      field,
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${value}: open-circuit voltage falls as cells warm.`,
      'Datasheets sometimes print the size alone: write the minus sign.',
    );
    return;
  }
  const relative = percentForm ? value : value / 10 / d.voc_V;
  if (relative > -0.05) {
    yield error(
      field,
      'UNIT_SLIP',
      `is ${relative.toPrecision(2)} %/K of voc_V, far weaker than any cell.`,
      percentForm
        ? 'It looks like V/K or a ratio per kelvin: convert it to %/K.'
        : `It looks like %/K or V/K: for %/K write beta_voc_pct_per_K, for V/K multiply by 1000.`,
    );
  } else if (relative < -0.8) {
    yield error(
      field,
      'UNIT_SLIP',
      `is ${relative.toPrecision(2)} %/K of voc_V, far stronger than any cell.`,
      percentForm
        ? 'It looks like mV/K: write beta_voc_mV_per_K.'
        : 'It looks like a value for another number of cells, or in µV/K.',
    );
  }
}

function* currentCoefficient(d: DatasheetEntries): Generator<Finding> {
  const percentForm = d.alpha_isc_pct_per_K !== undefined;
  const field = percentForm ? 'alpha_isc_pct_per_K' : 'alpha_isc_mA_per_K';
  const value = d[field];
  if (value === undefined) return;
  const relative = percentForm ? value : value / 10 / d.isc_A;
  if (Math.abs(relative) > 0.5) {
    yield error(
      field,
      'UNIT_SLIP',
      `is ${relative.toPrecision(2)} %/K of isc_A; cells lie between -0.02 and 0.2 %/K.`,
      percentForm ? 'It looks like mA/K: write alpha_isc_mA_per_K.' : 'It looks like µA/K.',
    );
  } else if (!percentForm && value > 0 && value < 0.2 && relative < 0.005) {
    yield warning(
      field,
      'UNIT_SLIP',
      `is only ${relative.toPrecision(2)} %/K of isc_A.`,
      `${value} looks like %/K: if so, write alpha_isc_pct_per_K.`,
    );
  } else if (relative < -0.02 || relative > 0.2) {
    yield warning(
      field,
      'ODD_VALUE',
      `is ${relative.toPrecision(2)} %/K of isc_A; cells usually lie between 0 and 0.12 %/K.`,
    );
  }
}

function* powerCoefficient(d: DatasheetEntries): Generator<Finding> {
  const gamma = d.gamma_pmp_pct_per_K;
  if (gamma === undefined) return;
  if (gamma > 0) {
    yield error(
      'gamma_pmp_pct_per_K',
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${gamma}: peak power falls as cells warm.`,
      'Datasheets sometimes print the size alone: write the minus sign.',
    );
  } else if (gamma > -0.05 || gamma < -1) {
    yield warning(
      'gamma_pmp_pct_per_K',
      'ODD_VALUE',
      `is ${gamma} %/K; modules usually lie between -0.6 and -0.2 %/K.`,
    );
  }
}

function* slopes(d: DatasheetEntries): Generator<Finding> {
  const signHint = 'Current falls with voltage: write the slope as a negative number.';
  if (d.slope_at_isc_A_per_V !== undefined) {
    const steepest = (d.imp_A - d.isc_A) / d.vmp_V;
    if (d.slope_at_isc_A_per_V > 0) {
      yield error(
        'slope_at_isc_A_per_V',
        'IMPOSSIBLE_VALUE',
        `must be 0 or below, found ${d.slope_at_isc_A_per_V}.`,
        signHint,
      );
    } else if (d.slope_at_isc_A_per_V < steepest) {
      yield error(
        'slope_at_isc_A_per_V',
        'IMPOSSIBLE_VALUE',
        `must be at least ${steepest.toPrecision(4)} A/V, the mean slope from short circuit to ` +
          `the peak, found ${d.slope_at_isc_A_per_V}: the curve bends downward only.`,
      );
    }
  }
  if (d.slope_at_voc_A_per_V === undefined) return;
  const flattest = -d.imp_A / (d.voc_V - d.vmp_V);
  if (d.slope_at_voc_A_per_V >= 0) {
    yield error(
      'slope_at_voc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${d.slope_at_voc_A_per_V}.`,
      signHint,
    );
  } else if (d.slope_at_voc_A_per_V > flattest) {
    yield error(
      'slope_at_voc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be at most ${flattest.toPrecision(4)} A/V, the mean slope from the peak to open ` +
        `circuit, found ${d.slope_at_voc_A_per_V}: the curve bends downward only.`,
      'It looks like the inverse, in V/A.',
    );
  }
}

function* operatingTemperature(d: DatasheetEntries): Generator<Finding> {
  if (d.noct_C === undefined || (d.noct_C >= 35 && d.noct_C <= 60)) return;
  yield warning(
    'noct_C',
    'ODD_VALUE',
    `is ${d.noct_C} °C; modules usually lie between 40 and 50 °C.`,
    d.noct_C > 200 ? 'It looks like kelvin.' : undefined,
  );
}
