import { argumentFault } from '../fault.js';
import type { Curve, Peak } from './curve.js';

/** A point of a curve; the same fields as a peak, without the claim. */
export type CurvePoint = Peak;

/**
 * Points at even voltages from short circuit to open circuit, where the current is exactly zero.
 * @param count From 2 to 100,000.
 * @throws Fault `ARGUMENT`.
 */
export function sampleCurve(curve: Curve, count: number): CurvePoint[] {
  if (!(Number.isInteger(count) && count >= 2 && count <= 100_000)) {
    throw argumentFault('count', 'a whole number from 2 to 100,000', count);
  }
  return Array.from({ length: count }, (_, index) => {
    const voltage = (curve.openCircuitVoltage * index) / (count - 1);
    const current = index === count - 1 ? 0 : curve.current(voltage);
    return { voltage, current, power: voltage * current };
  });
}
