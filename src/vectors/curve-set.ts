import { Fault } from '../fault.js';
import type { Quantizer } from '../fixed/quantizer.js';
import { toCelsius, type Conditions } from '../quantities.js';
import { globalPeak, type Curve, type Peak, type Source } from '../source/curve.js';
import { VoltageGrid } from './voltage-grid.js';
import {
  conditionColumns,
  INDEX_FORMAT,
  keyPointColumns,
  layOut,
  peakColumns,
  type ColumnWish,
  type Product,
  type ProductFormats,
  type Section,
} from './product.js';

export interface CurveSetPlan {
  readonly name: string;
  readonly source: Source;
  readonly conditions: readonly Conditions[];
  readonly points: number;
  readonly formats: ProductFormats;
}

/**
 * N-point I-V tables at chosen conditions, each with Isc, Voc and every peak. Voltages are placed
 * on the code grid; each current is the model's at the voltage that its code stands for.
 * @throws Fault `TOO_FEW_CODES`, or `VALUE_OUT_OF_RANGE` from a format that refuses.
 */
export function curveSet(plan: CurveSetPlan): Product {
  const { formats, source, points } = plan;
  const pointLayout = layOut([
    { name: 'voltage', quantity: 'voltage', format: formats.voltage },
    { name: 'current', quantity: 'current', format: formats.current },
  ]);
  const voltage = pointLayout.columns[0]!.quantizer;
  const tables = plan.conditions.map((conditions) => tabulate(source, conditions, points, voltage));
  const curveLayout = layOut([
    ...conditionColumns(plan.conditions[0]?.irradiance.length ?? 1, formats),
    ...keyPointColumns(formats),
    ...indexColumns(),
  ]);
  const sections = [
    curveSection(tables, points, curveLayout),
    pointSection(tables, points, pointLayout),
    peakSection(tables, layOut(peakColumns(formats))),
  ];
  return { name: plan.name, kind: 'curve-set', sections };
}

type Layout = Pick<Section, 'columns' | 'recordSize'>;

interface CurveTable {
  readonly conditions: Conditions;
  readonly curve: Curve;
  readonly peaks: readonly Peak[];
  readonly grid: VoltageGrid;
}

function tabulate(
  source: Source,
  conditions: Conditions,
  points: number,
  voltage: Quantizer,
): CurveTable {
  const curve = source.at(conditions);
  const peaks = curve.peaks();
  const grid = atConditions(
    conditions,
    () => new VoltageGrid(curve.openCircuitVoltage, points, voltage, peaks),
  );
  return { conditions, curve, peaks, grid };
}

function curveSection(tables: readonly CurveTable[], points: number, layout: Layout): Section {
  const firstPeaks = runningTotals(tables.map(({ peaks }) => peaks.length));
  return {
    tag: 'CURV',
    noun: 'curve',
    ...layout,
    count: tables.length,
    values: (index, into) => {
      into.set(curveValues(tables[index]!, index * points, points, firstPeaks[index]!));
    },
  };
}

function pointSection(tables: readonly CurveTable[], points: number, layout: Layout): Section {
  const voltage = layout.columns[0]!.quantizer;
  return {
    tag: 'POIN',
    noun: 'point',
    ...layout,
    count: tables.length * points,
    values: (index, into) => {
      const { curve, grid } = tables[Math.floor(index / points)]!;
      const volts = voltage.decode(grid.code(index % points));
      into[0] = volts;
      // Rounding may leave the last current a hair below zero.
      into[1] = Math.max(curve.current(volts), 0);
    },
  };
}

function peakSection(tables: readonly CurveTable[], layout: Layout): Section {
  const peaks = tables.flatMap((table) => table.peaks);
  return {
    tag: 'PEAK',
    noun: 'peak',
    ...layout,
    count: peaks.length,
    values: (index, into) => {
      const peak = peaks[index]!;
      into[0] = peak.voltage;
      into[1] = peak.current;
      into[2] = peak.power;
    },
  };
}

const indexColumns = (): ColumnWish[] => [
  { name: 'first_point', quantity: 'firstPoint', format: INDEX_FORMAT },
  { name: 'point_count', quantity: 'pointCount', format: INDEX_FORMAT },
  { name: 'first_peak', quantity: 'firstPeak', format: INDEX_FORMAT },
  { name: 'peak_count', quantity: 'peakCount', format: INDEX_FORMAT },
  { name: 'global_peak', quantity: 'globalPeak', format: INDEX_FORMAT },
];

function curveValues(
  { conditions, curve, peaks }: CurveTable,
  firstPoint: number,
  points: number,
  firstPeak: number,
): number[] {
  const { irradiance, cellTemperature } = conditions;
  const groups = Array.from({ length: irradiance.length }, (_, group) => [
    irradiance[group]!,
    toCelsius(cellTemperature[group]!),
  ]).flat();
  const best = peaks.indexOf(globalPeak(peaks));
  const { shortCircuitCurrent, openCircuitVoltage } = curve;
  return [
    ...groups,
    shortCircuitCurrent,
    openCircuitVoltage,
    ...[firstPoint, points, firstPeak, peaks.length, firstPeak + best],
  ];
}

/** For each entry, the sum of those before it. */
function runningTotals(counts: readonly number[]): number[] {
  let total = 0;
  return counts.map((count) => {
    const before = total;
    total += count;
    return before;
  });
}

// A Fault from deep inside does not know which curve it was about.
function atConditions<T>(conditions: Conditions, build: () => T): T {
  try {
    return build();
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    const celsius = toCelsius(conditions.cellTemperature[0]!);
    const which = `At ${conditions.irradiance[0]!} W/m² and ${celsius.toFixed(1)} °C: `;
    throw new Fault(
      error.kind,
      error.problems.map((problem) => ({ ...problem, message: which + problem.message })),
    );
  }
}
