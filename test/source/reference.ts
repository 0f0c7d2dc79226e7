/**
 * The single-diode equation to at least 40 digits, from nothing but the equation itself,
 *
 *     Iph - I0 (exp(u / a) - 1) - u Gsh - I = 0,   u = V + I Rs,
 *
 * by Newton's method. What is to be checked serves as the start, and as nothing else.
 */
import type { SingleDiode } from '../../src/source/single-diode.js';
import { exponential, fixed, ONE, over, size, times, type Fixed } from './fixed-point.js';

export class ExactDiode {
  readonly #photocurrent: Fixed;
  readonly #saturationCurrent: Fixed;
  readonly #a: Fixed;
  readonly #rs: Fixed;
  readonly #gsh: Fixed;

  constructor(diode: SingleDiode) {
    this.#photocurrent = fixed(diode.photocurrent);
    this.#saturationCurrent = fixed(diode.saturationCurrent);
    this.#a = fixed(diode.idealityVoltage);
    this.#rs = fixed(diode.seriesResistance);
    this.#gsh = fixed(diode.shuntConductance);
  }

  /** Current, and slope dI/dV, at a terminal voltage. */
  at(voltage: number, start: number): { current: Fixed; slope: Fixed } {
    const v = fixed(voltage);
    let loss = ONE;
    let conductance = 0n;
    const current = newton(fixed(start), (i) => {
      const junction = this.#junction(v + times(i, this.#rs));
      conductance = junction.conductance;
      loss = ONE + times(this.#rs, conductance);
      return over(junction.current - i, -loss);
    });
    return { current, slope: -over(conductance, loss) };
  }

  /** Terminal voltage at a terminal current; at zero current, the open-circuit voltage. */
  voltageAt(current: number, start: number): Fixed {
    const i = fixed(current);
    const drop = times(i, this.#rs);
    const junctionVoltage = newton(fixed(start) + drop, (u) => {
      const junction = this.#junction(u);
      return over(junction.current - i, -junction.conductance);
    });
    return junctionVoltage - drop;
  }

  /** The zero of dP/du = I + 2 Rs g I - u g, g = -dI/du. */
  peak(start: { voltage: number; current: number }): {
    voltage: Fixed;
    current: Fixed;
    power: Fixed;
  } {
    const begin = fixed(start.voltage) + times(fixed(start.current), this.#rs);
    const u = newton(begin, (u) => {
      const { current, conductance, curvature } = this.#junction(u);
      const gain = ONE + 2n * times(this.#rs, conductance);
      const value = times(current, gain) - times(u, conductance);
      const slope =
        times(2n * times(this.#rs, current) - u, curvature) - times(conductance, gain + ONE);
      return over(value, slope);
    });
    const { current } = this.#junction(u);
    const voltage = u - times(current, this.#rs);
    return { voltage, current, power: times(voltage, current) };
  }

  #junction(u: Fixed): { current: Fixed; conductance: Fixed; curvature: Fixed } {
    const diode = times(this.#saturationCurrent, exponential(over(u, this.#a)));
    const conductance = over(diode, this.#a);
    return {
      current: this.#photocurrent + this.#saturationCurrent - diode - times(u, this.#gsh),
      conductance: conductance + this.#gsh,
      curvature: over(conductance, this.#a),
    };
  }
}

// Newton's method doubles the digits that are right: after a step of 2^-100 of x the next would be
// below 2^-190.
const LAST_STEP = 100n;

function newton(start: Fixed, stepAt: (x: Fixed) => Fixed): Fixed {
  let x = start;
  for (let pass = 0; pass < 200; pass++) {
    const step = stepAt(x);
    x -= step;
    if (size(step) <= size(x) >> LAST_STEP || size(step) < 1n << 64n) return x;
  }
  throw new Error('The reference does not settle.');
}
