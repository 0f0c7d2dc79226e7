/** What `fit` prints, as tables and as JSON. */
import type { Datasheet, Fit } from '../index.js';
import type { InputDocument } from '../file/document.js';
import type { FifthChoice } from '../source/fit/fifth-condition.js';
import { roundingOfDocument } from '../source/fit/printed-rounding.js';
import { roundingBounds, type RoundingBounds } from '../source/fit/rounding-bounds.js';
import { colours, figure, percentText, printLine, printTable } from './print.js';

/** What the rounding of the datasheet does to the parameters; of the exact method only. */
export function boundsOf(
  document: InputDocument,
  datasheet: Datasheet,
  fit: Fit,
  choice: FifthChoice,
): RoundingBounds | undefined {
  if (fit.method !== 'exact' || !fit.solved) return undefined;
  return roundingBounds(datasheet, roundingOfDocument(document), choice);
}

export function printFit(
  fit: Fit,
  bounds: RoundingBounds | undefined,
  withCandidates: boolean,
): void {
  printLine(colours.bold(fit.module.name));
  printLine(`${METHOD_TITLES[fit.method]}: ${fit.account}.`);
  printLine();
  printParameters(fit, bounds);
  printLine();
  printTable(
    ['datasheet number', 'datasheet', 'model', 'miss'],
    fit.agreements.map(({ field, datasheet, model, miss }) => [
      field,
      figure(datasheet, 6),
      figure(model, 6),
      percentText(miss),
    ]),
  );
  printLine();
  printTable(
    ['common practice', 'value', 'holds'],
    fit.practice.map(({ says, value, holds }) => [says, figure(value), holds ? 'yes' : 'no']),
  );
  if (withCandidates) {
    printLine();
    printCandidates(fit);
  }
}

const METHOD_TITLES = {
  exact: 'Exact solution',
  simultaneous: 'Simultaneous solution',
  sweep: 'Sweep of the ideality factor',
} as const;

function printParameters(fit: Fit, bounds: RoundingBounds | undefined): void {
  const rows = parameterRows(fit, bounds);
  if (bounds === undefined) {
    printTable(
      ['parameter at STC', '', ''],
      rows.map(({ title, value, unit }) => [title, figure(value, 6), unit]),
    );
    return;
  }
  printTable(
    ['parameter at STC', '', '', 'rounding alone: from', 'to'],
    rows.map(({ title, value, unit, low, high }) => [
      ...[title, figure(value, 6), unit],
      ...[low, high].map((end) => (end === undefined ? '' : figure(end))),
    ]),
  );
  if (!bounds.guaranteed) {
    printLine('  Only the extreme roundings were tried: some between may pass these bounds.');
  }
}

interface ParameterRow {
  readonly title: string;
  readonly key: string;
  readonly value: number;
  readonly unit: string;
  readonly low?: number;
  readonly high?: number;
}

function parameterRows(
  { diode, ideality }: Fit,
  bounds: RoundingBounds | undefined,
): readonly ParameterRow[] {
  const ends = (bound: readonly [number, number] | undefined): { low?: number; high?: number } =>
    bound === undefined ? {} : { low: bound[0], high: bound[1] };
  const shunt = bounds?.shuntConductance;
  return [
    {
      ...{ title: 'photocurrent Iph', key: 'photocurrent_A', unit: 'A' },
      value: diode.photocurrent,
      ...ends(bounds?.photocurrent),
    },
    {
      ...{ title: 'saturation current I0', key: 'saturation_current_A', unit: 'A' },
      value: diode.saturationCurrent,
      ...ends(bounds?.saturationCurrent),
    },
    {
      ...{ title: 'ideality factor A', key: 'ideality_factor', unit: '' },
      value: ideality,
      ...ends(bounds?.ideality),
    },
    {
      ...{ title: 'series resistance Rs', key: 'series_resistance_ohm', unit: 'ohm' },
      value: diode.seriesResistance,
      ...ends(bounds?.seriesResistance),
    },
    {
      ...{ title: 'shunt resistance Rsh', key: 'shunt_resistance_ohm', unit: 'ohm' },
      value: 1 / diode.shuntConductance,
      ...ends(shunt && [1 / shunt[1], 1 / shunt[0]]),
    },
  ];
}

function printCandidates(fit: Fit): void {
  printTable(
    ['A', 'I0 A', 'Rs ohm', 'Voc miss', 'Vmp miss', 'Imp miss', 'Pmp miss', 'overall'],
    fit.candidates.map((row) => [
      row.ideality.toFixed(3),
      figure(row.diode.saturationCurrent, 6),
      row.feasible ? figure(row.diode.seriesResistance, 5) : 'negative',
      ...[row.openCircuitMiss, row.peakVoltageMiss, row.peakCurrentMiss].map(percentText),
      percentText(row.peakPowerMiss),
      percentText(row.badness),
    ]),
  );
}

/** Every method in a column: parameters, then what each misses of the datasheet. */
export function printComparison(fits: readonly Fit[]): void {
  const [first] = fits;
  printLine(colours.bold(first!.module.name));
  for (const { method, solved, account } of fits) {
    printLine(
      `${METHOD_TITLES[method]}${solved ? '' : ' (no solution; the nearest)'}: ${account}.`,
    );
  }
  printLine();
  const methods = fits.map(({ method }) => method);
  const columns = fits.map((fit) => parameterRows(fit, undefined));
  printTable(
    ['parameter at STC', ...methods, ''],
    columns[0]!.map(({ title, unit }, row) => [
      title,
      ...columns.map((rows) => figure(rows[row]!.value, 6)),
      unit,
    ]),
  );
  printLine();
  printTable(
    ['datasheet number', 'datasheet', ...methods.map((method) => `${method} misses`)],
    first!.agreements.map(({ field, datasheet }, row) => [
      field,
      figure(datasheet, 6),
      ...fits.map(({ agreements }) => percentText(agreements[row]!.miss)),
    ]),
  );
}

export const comparisonAsJson = (fits: readonly Fit[]): unknown => ({
  name: fits[0]!.module.name,
  methods: fits.map((fit) => fitAsJson({ ...fit, candidates: [] }, undefined)),
});

export function fitAsJson(fit: Fit, bounds: RoundingBounds | undefined): unknown {
  const { module, method, solved, account, advice, agreements, practice } = fit;
  const rows = parameterRows(fit, bounds);
  const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);
  return {
    name: module.name,
    method,
    solved,
    account,
    ...(advice === undefined ? {} : { advice }),
    parameters: Object.fromEntries(rows.map(({ key, value }) => [key, finite(value)])),
    ...(bounds === undefined
      ? {}
      : {
          rounding: {
            guaranteed: bounds.guaranteed,
            ...Object.fromEntries(
              rows.map(({ key, low, high }) => [key, [finite(low!), finite(high!)]]),
            ),
          },
        }),
    ...(fit.feasible === undefined ? {} : { feasible_ideality: fit.feasible }),
    ...(fit.fifth === undefined ? {} : { fifth_condition: fit.fifth }),
    ...(fit.remedies === undefined ? {} : { remedies: fit.remedies }),
    agreements,
    practice,
    candidates: fit.candidates,
  };
}
