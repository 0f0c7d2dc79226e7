import type { Amperes, AmperesPerVolt, Volts } from '../../quantities.js';
import type { Curve, Peak } from '../curve.js';
import type { SingleDiode } from '../single-diode.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';

/** A curve of the EN 50530 source. */
export interface En50530Curve extends Curve {
  /**
   * U_OC of the model's equations. At 25 °C the current there is I_0: `openCircuitVoltage`, where it
   * is zero, lies above by 8.7e-7 (c-Si) or 5.5e-4 (thin film) of itself; at 52 °C by 0.1 %.
   */
  readonly nominalOpenCircuitVoltage: Volts;
}

/**
 * I(U) = I_SC - I_0 (exp(U / (U_OC C_AQ)) - 1): a single-diode curve without series resistance and
 * shunt path, and as accurate as `SingleDiodeCurve` states.
 */
export class LitCurve extends SingleDiodeCurve implements En50530Curve {
  constructor(
    diode: SingleDiode,
    readonly nominalOpenCircuitVoltage: Volts,
  ) {
    super(diode);
  }
}

/** Without light the equations divide by U_OC = 0; what is left is a source that does nothing. */
export class DarkCurve implements En50530Curve {
  readonly nominalOpenCircuitVoltage: Volts = 0;
  readonly shortCircuitCurrent: Amperes = 0;
  readonly openCircuitVoltage: Volts = 0;

  current(): Amperes {
    return 0;
  }

  slope(): AmperesPerVolt {
    return 0;
  }

  peaks(): readonly Peak[] {
    return [{ voltage: 0, current: 0, power: 0 }];
  }
}
