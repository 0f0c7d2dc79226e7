import { argumentFault } from '../../fault.js';
import type { Amperes } from '../../quantities.js';
import { checkOperatingPoint, type CurvePoints, type OperatingPoint } from './curve-points.js';
import { FallingPoints } from './falling-points.js';
import type { TranslatedPoints } from './iec-60891.js';

/** A measured curve and the conditions it was measured under. */
export interface MeasuredAt extends OperatingPoint {
  readonly points: CurvePoints;
  /** Read from the points if left out. */
  readonly shortCircuitCurrent?: Amperes;
}

/** A curve between two measured ones, and the conditions it stands for. */
export interface InterpolatedCurve extends OperatingPoint {
  readonly points: TranslatedPoints;
}

/**
 * A curve on the way from one measured curve to another, patterned on procedure 3 of IEC 60891
 * (equations from memory, no conformity claimed). It needs no coefficient of the device.
 *
 *     V3 = Va + c (Vb - Va)      I3 = Ia + c (Ib - Ia),   Ib - Ia = Isc_b - Isc_a
 *     G3 = Ga + c (Gb - Ga)      T3 = Ta + c (Tb - Ta)
 *
 * Each point of a is paired with the point of b at its own current plus the difference of the
 * short-circuit currents, on the straight lines between the points of b; noise in b is levelled as
 * `FallingPoints` says. A point of a for which b was not measured far enough is left out.
 * `share` 0 returns the points of a exactly.
 *
 * Error against the single-diode model of a 54-cell silicon module, 400 points a curve: halfway
 * between 1000 W/m² at 25 °C and 600 at 47, 0.2 % of the power at the peak and 0.3 % of Isc; halfway
 * from 1000 to 200 W/m² at 25 °C, 0.2 % and 0.5 %. Extrapolated as far again from 1000 at 25 past 800
 * at 35, 0.4 % and 1.9 %.
 *
 * @param share c: 0 at a, 1 at b. Outside of 0 to 1 it extrapolates, which distorts the curve.
 * @returns Points in the order of those of a.
 * @throws Fault `ARGUMENT` for points or conditions out of range, those of the result included, or
 * a share that is not finite; `NOT_COVERED` where a short-circuit current is neither given nor among
 * the points, or no point of a has a partner.
 */
export function interpolateByProcedure3(
  a: MeasuredAt,
  b: MeasuredAt,
  share: number,
): InterpolatedCurve {
  checkOperatingPoint(a, 'a');
  checkOperatingPoint(b, 'b');
  if (!Number.isFinite(share)) throw argumentFault('share', 'finite', share);
  const at = {
    irradiance: a.irradiance + share * (b.irradiance - a.irradiance),
    cellTemperature: a.cellTemperature + share * (b.cellTemperature - a.cellTemperature),
  };
  if (!(at.irradiance > 0)) {
    throw argumentFault('share', 'such that irradiance stays above 0', share);
  }
  checkOperatingPoint(at, 'result');
  return { ...at, points: pointsBetween(a, b, share) };
}

/**
 * The share at which the way from a to b passes an irradiance.
 * @throws Fault `ARGUMENT` where both curves have the same irradiance.
 */
export function shareAtIrradiance(
  a: OperatingPoint,
  b: OperatingPoint,
  irradiance: number,
): number {
  if (a.irradiance === b.irradiance) {
    throw argumentFault('b.irradiance', `other than ${a.irradiance} W/m² of a`, b.irradiance);
  }
  return (irradiance - a.irradiance) / (b.irradiance - a.irradiance);
}

function pointsBetween(a: MeasuredAt, b: MeasuredAt, share: number): TranslatedPoints {
  const fromA = new FallingPoints(a.points, 'a.points');
  const fromB = new FallingPoints(b.points, 'b.points');
  const { voltage, current } = a.points;
  if (share === 0)
    return { voltage: Float64Array.from(voltage), current: Float64Array.from(current) };
  const difference =
    (b.shortCircuitCurrent ?? fromB.shortCircuitCurrent) -
    (a.shortCircuitCurrent ?? fromA.shortCircuitCurrent);
  const pairs: [number, number][] = [];
  for (let index = 0; index < voltage.length; index++) {
    const [va, ia] = [voltage[index]!, current[index]!];
    const vb = fromB.voltageAt(ia + difference);
    if (vb !== undefined) pairs.push([va + share * (vb - va), ia + share * difference]);
  }
  if (pairs.length === 0) throw fromB.beyond('any current of a, moved by Isc_b - Isc_a');
  return {
    voltage: Float64Array.from(pairs, ([v]) => v),
    current: Float64Array.from(pairs, ([, i]) => i),
  };
}
