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

  /** @throws Fault `ARGUMENT` for irradiance outside 0 to 2000 W/m² or -60 to 120 °C. */
  at(conditions: Conditions): SingleDiodeCurve {
    const irradiance = conditions.irradiance[0]!;
    const temperature = conditions.cellTemperature[0]!;
    if (!(irradiance >= 0 && irradiance <= 2000)) {
      throw argumentFault('irradiance', 'from 0 to 2000 W/m²', irradiance);
    }
    if (!(temperature >= 213.15 && temperature <= 393.15)) {
      throw argumentFault(
        'cellTemperature',
        'from 213.15 to 393.15 K (-60 to 120 °C)',
        temperature,
      );
    }
    return new SingleDiodeCurve(translate(this.reference, this.behaviour, irradiance, temperature));
  }
}
