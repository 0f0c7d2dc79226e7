import { log } from '../numeric/logarithm.js';
import { wrightOmega } from '../numeric/wright-omega.js';
import type { Amperes, AmperesPerVolt, Ohms, Siemens, Volts } from '../quantities.js';
import type { Curve, Peak } from './curve.js';
import {
  currentAtJunction,
  junctionConductance,
  junctionVoltage,
  type SingleDiode,
} from './single-diode.js';
import { singleDiodePeak } from './single-diode-peak.js';

/**
 * The I-V curve of one single-diode equation.
 *
 * The equation is solved in closed form by the Wright omega function (the logarithmic form of the
 * Lambert W solution, so that nothing overflows):
 *
 *     I = (Iph + I0 - V Gsh) / D - (a / Rs) omega(x),   D = 1 + Rs Gsh,
 *     x = ln(Rs I0 / (a D)) + (V + Rs (Iph + I0)) / (a D)
 *
 * One table look-up, a short polynomial and a few divisions a point; a curve costs one logarithm.
 *
 * Accuracy, held against 40-digit references for 1 to 200 cells, 1 to 1500 W/m², -40 to 90 °C,
 * Rs = 0 and an infinite shunt resistance included: current within 1e-13 of the short-circuit
 * current (of itself where it is larger, far beyond open circuit), slope within 1e-13 of itself,
 * short-circuit current within 1e-13 of itself, open-circuit voltage within 4e-15; for the peak see
 * `singleDiodePeak`. Any finite voltage is allowed.
 */
export class SingleDiodeCurve implements Curve {
  readonly #numbers: Numbers;
  #openCircuitVoltage: Volts | undefined;
  #peaks: readonly Peak[] | undefined;

  constructor(diode: SingleDiode) {
    const { photocurrent, saturationCurrent, idealityVoltage, seriesResistance } = diode;
    const { shuntConductance } = diode;
    const divisor = 1 + seriesResistance * shuntConductance;
    const perAmpere = seriesResistance / (idealityVoltage * divisor);
    this.#numbers = [
      photocurrent,
      saturationCurrent,
      idealityVoltage,
      seriesResistance,
      shuntConductance,
      log(perAmpere * saturationCurrent) + perAmpere * (photocurrent + saturationCurrent),
    ];
  }

  get diode(): SingleDiode {
    const numbers = this.#numbers;
    return {
      photocurrent: numbers[PHOTOCURRENT],
      saturationCurrent: numbers[SATURATION_CURRENT],
      idealityVoltage: numbers[IDEALITY_VOLTAGE],
      seriesResistance: numbers[SERIES_RESISTANCE],
      shuntConductance: numbers[SHUNT_CONDUCTANCE],
    };
  }

  current(voltage: Volts): Amperes {
    const numbers = this.#numbers;
    const photocurrent = numbers[PHOTOCURRENT];
    const saturationCurrent = numbers[SATURATION_CURRENT];
    const idealityVoltage = numbers[IDEALITY_VOLTAGE];
    const seriesResistance = numbers[SERIES_RESISTANCE];
    const shuntConductance = numbers[SHUNT_CONDUCTANCE];
    // The factors 1 tell the compiler that the calls give numbers, so that the value returned from
    // the common path needs no box.
    if (seriesResistance < NO_DROP * idealityVoltage) {
      return 1 * currentAtJunction(this.diode, voltage);
    }
    const divisor = 1 + seriesResistance * shuntConductance;
    const omega = wrightOmega(numbers[OFFSET] + voltage / (idealityVoltage * divisor));
    const source = photocurrent + saturationCurrent - voltage * shuntConductance;
    const current = source / divisor - (idealityVoltage / seriesResistance) * omega;
    const isLeaky = saturationCurrent > LEAKY * photocurrent;
    return isLeaky ? 1 * refined(this.diode, voltage, current) : current;
  }

  slope(voltage: Volts): AmperesPerVolt {
    const numbers = this.#numbers;
    const idealityVoltage = numbers[IDEALITY_VOLTAGE];
    const seriesResistance = numbers[SERIES_RESISTANCE];
    const shuntConductance = numbers[SHUNT_CONDUCTANCE];
    if (seriesResistance < NO_DROP * idealityVoltage) {
      return -junctionConductance(this.diode, voltage);
    }
    const divisor = 1 + seriesResistance * shuntConductance;
    const omega = wrightOmega(numbers[OFFSET] + voltage / (idealityVoltage * divisor));
    return -(shuntConductance + omega / ((1 + omega) * seriesResistance)) / divisor;
  }

  /** Exactly zero in the dark, where rounding would leave a trace of the saturation current. */
  get shortCircuitCurrent(): Amperes {
    return this.#numbers[PHOTOCURRENT] === 0 ? 0 : this.current(0);
  }

  get openCircuitVoltage(): Volts {
    this.#openCircuitVoltage ??= junctionVoltage(this.diode, 0);
    return this.#openCircuitVoltage;
  }

  peaks(): readonly Peak[] {
    this.#peaks ??= [singleDiodePeak(this.diode, this.openCircuitVoltage)];
    return this.#peaks;
  }
}

/**
 * The diode, and x at V = 0, as doubles side by side. As fields each would be an object of its own,
 * and making them would take longer than solving the equation.
 */
type Numbers = readonly [
  photocurrent: Amperes,
  saturationCurrent: Amperes,
  idealityVoltage: Volts,
  seriesResistance: Ohms,
  shuntConductance: Siemens,
  offset: number,
];
const PHOTOCURRENT = 0;
const SATURATION_CURRENT = 1;
const IDEALITY_VOLTAGE = 2;
const SERIES_RESISTANCE = 3;
const SHUNT_CONDUCTANCE = 4;
const OFFSET = 5;

/** One Newton step on the equation itself. */
function refined(diode: SingleDiode, voltage: Volts, current: Amperes): Amperes {
  const u = voltage + current * diode.seriesResistance;
  const gain = 1 + diode.seriesResistance * junctionConductance(diode, u);
  return current + (currentAtJunction(diode, u) - current) / gain;
}

// The closed form subtracts currents as large as Iph + I0, so it loses the digits by which I0
// exceeds Iph: hot, leaky cells at dawn. Up to here it stays within 3e-14.
const LEAKY = 4;

// Per ampere: a series resistance so small moves the junction by less than the rounding of its
// voltage at any current below 10^9 A, and a / Rs might overflow.
const NO_DROP = 1e-25;
