/** A suite as small as one can be, in a folder of its own, for tests that damage it. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';

export const SMALL_MODEL = `model: single-diode
name: Small
technology: mono-si
cells_in_series: 36
photocurrent_A: 5
saturation_current_A: 1.0e-9
ideality_factor: 1.1
series_resistance_ohm: 0.2
shunt_resistance_ohm: 300
alpha_isc_A_per_K: 0.0025
`;

const SMALL_WEATHER = `name: Small
irradiance_W_per_m2: 500
blocks: [{ ramp: { irradiance_W_per_m2: 900, for_s: 2 } }]
`;

export const SMALL_SUITE = `suite: small
sources: { one: model.yaml }
weather: weather.yaml
formats: { voltage: UQ6.6, current: UQ4.12, power: UQ8.8 }
curves:
  points: 4
  conditions: [{ irradiance_W_per_m2: 800, cell_temperature_C: 40 }]
timeline: { every_s: 1 }
`;

/** Writes the input files, changed where asked; gives the path of the suite file. */
export function writeInputs(
  folder: string,
  changes: { readonly suite?: string; readonly weather?: string; readonly model?: string } = {},
): string {
  writeFileSync(join(folder, 'model.yaml'), changes.model ?? SMALL_MODEL);
  writeFileSync(join(folder, 'weather.yaml'), changes.weather ?? SMALL_WEATHER);
  writeFileSync(join(folder, 'suite.yaml'), changes.suite ?? SMALL_SUITE);
  return join(folder, 'suite.yaml');
}
