import type { MeasuredFit } from '../source/measured/measured-fit.js';
import type { EstimateName } from '../source/measured/estimates.js';

/** A measured fit for programs. Standard errors carry the unit of their parameter. */
export function measuredFitJson(file: string, fit: MeasuredFit): unknown {
  const { model, residual, cellsInSeries, search, curve } = fit;
  return {
    file,
    model,
    residual,
    cells_in_series: cellsInSeries,
    parameters: Object.fromEntries(
      fit.estimates.map(({ name, value, standardError, standing }) => [
        KEYS[name],
        {
          value: Number.isNaN(value) ? null : value,
          standard_error: standardError ?? null,
          standing,
        },
      ]),
    ),
    rms_exact_A: fit.rms.exact,
    rms_implicit_A: fit.rms.implicit,
    noise_A: Number.isNaN(fit.noise) ? null : fit.noise,
    isc_A: curve.shortCircuitCurrent,
    voc_V: curve.openCircuitVoltage,
    peaks: curve.peaks(),
    outliers: fit.outliers,
    outliers_judged: fit.outliersJudged,
    outliers_left_out: fit.outliersLeftOut,
    search,
    points: fit.points,
  };
}

const KEYS: Readonly<Record<EstimateName, string>> = {
  photocurrent: 'photocurrent_A',
  shuntConductance: 'shunt_conductance_S',
  seriesResistance: 'series_resistance_ohm',
  saturationCurrent: 'saturation_current_A',
  ideality: 'ideality_factor',
  secondSaturationCurrent: 'second_saturation_current_A',
  secondIdeality: 'second_ideality_factor',
};
