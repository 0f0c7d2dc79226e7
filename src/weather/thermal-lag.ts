/**
 * How cells lag behind the irradiance that heats them: a first-order lag on the irradiance, patterned
 * on the cell temperature of EN 50530 (from memory; no conformity claimed):
 *
 *     T = T_air + T_0 + k / (1 + tau s) G,   T_0 = -3 °C, k = 0.03 K m²/W, tau = 300 s
 *
 * Whether the standard's dynamic tests use the lag or hold the temperature was not established: it
 * is for the caller to choose. The lagged irradiance also serves the models of
 * `cell-temperature.ts`, in place of the irradiance itself.
 */
import { argumentFault } from '../fault.js';
import { expm1 } from '../numeric/exponential.js';
import type { Kelvin, Seconds, WattsPerSquareMetre } from '../quantities.js';

/**
 * The whole state of the lag: the irradiance that, held for ever, would keep the cells as warm as
 * they are. At rest it is the irradiance itself.
 */
export type LaggedIrradiance = WattsPerSquareMetre;

/** How cells follow irradiance. */
export interface ThermalLag {
  /** T_0: above the air in the dark; negative where cells radiate to the sky. */
  readonly offset: Kelvin;
  /** k, in K m²/W. */
  readonly coefficient: number;
  /** tau: after this time 63 % of a step has come through. */
  readonly timeConstant: Seconds;
}

/** From memory; published Ross coefficients, 0.02 to 0.06 K m²/W, make k plausible. */
export const EN_50530_THERMAL_LAG: ThermalLag = {
  offset: -3,
  coefficient: 0.03,
  timeConstant: 300,
};

/**
 * The state after `duration`, over which irradiance goes straight from `start` to `end`: the exact
 * solution, so steps may be long, and splitting one changes nothing but rounding.
 *
 *     x1 = x0 + (G0 - x0) E + (G1 - G0) (1 - E / r),   E = 1 - e^(-r),  r = duration / tau
 *
 * Accuracy: within 1e-15 of the largest of the three irradiances.
 * @param state, start, end W/m², finite.
 * @param duration 0 or more; infinite is at rest, where `start` is `end`.
 * @param timeConstant tau, 0 or more; 0 is no lag.
 * @throws Fault `ARGUMENT`.
 */
export function advanceLag(
  state: LaggedIrradiance,
  start: WattsPerSquareMetre,
  end: WattsPerSquareMetre,
  duration: Seconds,
  timeConstant: Seconds,
): LaggedIrradiance {
  if (!Number.isFinite(state)) throw argumentFault('state', 'finite', state);
  if (!Number.isFinite(start)) throw argumentFault('start', 'finite', start);
  if (!Number.isFinite(end)) throw argumentFault('end', 'finite', end);
  if (!(duration >= 0)) throw argumentFault('duration', '0 s or more', duration);
  if (!(timeConstant >= 0 && timeConstant < Infinity)) {
    throw argumentFault('timeConstant', 'finite and 0 s or more', timeConstant);
  }
  if (duration === 0) return state;
  const steps = duration / timeConstant;
  const share = -expm1(-steps);
  // Also where the time constant is 0: share is 1 and steps is infinite. So few steps that their
  // share is 0 leave the state as it is.
  const lagging = share === 0 ? 0 : 1 - share / steps;
  return state + (start - state) * share + (end - start) * lagging;
}

/** Cell temperature of a state of the lag. */
export const laggedTemperature = (
  air: Kelvin,
  state: LaggedIrradiance,
  lag: ThermalLag = EN_50530_THERMAL_LAG,
): Kelvin => air + lag.offset + lag.coefficient * state;
