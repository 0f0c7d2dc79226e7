import { Fault, type Problem } from '../../src/fault.js';
import { parseInput } from '../../src/file/document.js';
import { toCelsius } from '../../src/quantities.js';
import type { Block } from '../../src/weather/definition.js';
import { compileWeather, parseWeather } from '../../src/weather/load.js';
import { writableConditions, type Mark, type Weather } from '../../src/weather/weather.js';

export const irradianceAt = (weather: Weather, time: number): number => {
  const into = writableConditions(weather.groups);
  weather.conditionsAt(time, into);
  return into.irradiance[0]!;
};

/** °C, rounded to 1e-9: the round trip over 273.15 costs the last bits of a double. */
export const celsiusAt = (weather: Weather, time: number): number => {
  const into = writableConditions(weather.groups);
  weather.conditionsAt(time, into);
  return Math.round(toCelsius(into.cellTemperature[0]!) * 1e9) / 1e9;
};

/** Starts at 0 W/m² and 25 °C. */
export const weatherOf = (...blocks: Block[]): Weather => compileWeather({ name: 'test', blocks });

export const weatherIn = (yaml: string): Weather => parseWeather(parseInput(yaml, 'sky.yaml'));

export const problemsOf = (act: () => unknown): readonly Problem[] => {
  try {
    act();
  } catch (error) {
    if (error instanceof Fault && error.kind === 'input') return error.problems;
    throw error;
  }
  throw new Error('nothing was refused');
};

/** `first / second: 3 to 7`, for marks at whole seconds. */
export const markText = ({ path, start, end }: Mark): string =>
  `${path.join(' / ')}: ${start} to ${end}`;
