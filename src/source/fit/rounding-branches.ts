/** The fifth condition and the ends of the feasible range, as branches of curves over a box. */
import { Interval } from '../../numeric/interval.js';
import { findRoot } from '../../numeric/root.js';
import { STC_TEMPERATURE } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import type { SingleDiode } from '../single-diode.js';
import {
  exactCurve,
  hasExactCurves,
  spanOfIdealityVoltage,
  spanWithoutSeriesResistance,
  spanWithoutShunt,
  type ThreePoints,
} from './exact-curves.js';
import { encloseFifthResidual } from './exact-enclosure.js';
import { limitsFor } from './feasible-range.js';
import {
  DEFAULT_SPAN,
  fifthCondition,
  type FifthChoice,
  type FifthCondition,
} from './fifth-condition.js';
import { idealityVoltageAtStc } from './outcome.js';
import type { DatasheetRounding } from './printed-rounding.js';
import {
  pointsOf,
  type Branch,
  type DatasheetBox,
  type DatasheetPoint,
  type ParameterIntervals,
} from './rounding-enclosure.js';

/** The datasheets that print alike, by the numbers that a fifth condition makes use of. */
export function roundingBox(
  datasheet: Datasheet,
  rounding: DatasheetRounding,
  condition: FifthCondition,
): DatasheetBox {
  const around = (centre: number, radius: number): Interval =>
    radius === 0 ? Interval.point(centre) : Interval.around(centre, radius);
  return [
    around(datasheet.shortCircuitCurrent, rounding.shortCircuitCurrent),
    around(datasheet.openCircuitVoltage, rounding.openCircuitVoltage),
    around(datasheet.peakCurrent, rounding.peakCurrent),
    around(datasheet.peakVoltage, rounding.peakVoltage),
    around(datasheet.shortCircuitCoefficient, rounding.shortCircuitCoefficient),
    around(condition.wanted, roundingOfWanted(rounding, condition)),
  ];
}

function roundingOfWanted(rounding: DatasheetRounding, { name }: FifthCondition): number {
  switch (name) {
    case 'beta':
      return rounding.openCircuitCoefficient;
    case 'gamma':
      return rounding.peakPowerCoefficient ?? 0;
    case 'slope-at-isc':
      return rounding.slopeAtShortCircuit ?? 0;
    case 'slope-at-voc':
      return rounding.slopeAtOpenCircuit ?? 0;
    // Chosen, not printed.
    case 'typical':
    case 'ideality':
      return 0;
  }
}

/** The datasheet with the numbers of a point. */
export function datasheetAt(
  datasheet: Datasheet,
  [isc, voc, imp, vmp, alpha, wanted]: DatasheetPoint,
  name: FifthCondition['name'],
): Datasheet {
  const numbers = {
    shortCircuitCurrent: isc!,
    openCircuitVoltage: voc!,
    peakCurrent: imp!,
    peakVoltage: vmp!,
    shortCircuitCoefficient: alpha!,
  };
  switch (name) {
    case 'beta':
      return { ...datasheet, ...numbers, openCircuitCoefficient: wanted! };
    case 'gamma':
      return { ...datasheet, ...numbers, peakPowerCoefficient: wanted! };
    case 'slope-at-isc':
      return { ...datasheet, ...numbers, slopeAtShortCircuit: wanted! };
    case 'slope-at-voc':
      return { ...datasheet, ...numbers, slopeAtOpenCircuit: wanted! };
    case 'typical':
    case 'ideality':
      return { ...datasheet, ...numbers };
  }
}

/**
 * The curves that meet the condition, feasible or not.
 * @param name Of the condition; that of peak power is not enclosed.
 * @param fitted The curve of the datasheet itself, near which the others are looked for.
 */
export function conditionBranch(
  datasheet: Datasheet,
  name: Exclude<FifthCondition['name'], 'gamma'>,
  choice: FifthChoice,
  fitted: SingleDiode,
): Branch {
  const temperature = STC_TEMPERATURE + (choice.span ?? DEFAULT_SPAN);
  const perFactor = idealityVoltageAtStc(datasheet, 1);
  const { openCircuitVoltage, peakVoltage, peakCurrent } = datasheet;
  const drop = openCircuitVoltage - peakVoltage - peakCurrent * fitted.seriesResistance;
  const near = drop / fitted.idealityVoltage;
  return {
    residual: (curve) =>
      encloseFifthResidual(curve, name, datasheet.technology, temperature, perFactor),
    span: onFamily((points, point) => {
      const condition = fifthCondition(datasheetAt(datasheet, point, name), choice);
      return rootNear((span) => condition.residual(exactCurve(points, span)), near);
    }),
  };
}

/** An end of the feasible range. */
export interface RangeEndBranch extends Branch {
  /** Below zero where parameters are past this end. */
  reserve(parameters: ParameterIntervals): Interval;
}

/** @param asked The A asked for, which widens the range. */
export function rangeEnds(datasheet: Datasheet, asked: number | undefined): RangeEndBranch[] {
  const [least, most] = limitsFor(datasheet, asked).map((ideality) =>
    idealityVoltageAtStc(datasheet, ideality),
  ) as [number, number];
  return [
    {
      residual: ({ shuntConductance }) => shuntConductance,
      span: onFamily(spanWithoutShunt),
      reserve: ({ shuntConductance }) => shuntConductance,
    },
    {
      residual: ({ seriesResistance }) => seriesResistance,
      span: onFamily(spanWithoutSeriesResistance),
      reserve: ({ seriesResistance }) => seriesResistance,
    },
    {
      residual: ({ idealityVoltage }) => idealityVoltage.shifted(-least),
      span: onFamily((points) => spanOfIdealityVoltage(points, least)),
      reserve: ({ idealityVoltage }) => idealityVoltage.minus(Interval.point(least)),
    },
    {
      residual: ({ idealityVoltage }) => idealityVoltage.shifted(-most),
      span: onFamily((points) => spanOfIdealityVoltage(points, most)),
      reserve: ({ idealityVoltage }) => Interval.point(most).minus(idealityVoltage),
    },
  ];
}

const onFamily =
  (span: (points: ThreePoints, point: DatasheetPoint) => number | undefined) =>
  (point: DatasheetPoint): number => {
    const points = pointsOf(point);
    return hasExactCurves(points) ? (span(points, point) ?? NaN) : NaN;
  };

/** A root close to a point, by widening a bracket around it; NaN if there is none within a factor 6. */
function rootNear(f: (x: number) => number, near: number): number {
  for (let reach = 1.02; reach < 6; reach = 1 + 2 * (reach - 1)) {
    const found = findRoot(f, near / reach, near * reach);
    if (found.status === 'converged') return found.root;
  }
  return NaN;
}
