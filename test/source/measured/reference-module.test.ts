import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { Random } from '../../../src/numeric/random.js';
import { uniformConditions } from '../../../src/quantities.js';
import { fitMeasuredCurve } from '../../../src/source/measured/measured-fit.js';
import { moduleOf } from '../../../src/source/measured/reference-module.js';
import { modelText, parseModel } from '../../../src/source/model-file.js';
import type { SingleDiodeCurve } from '../../../src/source/single-diode-curve.js';
import { TECHNOLOGIES, type TechnologyName } from '../../../src/source/technology.js';
import { faultOf } from '../fault-of.js';
import { CELLS, noisyPoints, TEMPERATURE } from './synthetic.js';

const fit = fitMeasuredCurve(noisyPoints(new Random(6), 40, 0.01), {
  cellsInSeries: CELLS,
  cellTemperature: TEMPERATURE,
});
const { diode } = fit.curve as SingleDiodeCurve;
const MEASURED = {
  name: 'Roof, string 2',
  technology: 'mono-si',
  irradiance: 870,
  shortCircuitCoefficient: 0.0045,
} as const;

describe('The module of a measured fit', () => {
  test('has the fitted curve again under the conditions of the measurement', () => {
    for (const technology of Object.keys(TECHNOLOGIES) as TechnologyName[]) {
      const module = moduleOf(fit, { ...MEASURED, technology });
      const again = module.at(uniformConditions(870, TEMPERATURE)).diode;
      for (const key of Object.keys(diode) as (keyof typeof diode)[]) {
        // A product and a quotient round twice each, the saturation ratio alike both times.
        expect(Math.abs(again[key] / diode[key] - 1), `${technology} ${key}`).toBeLessThan(1e-15);
      }
    }
  });

  test('written to a model file and read again has it too', () => {
    const module = parseModel(parseInput(modelText(moduleOf(fit, MEASURED)), 'model.yaml'));
    expect(module.name).toBe('Roof, string 2');
    const again = module.at(uniformConditions(870, TEMPERATURE));
    for (const { voltage } of fit.points) {
      const miss = again.current(voltage) - fit.curve.current(voltage);
      expect(Math.abs(miss)).toBeLessThan(1e-12 * diode.photocurrent);
    }
  });

  test('measured at STC has the fitted parameters as they are', () => {
    const atStc = { ...fit, cellTemperature: 298.15 };
    expect(moduleOf(atStc, { ...MEASURED, irradiance: 1000 }).reference).toEqual(diode);
  });

  test('is refused for two diodes, and for a coefficient that leaves no current', () => {
    const double = fitMeasuredCurve(fit.points, {
      cellsInSeries: CELLS,
      cellTemperature: TEMPERATURE,
      model: 'double',
    });
    expect(faultOf(() => moduleOf(double, MEASURED)).problems[0]!.code).toBe('NO_MODULE');
    const wild = { ...MEASURED, shortCircuitCoefficient: 4.5 };
    expect(faultOf(() => moduleOf(fit, wild)).problems[0]!.hint).toContain('unit');
    const dark = { ...MEASURED, irradiance: 0 };
    expect(faultOf(() => moduleOf(fit, dark)).problems[0]!.field).toBe('irradiance');
  });
});
