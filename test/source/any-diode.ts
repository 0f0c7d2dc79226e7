/** Random modules and weather over the whole range that the accuracy claims are made for. */
import { expm1 } from '../../src/numeric/exponential.js';
import type { Random } from '../../src/numeric/random.js';
import { fromCelsius, STC_TEMPERATURE, thermalVoltage } from '../../src/quantities.js';
import type { SingleDiode } from '../../src/source/single-diode.js';
import { TECHNOLOGIES, type TechnologyName } from '../../src/source/technology.js';
import { translate } from '../../src/source/translation.js';

export interface AnyModule {
  readonly technology: TechnologyName;
  readonly cellsInSeries: number;
  /** Of one cell: from 1 to 2 for each junction. */
  readonly ideality: number;
  readonly diode: SingleDiode;
}

const NAMES = Object.keys(TECHNOLOGIES) as TechnologyName[];

/**
 * 1 to 200 cells, A from 1 to 2 a junction, 5 mA to 20 A, every technology at its plausible cell voltages;
 * Rs from a millionth to a seventh of Voc / Isc or none, Rsh from 5 to 10^5 times that or infinite.
 */
export function anyModule(random: Random): AnyModule {
  const technology = NAMES[random.integer(0, NAMES.length - 1)]!;
  const cellsInSeries = Math.round(logBetween(random, 1, 200));
  const ideality = random.between(1, 2) * TECHNOLOGIES[technology].junctions;
  const [least, most] = TECHNOLOGIES[technology].cellVoltage;
  const idealityVoltage = cellsInSeries * ideality * thermalVoltage(STC_TEMPERATURE);
  const openCircuitVoltage = cellsInSeries * random.between(least, most);
  const photocurrent = logBetween(random, 0.005, 20);
  const resistance = openCircuitVoltage / photocurrent;
  return {
    technology,
    cellsInSeries,
    ideality,
    diode: {
      photocurrent,
      saturationCurrent: photocurrent / expm1(openCircuitVoltage / idealityVoltage),
      idealityVoltage,
      seriesResistance: one(random, 0.1) ? 0 : resistance * logBetween(random, 1e-6, 0.15),
      shuntConductance: one(random, 0.1) ? 0 : 1 / (resistance * logBetween(random, 5, 1e5)),
    },
  };
}

/** Such a module at 1 to 1500 W/m² and -40 to 90 °C. */
export function anyDiode(random: Random): SingleDiode {
  const { diode, technology } = anyModule(random);
  const shortCircuitCoefficient = diode.photocurrent * random.between(0, 0.001);
  const irradiance = logBetween(random, 1, 1500);
  const temperature = fromCelsius(random.between(-40, 90));
  return translate(diode, { technology, shortCircuitCoefficient }, irradiance, temperature);
}

const logBetween = (random: Random, low: number, high: number): number =>
  low * Math.pow(high / low, random.uniform());

const one = (random: Random, chance: number): boolean => random.uniform() < chance;
