import { argumentFault } from '../fault.js';
import type { Conditions } from '../quantities.js';
import type { Source } from './curve.js';
import type { SingleDiode } from './single-diode.js';
import { SingleDiodeCurve } from './single-diode-curve.js';
import { translate, type TemperatureBehaviour } from './translation.js';

/** A PV module, lit evenly: five parameters at STC and how they move with the weather. */
export class Module implements Source {
  readonly groups = 1;

  constructor(
    readonly name: string,
    readonly cellsInSeries: number,
    /** The five parameters at STC. */
    readonly reference: SingleDiode,
    readonly behaviour: TemperatureBehaviour,
  ) {}

  /**
   * The curve under the conditions of the first group. At no irradiance it is that of the night:
   * no current, no voltage, one peak of no power.
   * @throws Fault `ARGUMENT` for irradiance outside 0 to 2000 W/m² or cells outside -60 to 120 °C.
   */
  at(conditions: Conditions): SingleDiodeCurve {
    const irradiance = conditions.irradiance[0]!;
    const temperature = conditions.cellTemperature[0]!;
    if (!(irradiance >= 0 && irradiance <= MOST_IRRADIANCE)) {
      throw argumentFault('irradiance', `from 0 to ${MOST_IRRADIANCE} W/m²`, irradiance);
    }
    if (!(temperature >= COLDEST - ROUNDING && temperature <= HOTTEST + ROUNDING)) {
      const range = `from ${COLDEST} to ${HOTTEST} K (-60 to 120 °C)`;
      throw argumentFault('cellTemperature', range, temperature);
    }
    return new SingleDiodeCurve(translate(this.reference, this.behaviour, irradiance, temperature));
  }
}

const MOST_IRRADIANCE = 2000;
const COLDEST = 213.15;
const HOTTEST = 393.15;
/** -60 °C is 213.14999999999998 K once it has been through a sum. */
const ROUNDING = 1e-9;
