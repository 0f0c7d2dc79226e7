/**
 * What settles the ideality factor where three points and a flat peak are met: one more number of
 * the datasheet, or an ideality factor itself.
 */
import { argumentFault } from '../../fault.js';
import { exp } from '../../numeric/exponential.js';
import { STC_IRRADIANCE, STC_TEMPERATURE, type Kelvin } from '../../quantities.js';
import type { Datasheet } from '../datasheet.js';
import { junctionConductance, junctionVoltage, type SingleDiode } from '../single-diode.js';
import { singleDiodePeak } from '../single-diode-peak.js';
import { TECHNOLOGIES } from '../technology.js';
import { saturationRatio, translate } from '../translation.js';
import type { ExactCurve } from './exact-curves.js';
import { idealityVoltageAtStc } from './outcome.js';

/** In the order in which they are taken where nothing else is asked for. */
export const FIFTH_CONDITIONS = [
  /** Open circuit again, `span` kelvin from 25 °C, as the coefficient of Voc says (De Soto 2006). */
  'beta',
  /** Peak power there as its coefficient says. */
  'gamma',
  'slope-at-isc',
  'slope-at-voc',
  /** The technology's typical ideality factor. */
  'typical',
] as const;
export type FifthName = (typeof FIFTH_CONDITIONS)[number];

/** A datasheet that may lack what settles A: without any, the technology's typical A does. */
export type DatasheetOfPoints = Omit<Datasheet, 'openCircuitCoefficient'> &
  Partial<Pick<Datasheet, 'openCircuitCoefficient'>>;

export interface FifthChoice {
  /** By default the first of FIFTH_CONDITIONS that the datasheet gives. */
  readonly meet?: FifthName;
  /** A of one cell, from 0.1 to 10, which is then the condition. */
  readonly ideality?: number;
  /**
   * Kelvin from 25 °C at which the coefficients are held to be right, from -60 to 60 but not 0.
   * Coefficients are slopes of lines through measurements from about 25 to some 50 °C or more, so a
   * curve that meets them over 25 K agrees with what was measured; 25 is the default. De Soto and
   * others 2006 take a few kelvin, which meets the slope at 25 °C; A differs by 0.001 to 0.002.
   */
  readonly span?: Kelvin;
}

export interface FifthCondition {
  readonly name: FifthName | 'ideality';
  /** What the datasheet says, in SI units. */
  readonly wanted: number;
  /** The same of a curve. */
  value(curve: ExactCurve): number;
  /** Zero where the condition is met, of opposite signs on its two sides; quick to compute. */
  residual(curve: ExactCurve): number;
}

/**
 * @throws Fault `ARGUMENT` for a condition that the datasheet gives no number for, an ideality
 * factor outside 0.1 to 10 or a span out of range.
 */
export function fifthCondition(datasheet: DatasheetOfPoints, choice: FifthChoice): FifthCondition {
  const { ideality, span = DEFAULT_SPAN } = choice;
  if (!(Math.abs(span) <= 60 && span !== 0)) {
    throw argumentFault('span', 'from -60 to 60 K and not 0', span);
  }
  if (ideality !== undefined) {
    if (!(ideality >= 0.1 && ideality <= 10)) {
      throw argumentFault('ideality', 'from 0.1 to 10', ideality);
    }
    return idealityIs(datasheet, 'ideality', ideality);
  }
  const name = choice.meet ?? FIFTH_CONDITIONS.find((each) => isGiven(datasheet, each))!;
  if (!isGiven(datasheet, name)) {
    throw argumentFault('meet', 'a condition that the datasheet gives a number for', name);
  }
  return conditionOf(datasheet, name, STC_TEMPERATURE + span);
}

/** As long as that over which `agreements` holds the coefficients against the model. */
export const DEFAULT_SPAN: Kelvin = 25;

function isGiven(datasheet: DatasheetOfPoints, name: FifthName): boolean {
  switch (name) {
    case 'beta':
      return datasheet.openCircuitCoefficient !== undefined;
    case 'gamma':
      return datasheet.peakPowerCoefficient !== undefined;
    case 'slope-at-isc':
      return datasheet.slopeAtShortCircuit !== undefined;
    case 'slope-at-voc':
      return datasheet.slopeAtOpenCircuit !== undefined;
    case 'typical':
      return true;
  }
}

