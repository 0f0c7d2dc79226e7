import { findRoot } from '../../numeric/root.js';
import type { Amperes, AmperesPerVolt, Volts } from '../../quantities.js';
import type { Peak } from '../curve.js';
import type { EnclosedCurve, Enclosure } from './enclosure.js';
import { peakParameters } from './peak-search.js';
import { powerOverCurrent, powerOverVoltage } from './power-slope.js';
import type { StringCurve } from './string-curve.js';

/** Strings that are alike, side by side. */
export interface AlikeStrings {
  readonly count: number;
  readonly string: StringCurve;
}

/**
 * The I-V curve of strings side by side: at one voltage their currents add.
 *
 * Accuracy: currents within 1e-12 of the short-circuit current; peaks: voltage and current within
 * 1e-9 and power within 1e-12 of themselves, all of them found as stated at `peakParameters`.
 * Range: any voltage. Below the voltage at which every bypass of a string is an engaged ideal clamp
 * the current has no limit: Infinity. Without a string: no current and no voltage.
 */
export class ArrayCurve implements EnclosedCurve {
  readonly strings: readonly AlikeStrings[];
  readonly shortCircuitCurrent: Amperes;
  readonly openCircuitVoltage: Volts;
  readonly kinks: readonly Volts[];
  readonly concave: boolean;
  #peaks: readonly Peak[] | undefined;

  constructor(strings: readonly AlikeStrings[]) {
    this.strings = strings;
    this.concave = strings.every(({ string }) => string.concave);
    this.shortCircuitCurrent = sum(
      strings.map((each) => each.count * each.string.shortCircuitCurrent),
    );
    this.openCircuitVoltage = this.#findOpenCircuit();
    const kinks = strings.flatMap(({ string }) =>
      string.blocked ? [...string.kinkVoltages, string.openCircuitVoltage] : string.kinkVoltages,
    );
    this.kinks = [...new Set(kinks)]
      .filter((voltage) => voltage > 0 && voltage < this.openCircuitVoltage)
      .sort((a, b) => a - b);
  }

  current(voltage: Volts): Amperes {
    let total = 0;
    for (const { count, string } of this.strings) total += count * string.current(voltage);
    return total;
  }

  slope(voltage: Volts): AmperesPerVolt {
    let total = 0;
    for (const { count, string } of this.strings) total += count * string.slope(voltage);
    return total;
  }

  encloseSlope(from: Volts, to: Volts, into: Enclosure): void {
    let least = 0;
    let most = 0;
    for (const { count, string } of this.strings) {
      if (string.blocked && 0.5 * (from + to) >= string.openCircuitVoltage) continue;
      string.encloseResistance(string.current(to), string.current(from), into);
      least -= count / into.least;
      most -= count / into.most;
    }
    into.least = least;
    into.most = most;
  }

  /**
   * Every local maximum of power, found as stated at `peakParameters`: with ideal bypasses and
   * blocking and without breakdown there is no exception.
   */
  peaks(): readonly Peak[] {
    this.#peaks ??= this.#findPeaks();
    return this.#peaks;
  }

  #findPeaks(): readonly Peak[] {
    const [first, ...others] = this.strings;
    if (!(this.openCircuitVoltage > 0) || first === undefined) return [DARK];
    if (others.length > 0) {
      return peakParameters(powerOverVoltage(this)).map((v) => peakAt(v, this.current(v)));
    }
    // A single string has V(I) without any search, so its peaks are sought over the current.
    const { count, string } = first;
    return peakParameters(powerOverCurrent(string))
      .map((current) => peakAt(string.voltage(current), count * current))
      .reverse();
  }

  #findOpenCircuit(): Volts {
    const voltages = this.strings.map(({ string }) => string.openCircuitVoltage);
    const least = Math.min(...voltages);
    const most = Math.max(...voltages, 0);
    if (!(least < most)) return most;
    const result = findRoot((voltage) => this.current(voltage), least, most);
    return result.status === 'converged' ? result.root : most;
  }
}

const DARK: Peak = { voltage: 0, current: 0, power: 0 };

const peakAt = (voltage: Volts, current: Amperes): Peak => ({
  voltage,
  current,
  power: voltage * current,
});

const sum = (values: readonly number[]): number =>
  values.reduce((total, value) => total + value, 0);
