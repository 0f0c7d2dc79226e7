import type {
  Amperes,
  AmperesPerKelvin,
  AmperesPerVolt,
  Kelvin,
  Volts,
  VoltsPerKelvin,
} from '../quantities.js';
import type { TechnologyName } from './technology.js';

/** What a module's datasheet says, at STC, in SI units. */
export interface Datasheet {
  readonly name: string;
  readonly technology: TechnologyName;
  readonly cellsInSeries: number;
  readonly shortCircuitCurrent: Amperes;
  readonly openCircuitVoltage: Volts;
  readonly peakCurrent: Amperes;
  readonly peakVoltage: Volts;
  /** alpha: change of Isc with cell temperature. */
  readonly shortCircuitCoefficient: AmperesPerKelvin;
  /** beta: change of Voc with cell temperature; negative. */
  readonly openCircuitCoefficient: VoltsPerKelvin;
  /** gamma: relative change of peak power with cell temperature, 1/K; negative. */
  readonly peakPowerCoefficient?: number;
  /** Nominal operating cell temperature. */
  readonly nominalOperatingTemperature?: Kelvin;
  /** dI/dV at short circuit; not positive. */
  readonly slopeAtShortCircuit?: AmperesPerVolt;
  /** dI/dV at open circuit; negative. */
  readonly slopeAtOpenCircuit?: AmperesPerVolt;
  /** Spread of peak power between modules of the type, relative. */
  readonly tolerance?: number;
}
