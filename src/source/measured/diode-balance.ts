/**
 * The one- or two-diode equation as a function of the parameters that a search moves.
 *
 * The search sees the diodes not by their saturation currents but by J, the current each carries at
 * a reference junction voltage r near the upper end of the data: I0 = J exp(-r / a). J and the
 * ideality are then nearly independent, where I0 and the ideality are not (a change of 1 % in the
 * ideality at constant I0 moves the curve by 20 % of its current), and nothing overflows for u < r.
 */
import { exp } from '../../numeric/exponential.js';
import type { Amperes, Siemens, Volts } from '../../quantities.js';

/** Where each parameter stands: three of the circuit, then J and ideality of each diode. */
export const PHOTOCURRENT = 0;
export const SHUNT_CONDUCTANCE = 1;
export const SERIES_RESISTANCE = 2;
export const REFERENCE_CURRENT = 3;
export const IDEALITY = 4;
export const PER_DIODE = 2;

export interface BalanceScale {
  readonly diodeCount: 1 | 2;
  /** Ns k T / q: the ideality voltage per unit of ideality. */
  readonly perIdeality: Volts;
  /** r: junction voltage at which J is the current. */
  readonly reference: Volts;
}

export class DiodeBalance {
  readonly parameterCount: number;
  /** Current that the equation gives for the voltage and current put in, less the current. */
  excess: Amperes = 0;
  /** -dI/du at that junction voltage. */
  conductance: Siemens = 0;

  constructor(readonly scale: BalanceScale) {
    this.parameterCount = IDEALITY - 1 + PER_DIODE * scale.diodeCount;
  }

  /** Sets `excess` and `conductance` for a point; it lies on the curve if the excess is zero. */
  at(parameters: Float64Array, voltage: Volts, current: Amperes): void {
    const { diodeCount, perIdeality, reference } = this.scale;
    const u = voltage + current * parameters[SERIES_RESISTANCE]!;
    const shunt = parameters[SHUNT_CONDUCTANCE]!;
    let excess = parameters[PHOTOCURRENT]! - u * shunt - current;
    let conductance = shunt;
    for (let k = 0; k < PER_DIODE * diodeCount; k += PER_DIODE) {
      const carried = parameters[REFERENCE_CURRENT + k]!;
      const a = perIdeality * parameters[IDEALITY + k]!;
      const growth = exp((u - reference) / a);
      excess -= carried * (growth - exp(-reference / a));
      conductance += (carried / a) * growth;
    }
    this.excess = excess;
    this.conductance = conductance;
  }

  /**
   * Current of the curve at a voltage. The excess falls with the current and is concave, so
   * Newton's method needs one step to come to the side of larger currents and then descends.
   * Leaves `conductance` as it is there. Within 1e-14 of the photocurrent near the start; NaN if
   * the parameters are so far off that the diode's current overflows.
   */
  solve(parameters: Float64Array, voltage: Volts, start: Amperes): Amperes {
    const resistance = parameters[SERIES_RESISTANCE]!;
    const small = SETTLED * (Math.abs(parameters[PHOTOCURRENT]!) + Math.abs(start));
    let current = start;
    for (let pass = 0; pass < MOST_PASSES; pass++) {
      this.at(parameters, voltage, current);
      const step = this.excess / (1 + resistance * this.conductance);
      current += step;
      if (!(Math.abs(step) > small)) return current;
    }
    return NaN;
  }

  /** Writes the derivatives of the excess by the parameters, times `factor`, from `offset` on. */
  partials(
    parameters: Float64Array,
    voltage: Volts,
    current: Amperes,
    factor: number,
    into: Float64Array,
    offset: number,
  ): void {
    const { diodeCount, perIdeality, reference } = this.scale;
    const u = voltage + current * parameters[SERIES_RESISTANCE]!;
    let conductance = parameters[SHUNT_CONDUCTANCE]!;
    for (let k = 0; k < PER_DIODE * diodeCount; k += PER_DIODE) {
      const carried = parameters[REFERENCE_CURRENT + k]!;
      const a = perIdeality * parameters[IDEALITY + k]!;
      const growth = exp((u - reference) / a);
      const rest = exp(-reference / a);
      const perIdealityVoltage = ((u - reference) * growth + reference * rest) / (a * a);
      into[offset + REFERENCE_CURRENT + k] = factor * (rest - growth);
      into[offset + IDEALITY + k] = factor * carried * perIdeality * perIdealityVoltage;
      conductance += (carried / a) * growth;
    }
    into[offset + PHOTOCURRENT] = factor;
    into[offset + SHUNT_CONDUCTANCE] = -factor * u;
    into[offset + SERIES_RESISTANCE] = -factor * current * conductance;
  }
}

const SETTLED = 1e-10;
// From the left the first step may go Rs Iph / a ideality voltages too far, and each pass takes one
// back; parameters that need more are no match for any data.
const MOST_PASSES = 100;
