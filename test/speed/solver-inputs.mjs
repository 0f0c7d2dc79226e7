/** What both solvers compute: the demo module, at voltages and conditions drawn from a seed. */
import { fileURLToPath } from 'node:url';
import {
  fromCelsius,
  loadSource,
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  TECHNOLOGIES,
  uniformConditions,
} from '../../dist/index.js';
import { Random } from '../../dist/numeric/random.js';
import { BOLTZMANN, ELEMENTARY_CHARGE } from '../../dist/quantities.js';

/** Few enough for the second-level cache, many enough that a pass is worth timing. */
export const POINTS = 65536;
/** Points of one sweep: about as many as a curve tracer takes. */
const SWEEP = 1024;

export const { module } = loadSource(
  fileURLToPath(new URL('../../vectors/demo/module.yaml', import.meta.url)),
);

/** At STC, voltages from short circuit to open circuit in no order. */
export function scatteredVoltages() {
  const { openCircuitVoltage } = module.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE));
  const random = new Random(1).split('voltages');
  return inputsFrom(() => [random.between(0, openCircuitVoltage), STC_IRRADIANCE, STC_TEMPERATURE]);
}

/** At STC, voltages that rise from short circuit to open circuit again and again. */
export function risingVoltages() {
  const { openCircuitVoltage } = module.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE));
  return inputsFrom((index) => [
    ((index % SWEEP) / (SWEEP - 1)) * openCircuitVoltage,
    STC_IRRADIANCE,
    STC_TEMPERATURE,
  ]);
}

/** Each point under its own conditions, at a voltage between short circuit and open circuit. */
export function scatteredConditions() {
  const random = new Random(1).split('conditions');
  return inputsFrom(() => {
    const irradiance = random.between(50, 1200);
    const temperature = fromCelsius(random.between(-10, 75));
    const { openCircuitVoltage } = module.at(uniformConditions(irradiance, temperature));
    return [random.between(0, openCircuitVoltage), irradiance, temperature];
  });
}

function inputsFrom(point) {
  const inputs = {
    voltage: new Float64Array(POINTS),
    irradiance: new Float64Array(POINTS),
    temperature: new Float64Array(POINTS),
  };
  for (let index = 0; index < POINTS; index += 1) {
    const [voltage, irradiance, temperature] = point(index);
    inputs.voltage[index] = voltage;
    inputs.irradiance[index] = irradiance;
    inputs.temperature[index] = temperature;
  }
  return inputs;
}

/** The inputs as newton.c reads them. */
export function doublesOf({ voltage, irradiance, temperature }) {
  const { reference, behaviour } = module;
  const { bandGap, bandGapSlope } = TECHNOLOGIES[behaviour.technology];
  return new Float64Array([
    reference.photocurrent,
    reference.saturationCurrent,
    reference.idealityVoltage,
    reference.seriesResistance,
    reference.shuntConductance,
    behaviour.shortCircuitCoefficient,
    bandGap,
    bandGapSlope,
    ELEMENTARY_CHARGE / BOLTZMANN,
    POINTS,
    ...voltage,
    ...irradiance,
    ...temperature,
  ]);
}