function conditionOf(
  datasheet: DatasheetOfPoints,
  name: FifthName,
  temperature: Kelvin,
): FifthCondition {
  switch (name) {
    case 'beta':
      return openCircuitMoves(datasheet, datasheet.openCircuitCoefficient!, temperature);
    case 'gamma':
      return peakPowerMoves(datasheet, datasheet.peakPowerCoefficient!, temperature);
    case 'slope-at-isc':
      return slopeIs(name, datasheet.slopeAtShortCircuit!, ({ diode }) =>
        junctionConductance(diode, datasheet.shortCircuitCurrent * diode.seriesResistance),
      );
    case 'slope-at-voc':
      return slopeIs(
        name,
        datasheet.slopeAtOpenCircuit!,
        ({ diode, diodeCurrent }) =>
          // Not by way of I0, which may have underflowed.
          diodeCurrent / diode.idealityVoltage + diode.shuntConductance,
      );
    case 'typical':
      return idealityIs(datasheet, name, TECHNOLOGIES[datasheet.technology].typicalIdeality);
  }
}

/** The current at the voltage that the coefficient says is open circuit is zero. */
function openCircuitMoves(
  datasheet: DatasheetOfPoints,
  wanted: number,
  temperature: Kelvin,
): FifthCondition {
  const { openCircuitVoltage, shortCircuitCoefficient, technology } = datasheet;
  const rise = temperature - STC_TEMPERATURE;
  const ratio = temperature / STC_TEMPERATURE;
  const growth = saturationRatio(technology, temperature);
  const voltage = openCircuitVoltage + wanted * rise;
  const photocurrentRise = shortCircuitCoefficient * rise;
  const direction = rise > 0 ? 1 : -1;
  return {
    name: 'beta',
    wanted,
    value: ({ diode }) =>
      (junctionVoltage(translated(datasheet, diode, temperature), 0) - openCircuitVoltage) / rise,
    residual: ({ diode, diodeCurrent }) => {
      const a = diode.idealityVoltage;
      const diodeThen = diodeCurrent * growth * exp((voltage / ratio - openCircuitVoltage) / a);
      const current =
        diode.photocurrent +
        photocurrentRise -
        (diodeThen - growth * diode.saturationCurrent) -
        voltage * diode.shuntConductance;
      return direction * current;
    },
  };
}

function peakPowerMoves(
  datasheet: DatasheetOfPoints,
  wanted: number,
  temperature: Kelvin,
): FifthCondition {
  const rise = temperature - STC_TEMPERATURE;
  const power = datasheet.peakVoltage * datasheet.peakCurrent;
  const value = ({ diode }: ExactCurve): number => {
    const then = translated(datasheet, diode, temperature);
    return (singleDiodePeak(then, junctionVoltage(then, 0)).power / power - 1) / rise;
  };
  return { name: 'gamma', wanted, value, residual: (curve) => value(curve) - wanted };
}

function slopeIs(
  name: 'slope-at-isc' | 'slope-at-voc',
  wanted: number,
  conductance: (curve: ExactCurve) => number,
): FifthCondition {
  const value = (curve: ExactCurve): number => {
    const g = conductance(curve);
    return -g / (1 + curve.diode.seriesResistance * g);
  };
  return { name, wanted, value, residual: (curve) => value(curve) - wanted };
}

function idealityIs(
  datasheet: DatasheetOfPoints,
  name: 'ideality' | 'typical',
  wanted: number,
): FifthCondition {
  const perFactor = idealityVoltageAtStc(datasheet, 1);
  const value = ({ diode }: ExactCurve): number => diode.idealityVoltage / perFactor;
  return { name, wanted, value, residual: (curve) => value(curve) - wanted };
}

const translated = (
  { technology, shortCircuitCoefficient }: DatasheetOfPoints,
  diode: SingleDiode,
  temperature: Kelvin,
): SingleDiode =>
  translate(diode, { technology, shortCircuitCoefficient }, STC_IRRADIANCE, temperature);
