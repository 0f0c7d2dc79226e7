import { argumentFault } from '../fault.js';
import { findRootWithSlope } from '../numeric/root.js';
import type { Amperes, AmperesPerVolt, Volts } from '../quantities.js';
import type { Curve, Peak } from './curve.js';
import {
  doubleDiodeConductance,
  doubleDiodeCurrent,
  doubleDiodeCurvature,
  doubleDiodeOpenCircuit,
  withoutOneDiode,
  type DoubleDiode,
} from './double-diode.js';
import { SingleDiodeCurve } from './single-diode-curve.js';

/**
 * The I-V curve of one double-diode equation.
 *
 * No closed form exists. For u = V + Rs I, h(u) = u - V - Rs I(u) rises and is convex, so Newton's
 * method descends to its one root from any point where h >= 0, and from any other point its first
 * step leads to such a one. The start is the lower of the two junction voltages with one diode taken
 * out, which the closed form gives: within ln 2 ideality voltages of the root in the forward
 * direction, within Rs I0 in reverse.
 *
 * Accuracy: current within 1e-12 of the short-circuit current (of itself where it is larger), slope
 * within 1e-11 of itself, open-circuit voltage and voltage of the peak within 1e-12. Held against
 * 40-digit references. Any finite voltage is allowed.
 */
export class DoubleDiodeCurve implements Curve {
  readonly diode: DoubleDiode;
  readonly #singles: readonly SingleDiodeCurve[];
  #openCircuitVoltage: Volts | undefined;
  #peaks: readonly Peak[] | undefined;

  /** @throws Fault `ARGUMENT` for parameters out of the range of `DoubleDiode`. */
  constructor(diode: DoubleDiode) {
    checkRange(diode);
    this.diode = diode;
    this.#singles = ([0, 1] as const).flatMap((kept) => {
      const single = withoutOneDiode(diode, kept);
      return single === undefined ? [] : [new SingleDiodeCurve(single)];
    });
  }

  current(voltage: Volts): Amperes {
    const { diode } = this;
    const u = this.#junction(voltage);
    const current = doubleDiodeCurrent(diode, u);
    // u carries rounding that a steep diode multiplies: one step on the current itself takes it out.
    const at = voltage + diode.seriesResistance * current;
    const gain = 1 + diode.seriesResistance * doubleDiodeConductance(diode, at);
    return current + (doubleDiodeCurrent(diode, at) - current) / gain;
  }

  slope(voltage: Volts): AmperesPerVolt {
    const conductance = doubleDiodeConductance(this.diode, this.#junction(voltage));
    return -conductance / (1 + this.diode.seriesResistance * conductance);
  }

  /** Exactly zero in the dark, where rounding would leave a trace of the saturation currents. */
  get shortCircuitCurrent(): Amperes {
    return this.diode.photocurrent === 0 ? 0 : this.current(0);
  }

  get openCircuitVoltage(): Volts {
    this.#openCircuitVoltage ??= doubleDiodeOpenCircuit(this.diode);
    return this.#openCircuitVoltage;
  }

  peaks(): readonly Peak[] {
    this.#peaks ??= [peakOf(this.diode, this.openCircuitVoltage)];
    return this.#peaks;
  }

  #junction(voltage: Volts): Volts {
    const { diode } = this;
    const { seriesResistance } = diode;
    if (seriesResistance === 0) return voltage;
    let u = Infinity;
    for (const single of this.#singles) {
      u = Math.min(u, voltage + seriesResistance * single.current(voltage));
    }
    for (let pass = 0; pass < MOST_PASSES; pass++) {
      const h = u - voltage - seriesResistance * doubleDiodeCurrent(diode, u);
      const step = h / (1 + seriesResistance * doubleDiodeConductance(diode, u));
      u -= step;
      if (Math.abs(step) <= SETTLED * Math.abs(u)) break;
    }
    return u;
  }
}

/**
 * The one zero of dP/du = I + 2 Rs g I - u g with g = -dI/du, between 0 and open circuit: I(V) is
 * concave, so P(V) is strictly concave there, and u rises with V.
 */
function peakOf(diode: DoubleDiode, openCircuitVoltage: Volts): Peak {
  if (!(openCircuitVoltage > 0)) return { voltage: 0, current: 0, power: 0 };
  const { seriesResistance } = diode;
  const rise = (u: Volts): number => {
    const current = doubleDiodeCurrent(diode, u);
    const conductance = doubleDiodeConductance(diode, u);
    return current * (1 + 2 * seriesResistance * conductance) - u * conductance;
  };
  const bend = (u: Volts): number => {
    const current = doubleDiodeCurrent(diode, u);
    const conductance = doubleDiodeConductance(diode, u);
    const pull = 2 * seriesResistance * current - u;
    return (
      pull * doubleDiodeCurvature(diode, u) - 2 * conductance * (1 + seriesResistance * conductance)
    );
  };
  const found = findRootWithSlope(rise, bend, 0, openCircuitVoltage);
  const u = found.status === 'converged' ? found.root : openCircuitVoltage;
  const current = doubleDiodeCurrent(diode, u);
  const voltage = u - seriesResistance * current;
  return { voltage, current, power: voltage * current };
}

function checkRange(diode: DoubleDiode): void {
  const { photocurrent, seriesResistance, shuntConductance, diodes } = diode;
  for (const [name, value] of Object.entries({
    photocurrent,
    seriesResistance,
    shuntConductance,
  })) {
    if (!(value >= 0 && value < Infinity))
      throw argumentFault(name, 'finite and at least 0', value);
  }
  diodes.forEach(({ saturationCurrent, idealityVoltage }, index) => {
    if (!(saturationCurrent >= 0 && saturationCurrent < Infinity)) {
      const field = `diodes[${index}].saturationCurrent`;
      throw argumentFault(field, 'finite and at least 0', saturationCurrent);
    }
    if (!(idealityVoltage > 0 && idealityVoltage < Infinity)) {
      throw argumentFault(
        `diodes[${index}].idealityVoltage`,
        'finite and above 0',
        idealityVoltage,
      );
    }
  });
  if (diodes[0].saturationCurrent === 0 && diodes[1].saturationCurrent === 0) {
    throw argumentFault('diodes', 'at least one saturation current above 0', 'none');
  }
}

// A Newton step of this share of u leaves an error of its square times u / a: below rounding.
const SETTLED = 1e-10;
// Newton needs 3 to 6 from so near; far in reverse it needs one more.
const MOST_PASSES = 60;
