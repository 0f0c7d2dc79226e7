import type { Conditions } from '../quantities.js';
import type { Source } from './curve.js';
import { checkOperatingRange } from './operating-range.js';
import type { SingleDiode } from './single-diode.js';
import { SingleDiodeCurve } from './single-diode-curve.js';
import { translateDeSoto } from './translate/de-soto-2006.js';
import { checkVillalva } from './translate/villalva-2009.js';
import { translate, type TemperatureBehaviour } from './translation.js';

/** A PV module, lit evenly: five parameters at STC and how they move with the weather. */
export class Module implements Source {
  readonly groups = 1;

  /**
   * @throws Fault `ARGUMENT` for a behaviour after villalva-2009 under which Isc or Voc would vanish
   * between -60 and 120 °C.
   */
  constructor(
    readonly name: string,
    readonly cellsInSeries: number,
    /** The five parameters at STC. */
    readonly reference: SingleDiode,
    readonly behaviour: TemperatureBehaviour,
  ) {
    if (behaviour.translation === 'villalva-2009') checkVillalva(behaviour);
  }

  /**
   * The curve under the conditions of the first group. At no irradiance it is that of the night:
   * no current, no voltage, one peak of no power.
   * @throws Fault `ARGUMENT` for irradiance outside 0 to 2000 W/m² or cells outside -60 to 120 °C.
   */
  at(conditions: Conditions): SingleDiodeCurve {
    const irradiance = conditions.irradiance[0]!;
    const temperature = conditions.cellTemperature[0]!;
    // Usual conditions pass without a call, and usual modules without a choice of rules: an engine
    // then takes all of the way to the curve into the loop that asks for it.
    const isUsual =
      irradiance >= 0 && irradiance <= BRIGHT && temperature >= COLD && temperature <= HOT;
    if (!isUsual) checkOperatingRange(conditions, 0);
    const { reference, behaviour } = this;
    const diode =
      behaviour.translation === 'villalva-2009'
        ? translate(reference, behaviour, irradiance, temperature)
        : translateDeSoto(reference, behaviour, irradiance, temperature);
    return new SingleDiodeCurve(diode);
  }
}

// Well inside the range that is checked otherwise.
const BRIGHT = 1500;
const COLD = 233.15;
const HOT = 363.15;
