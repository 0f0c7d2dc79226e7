/** How well a curve meets what the datasheet says. */
import { uniformConditions, STC_IRRADIANCE, STC_TEMPERATURE } from '../../quantities.js';
import { globalPeak } from '../curve.js';
import type { Datasheet } from '../datasheet.js';
import type { Module } from '../module.js';

/** One number of the datasheet beside the model's. */
export interface Agreement {
  /** Name of the number as it stands in the datasheet file, in the file's unit. */
  readonly field: AgreementField;
  readonly datasheet: number;
  readonly model: number;
  /** (model - datasheet) / |datasheet|; the model's number itself where the datasheet says 0. */
  readonly miss: number;
}

export type AgreementField =
  | 'isc_A'
  | 'voc_V'
  | 'vmp_V'
  | 'imp_A'
  | 'pmp_W'
  | 'current_at_vmp_A'
  | 'slope_at_isc_A_per_V'
  | 'slope_at_voc_A_per_V'
  | 'beta_voc_mV_per_K'
  | 'gamma_pmp_pct_per_K';

/**
 * Every number of the datasheet that the model can be asked for. `vmp_V`, `imp_A` and `pmp_W` are
 * the peak of the model's curve; `current_at_vmp_A` is its current at the datasheet's Vmp, which
 * tells a curve through the point from one that also peaks there. The temperature coefficients
 * are those of the translated model over 25 to 50 °C at 1000 W/m².
 */
export function agreements(module: Module, datasheet: Datasheet): Agreement[] {
  const curve = module.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE));
  const warm = module.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE + COEFFICIENT_SPAN));
  const peak = globalPeak(curve.peaks());
  const warmPower = globalPeak(warm.peaks()).power;
  const beta = (warm.openCircuitVoltage - curve.openCircuitVoltage) / COEFFICIENT_SPAN;
  const gamma = (warmPower / peak.power - 1) / COEFFICIENT_SPAN;
  const { peakVoltage, peakCurrent, slopeAtShortCircuit, slopeAtOpenCircuit } = datasheet;
  const rows: [AgreementField, number | undefined, number][] = [
    ['isc_A', datasheet.shortCircuitCurrent, curve.shortCircuitCurrent],
    ['voc_V', datasheet.openCircuitVoltage, curve.openCircuitVoltage],
    ['vmp_V', peakVoltage, peak.voltage],
    ['imp_A', peakCurrent, peak.current],
    ['pmp_W', peakVoltage * peakCurrent, peak.power],
    ['current_at_vmp_A', peakCurrent, curve.current(peakVoltage)],
    ['slope_at_isc_A_per_V', slopeAtShortCircuit, curve.slope(0)],
    ['slope_at_voc_A_per_V', slopeAtOpenCircuit, curve.slope(curve.openCircuitVoltage)],
    ['beta_voc_mV_per_K', datasheet.openCircuitCoefficient * 1000, beta * 1000],
    ['gamma_pmp_pct_per_K', percent(datasheet.peakPowerCoefficient), gamma * 100],
  ];
  return rows.flatMap(([field, said, model]) =>
    said === undefined
      ? []
      : [
          {
            field,
            datasheet: said,
            model,
            miss: said === 0 ? model : (model - said) / Math.abs(said),
          },
        ],
  );
}

const COEFFICIENT_SPAN = 25;

const percent = (ratio: number | undefined): number | undefined =>
  ratio === undefined ? undefined : ratio * 100;
