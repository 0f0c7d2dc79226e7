/** A fitted curve as a module that can be taken to any other conditions. */
import { argumentFault, Fault } from '../../fault.js';
import {
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  type AmperesPerKelvin,
  type WattsPerSquareMetre,
} from '../../quantities.js';
import { Module } from '../module.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import type { TechnologyName } from '../technology.js';
import { saturationRatio } from '../translation.js';
import type { MeasuredFit } from './measured-fit.js';

export interface MeasuredModule {
  readonly name: string;
  readonly technology: TechnologyName;
  /** Irradiance at which the curve was measured, 1 to 2000 W/m². */
  readonly irradiance: WattsPerSquareMetre;
  /** alpha: change of Isc with cell temperature at 1000 W/m². */
  readonly shortCircuitCoefficient: AmperesPerKelvin;
}

/**
 * Undoes the translation of De Soto, Klein and Beckman 2006 (see `translate`) from the conditions
 * of the measurement to STC. At those conditions the module has the fitted curve again, to 1e-15 of
 * each parameter (1e-14 of the saturation current).
 * @throws Fault `ARGUMENT`; `NO_MODULE` for a double-diode fit, which translation does not cover,
 * or if nothing is left of the photocurrent at STC.
 */
export function moduleOf(fit: MeasuredFit, measured: MeasuredModule): Module {
  const { name, technology, irradiance, shortCircuitCoefficient } = measured;
  if (!(irradiance >= 1 && irradiance <= 2000)) {
    throw argumentFault('irradiance', 'from 1 to 2000 W/m²', irradiance);
  }
  if (!(fit.curve instanceof SingleDiodeCurve)) {
    throw noModule(
      'only the single-diode equation has a translation to other conditions',
      'Fit it with one diode.',
    );
  }
  const { diode } = fit.curve;
  const { cellTemperature } = fit;
  const sun = irradiance / STC_IRRADIANCE;
  const rise = cellTemperature - STC_TEMPERATURE;
  const photocurrent = diode.photocurrent / sun - shortCircuitCoefficient * rise;
  if (!(photocurrent > 0)) {
    throw noModule(
      `the temperature coefficient of ${shortCircuitCoefficient} A/K over ${rise} K leaves no photocurrent`,
      'Check the unit of the coefficient.',
    );
  }
  return new Module(
    name,
    fit.cellsInSeries,
    {
      photocurrent,
      saturationCurrent: diode.saturationCurrent / saturationRatio(technology, cellTemperature),
      idealityVoltage: diode.idealityVoltage / (cellTemperature / STC_TEMPERATURE),
      seriesResistance: diode.seriesResistance,
      shuntConductance: diode.shuntConductance / sun,
    },
    { technology, shortCircuitCoefficient },
  );
}

const noModule = (reason: string, hint: string): Fault =>
  new Fault('input', { code: 'NO_MODULE', message: `no module follows: ${reason}.`, hint });
