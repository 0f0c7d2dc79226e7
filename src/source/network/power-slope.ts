/** dP/dt of strings, in the form that the search for peaks takes. */
import type { Amperes, Volts } from '../../quantities.js';
import type { EnclosedCurve, Enclosure } from './enclosure.js';
import type { PowerSlope } from './peak-search.js';
import type { StringCurve } from './string-curve.js';

/** t is the current of one string: dP/dI = V - I R with R = -dV/dI. */
export function powerOverCurrent(string: StringCurve): PowerSlope {
  return {
    end: string.shortCircuitCurrent,
    kinks: string.kinks.filter((kink) => kink < string.shortCircuitCurrent),
    concave: string.concave,
    at: (current: Amperes) => string.voltage(current) - current * string.resistance(current),
    enclose: (from: Amperes, to: Amperes, into: Enclosure) => {
      string.encloseResistance(from, to, into);
      const { least, most } = into;
      into.least = string.voltage(to) - to * most;
      into.most = string.voltage(from) - from * least;
    },
    extent: (from: Amperes, to: Amperes) =>
      Math.max(
        (to - from) / string.shortCircuitCurrent,
        (string.voltage(from) - string.voltage(to)) / string.openCircuitVoltage,
      ),
  };
}

/** t is the voltage across strings side by side: dP/dV = I + V dI/dV. */
export function powerOverVoltage(array: EnclosedCurve): PowerSlope {
  return {
    end: array.openCircuitVoltage,
    kinks: array.kinks,
    concave: array.concave,
    at: (voltage: Volts) => array.current(voltage) + voltage * array.slope(voltage),
    enclose: (from: Volts, to: Volts, into: Enclosure) => {
      array.encloseSlope(from, to, into);
      const { least, most } = into;
      into.least = array.current(to) + to * least;
      into.most = array.current(from) + from * most;
    },
    extent: (from: Volts, to: Volts) =>
      Math.max(
        (to - from) / array.openCircuitVoltage,
        (array.current(from) - array.current(to)) / array.shortCircuitCurrent,
      ),
  };
}
