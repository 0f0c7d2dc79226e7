/** Whether the points and slopes of a datasheet can lie on one curve of so many cells. */
import type { DatasheetEntries } from '../datasheet-definition.js';
import { TECHNOLOGIES } from '../technology.js';
import { impossible, type Finding } from './finding.js';

export function* pointFindings(d: DatasheetEntries): Generator<Finding> {
  const before = [...peakInsideCurve(d)];
  yield* before;
  yield* cellVoltage(d);
  // The other bounds follow from the points.
  if (before.length > 0) return;
  yield* fillFactor(d);
  yield* slopeAtShortCircuit(d);
  yield* slopeAtOpenCircuit(d);
}

function* peakInsideCurve(d: DatasheetEntries): Generator<Finding> {
  if (d.vmp_V >= d.voc_V) {
    yield impossible(
      'vmp_V',
      'IMPOSSIBLE_VALUE',
      `must be below voc_V (${d.voc_V} V), found ${d.vmp_V} V: the peak lies left of open circuit.`,
      'Are the two swapped?',
    );
  }
  if (d.imp_A >= d.isc_A) {
    yield impossible(
      'imp_A',
      'IMPOSSIBLE_VALUE',
      `must be below isc_A (${d.isc_A} A), found ${d.imp_A} A: current falls with voltage.`,
      'Are the two swapped?',
    );
  }
}

function* cellVoltage(d: DatasheetEntries): Generator<Finding> {
  const { title, cellVoltage: plausible } = TECHNOLOGIES[d.technology];
  const [least, most] = plausible;
  const perCell = d.voc_V / d.cells_in_series;
  if (perCell >= least && perCell <= most) return;
  const usual = d.technology.endsWith('-si') ? 0.65 : (least + most) / 2;
  yield impossible(
    'cells_in_series',
    'CELL_VOLTAGE',
    `gives ${perCell.toFixed(3)} V of voc_V for each cell; ${title} lies between ${least} and ` +
      `${most} V.`,
    `About ${Math.max(Math.round(d.voc_V / usual), 1)} cells in series would fit. Half-cut ` +
      'modules count cells in series, not cell pieces; parallel groups do not add.',
  );
}

function* fillFactor(d: DatasheetEntries): Generator<Finding> {
  const fillFactor = (d.vmp_V * d.imp_A) / (d.voc_V * d.isc_A);
  if (fillFactor >= 0.3 && fillFactor <= 0.9) return;
  yield impossible(
    'vmp_V',
    'FILL_FACTOR',
    `gives a fill factor (vmp_V imp_A) / (voc_V isc_A) of ${fillFactor.toFixed(3)}; ` +
      'PV modules lie between 0.3 and 0.9.',
    'One of the four values probably has another unit, or belongs to another column.',
  );
}

const SIGN_HINT = 'Current falls with voltage: write the slope as a negative number.';

function* slopeAtShortCircuit(d: DatasheetEntries): Generator<Finding> {
  const slope = d.slope_at_isc_A_per_V;
  if (slope === undefined) return;
  const steepest = (d.imp_A - d.isc_A) / d.vmp_V;
  if (slope > 0) {
    yield impossible(
      'slope_at_isc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be 0 or below, found ${slope}.`,
      SIGN_HINT,
    );
  } else if (slope < steepest) {
    yield impossible(
      'slope_at_isc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be at least ${steepest.toPrecision(4)} A/V, the mean slope from short circuit to ` +
        `the peak, found ${slope}: the curve bends downward only.`,
      'It looks like the inverse, in V/A, or like mA/V.',
    );
  }
}

function* slopeAtOpenCircuit(d: DatasheetEntries): Generator<Finding> {
  const slope = d.slope_at_voc_A_per_V;
  if (slope === undefined) return;
  const flattest = -d.imp_A / (d.voc_V - d.vmp_V);
  if (slope >= 0) {
    yield impossible(
      'slope_at_voc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be below 0, found ${slope}.`,
      SIGN_HINT,
    );
  } else if (slope > flattest) {
    yield impossible(
      'slope_at_voc_A_per_V',
      'IMPOSSIBLE_VALUE',
      `must be at most ${flattest.toPrecision(4)} A/V, the mean slope from the peak to open ` +
        `circuit, found ${slope}: the curve bends downward only.`,
      'It looks like the inverse, in V/A.',
    );
  }
}
