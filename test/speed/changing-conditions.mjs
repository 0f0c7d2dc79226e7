/** I-V points each under its own irradiance and cell temperature: a new curve for every point. */
import { writableConditions } from '../../dist/index.js';
import { besideNewton } from './beside-newton.mjs';
import { module, scatteredConditions } from './solver-inputs.mjs';

export function measure(builds) {
  const inputs = scatteredConditions();
  const { voltage, irradiance, temperature } = inputs;
  const conditions = writableConditions(1);
  const currents = new Float64Array(voltage.length);
  const run = () => {
    for (let i = 0; i < voltage.length; i += 1) {
      conditions.irradiance[0] = irradiance[i];
      conditions.cellTemperature[0] = temperature[i];
      currents[i] = module.at(conditions).current(voltage[i]);
    }
  };
  const what = 'points under changing conditions';
  return besideNewton(builds, {
    ...{ what, kernel: 'changing', targets: { '-O3': 1 } },
    ...{ inputs, run, currents },
  });
}
