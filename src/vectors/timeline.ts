import { toCelsius, type Seconds } from '../quantities.js';
import { globalPeak, type Source } from '../source/curve.js';
import { sampleCount } from '../weather/sampling.js';
import { writableConditions, type Weather } from '../weather/weather.js';
import {
  conditionColumns,
  keyPointColumns,
  layOut,
  peakColumns,
  type Product,
  type ProductFormats,
} from './product.js';

export interface TimelinePlan {
  readonly name: string;
  readonly source: Source;
  readonly weather: Weather;
  readonly period: Seconds;
  readonly formats: ProductFormats;
}

/**
 * What a source does in a weather, sample by sample: time, conditions, Isc, Voc and the global
 * peak. Nothing is kept between samples, so a timeline of any length takes constant memory.
 */
export function timeline(plan: TimelinePlan): Product {
  const { source, weather, period, formats } = plan;
  const layout = layOut([
    { name: 'time', quantity: 'time', format: formats.time },
    ...conditionColumns(weather.groups, formats),
    ...keyPointColumns(formats),
    ...peakColumns(formats),
  ]);
  const { groups } = weather;
  const rest = 1 + 2 * groups;
  const conditions = writableConditions(groups);
  const { irradiance, cellTemperature } = conditions;
  return {
    name: plan.name,
    kind: 'timeline',
    sections: [
      {
        tag: 'SAMP',
        noun: 'sample',
        ...layout,
        count: sampleCount(weather.duration, period),
        values: (index, into) => {
          const time = index * period;
          weather.conditionsAt(time, conditions);
          const curve = source.at(conditions);
          const peak = globalPeak(curve.peaks());
          into[0] = time;
          for (let group = 0; group < groups; group++) {
            into[1 + 2 * group] = irradiance[group]!;
            into[2 + 2 * group] = toCelsius(cellTemperature[group]!);
          }
          into[rest] = curve.shortCircuitCurrent;
          into[rest + 1] = curve.openCircuitVoltage;
          into[rest + 2] = peak.voltage;
          into[rest + 3] = peak.current;
          into[rest + 4] = peak.power;
        },
      },
    ],
  };
}
