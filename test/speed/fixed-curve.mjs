/** I-V points on one curve: scattered, and swept so that the loop in C can start from the last. */
import { STC_IRRADIANCE, STC_TEMPERATURE, uniformConditions } from '../../dist/index.js';
import { besideNewton } from './beside-newton.mjs';
import { module, risingVoltages, scatteredVoltages } from './solver-inputs.mjs';

export function measure(builds) {
  return [
    ...besideNewton(builds, {
      what: 'points on a fixed curve',
      kernel: 'fixed',
      targets: { '-O3': 2 },
      ...solver(scatteredVoltages()),
    }),
    ...besideNewton(builds, {
      what: 'the same as a sweep, C from the last point',
      kernel: 'sweep',
      ...solver(risingVoltages()),
    }),
  ];
}

function solver(inputs) {
  const { voltage } = inputs;
  const curve = module.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE));
  const currents = new Float64Array(voltage.length);
  const run = () => {
    for (let i = 0; i < voltage.length; i += 1) currents[i] = curve.current(voltage[i]);
  };
  return { inputs, run, currents };
}
