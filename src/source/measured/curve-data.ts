/** A measured curve as the search sees it: sorted, so that the order in the file cannot matter. */
import { Fault } from '../../fault.js';
import type { Amperes, Volts } from '../../quantities.js';

export interface MeasuredPoint {
  readonly voltage: Volts;
  readonly current: Amperes;
  /** Line of the file it stands in, or any number that the caller tells points apart by. */
  readonly line?: number;
}

export interface CurveData {
  /** In rising order of voltage, then of current, then of line. */
  readonly points: readonly MeasuredPoint[];
  readonly voltages: Float64Array;
  readonly currents: Float64Array;
  /** Largest less smallest current. */
  readonly currentSpan: Amperes;
}

/**
 * @throws Fault `MEASURED_CURVE` if a number is not finite, all currents or all voltages are equal,
 * or current rises with voltage, as it does in the convention for loads.
 */
export function curveData(measured: readonly MeasuredPoint[]): CurveData {
  const points = measured.toSorted(
    (a, b) => a.voltage - b.voltage || a.current - b.current || (a.line ?? 0) - (b.line ?? 0),
  );
  for (const { voltage, current, line } of points) {
    if (!(Number.isFinite(voltage) && Number.isFinite(current))) {
      throw refusal(`must be finite, found ${voltage} V and ${current} A.`, line);
    }
  }
  const voltages = Float64Array.from(points, ({ voltage }) => voltage);
  const currents = Float64Array.from(points, ({ current }) => current);
  const currentSpan = currents.reduce(most, -Infinity) - currents.reduce(least, Infinity);
  const first = voltages[0] ?? 0;
  const last = voltages.at(-1) ?? 0;
  if (!(last > first && currentSpan > 0)) {
    throw refusal('needs points at different voltages and currents: these all lie on one line.');
  }
  if (trend(voltages, currents) > 0) throw againstConvention();
  return { points, voltages, currents, currentSpan };
}

/** A curve that makes no sense as a whole. */
export const refusal = (message: string, line?: number, hint?: string): Fault =>
  new Fault('input', {
    code: 'MEASURED_CURVE',
    ...(line === undefined ? {} : { line }),
    message: line === undefined ? `the curve ${message}` : `the point ${message}`,
    ...(hint === undefined ? {} : { hint }),
  });

const againstConvention = (): Fault =>
  refusal(
    'has currents that rise with voltage; expected a generator: positive current at short ' +
      'circuit that falls to zero at open circuit.',
    undefined,
    'If the instrument counts currents as a load does, turn their sign (--negate-current). ' +
      'If the columns are swapped, name them (--voltage-column, --current-column).',
  );

/** Sum of products of the departures from the means: the sign of the straight line's slope. */
function trend(voltages: Float64Array, currents: Float64Array): number {
  const middle = mean(voltages);
  const level = mean(currents);
  let sum = 0;
  for (let i = 0; i < voltages.length; i++) {
    sum += (voltages[i]! - middle) * (currents[i]! - level);
  }
  return sum;
}

const mean = (values: Float64Array): number =>
  values.reduce((total, value) => total + value, 0) / values.length;
const most = (a: number, b: number): number => Math.max(a, b);
const least = (a: number, b: number): number => Math.min(a, b);

/** The points whose place is kept. */
export function subset(data: CurveData, isKept: (index: number) => boolean): CurveData {
  return curveData(data.points.filter((_, index) => isKept(index)));
}
