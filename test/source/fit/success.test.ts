/**
 * How well the default fit does on what modules' datasheets say: thousands of random physical modules,
 * rounded as datasheets are, fitted, and compared with the modules themselves.
 *
 * The modules (invented, within what the trade makes): mono- and polycrystalline silicon and thin film,
 * 36 to 144 cells, 0.5 to 18 A; Rs takes 0.5 to 6 % of Voc at Isc, Rsh is 15 to 1000 times Voc/Isc;
 * A as the published coefficients of Voc imply for each material (from memory).
 *
 * The datasheets: volts to 0.01 V; amperes to 0.01 A, below 1 A to 0.001 A; coefficients to 0.001 and
 * 0.01 %/K. Common practice; one decimal of volts is also common, and its figures are printed too.
 */
import { expect, test } from 'vitest';
import { expm1 } from '../../../src/numeric/exponential.js';
import { Random } from '../../../src/numeric/random.js';
import { fromCelsius, thermalVoltage, uniformConditions } from '../../../src/quantities.js';
import type { Datasheet } from '../../../src/source/datasheet.js';
import { fitExactly, type ExactOutcome } from '../../../src/source/fit/exact.js';
import { Module } from '../../../src/source/module.js';
import type { TechnologyName } from '../../../src/source/technology.js';

interface Kind {
  readonly technology: TechnologyName;
  /** Voc of one cell. */
  readonly cellVoltage: readonly [number, number];
  readonly ideality: readonly [number, number];
}
const KINDS: readonly Kind[] = [
  { technology: 'mono-si', cellVoltage: [0.62, 0.74], ideality: [0.95, 1.25] },
  { technology: 'poly-si', cellVoltage: [0.59, 0.65], ideality: [1.0, 1.3] },
  { technology: 'cdte', cellVoltage: [0.75, 0.88], ideality: [1.2, 1.8] },
  { technology: 'cigs', cellVoltage: [0.6, 0.72], ideality: [1.1, 1.7] },
  { technology: 'cis', cellVoltage: [0.5, 0.62], ideality: [1.1, 1.7] },
];

function randomModule(random: Random): Module {
  const { technology, cellVoltage, ideality } = KINDS[random.integer(0, KINDS.length - 1)]!;
  const cells = random.integer(36, 144);
  const photocurrent = random.between(0.5, 18);
  const idealityVoltage = cells * random.between(...ideality) * thermalVoltage(fromCelsius(25));
  const voltage = cells * random.between(...cellVoltage);
  const resistance = voltage / photocurrent;
  const shuntConductance = 1 / (resistance * 15 * Math.pow(1000 / 15, random.uniform()));
  const diode = {
    photocurrent,
    idealityVoltage,
    saturationCurrent:
      (photocurrent - voltage * shuntConductance) / expm1(voltage / idealityVoltage),
    seriesResistance: resistance * random.between(0.005, 0.06),
    shuntConductance,
  };
  const shortCircuitCoefficient = photocurrent * random.between(0.0002, 0.0008);
  return new Module('random', cells, diode, { technology, shortCircuitCoefficient });
}

/** Decimals printed. */
interface Print {
  readonly volts: number;
  readonly amperes: (value: number) => number;
  readonly alpha: number;
  readonly beta: number;
}
const USUAL: Print = { volts: 2, amperes: (i) => (i < 1 ? 3 : 2), alpha: 3, beta: 2 };

const at = (module: Module, irradiance: number, celsius: number) =>
  module.at(uniformConditions(irradiance, fromCelsius(celsius)));

function printed(module: Module, print: Print): Datasheet {
  const curve = at(module, 1000, 25);
  const peak = curve.peaks()[0]!;
  const { shortCircuitCurrent: isc, openCircuitVoltage: voc } = curve;
  const round = (value: number, decimals: number): number => Number(value.toFixed(decimals));
  const amperes = (value: number): number => round(value, print.amperes(value));
  const volts = (value: number): number => round(value, print.volts);
  const beta = (at(module, 1000, 50).openCircuitVoltage - voc) / 25;
  const percent = (value: number, decimals: number): number => round(100 * value, decimals) / 100;
  const { technology, shortCircuitCoefficient } = module.behaviour;
  return {
    ...{ name: module.name, technology, cellsInSeries: module.cellsInSeries },
    shortCircuitCurrent: amperes(isc),
    openCircuitVoltage: volts(voc),
    peakCurrent: amperes(peak.current),
    peakVoltage: volts(peak.voltage),
    shortCircuitCoefficient: amperes(isc) * percent(shortCircuitCoefficient / isc, print.alpha),
    openCircuitCoefficient: volts(voc) * percent(beta / voc, print.beta),
  };
}

interface Result {
  readonly fit: ExactOutcome;
  readonly sheet: Datasheet;
  /** Largest relative miss of the three points. */
  readonly points: number;
  /** |dP/dV| at Vmp over Imp. */
  readonly slope: number;
  /** Largest difference between the curves at STC, up to open circuit, over Isc. */
  readonly curve: number;
  /** Relative differences of peak power. */
  readonly dim: number;
  readonly hot: number;
}

function resultOf(module: Module, print: Print): Result {
  const sheet = printed(module, print);
  const fit = fitExactly(sheet);
  const { technology, shortCircuitCoefficient } = sheet;
  const behaviour = { technology, shortCircuitCoefficient };
  const fitted = new Module('fitted', sheet.cellsInSeries, fit.diode, behaviour);
  const [curve, truth] = [at(fitted, 1000, 25), at(module, 1000, 25)];
  const { peakVoltage: vmp, peakCurrent: imp, openCircuitVoltage: voc } = sheet;
  const isc = truth.shortCircuitCurrent;
  let difference = 0;
  for (let i = 0; i <= 100; i += 1) {
    const voltage = (Math.max(voc, truth.openCircuitVoltage) * i) / 100;
    // Where one is at open circuit already, the source gives nothing.
    const [mine, its] = [curve, truth].map((each) => Math.max(each.current(voltage), 0));
    difference = Math.max(difference, Math.abs(mine! - its!) / isc);
  }
  const power = (irradiance: number, celsius: number): number => {
    const [mine, its] = [fitted, module].map((each) => at(each, irradiance, celsius).peaks()[0]!);
    return Math.abs(mine!.power / its!.power - 1);
  };
  return {
    fit,
    sheet,
    points: Math.max(
      Math.abs(curve.shortCircuitCurrent / sheet.shortCircuitCurrent - 1),
      Math.abs(curve.openCircuitVoltage / voc - 1),
      Math.abs(curve.current(vmp) / imp - 1),
    ),
    slope: Math.abs(1 + (vmp * curve.slope(vmp)) / imp),
    curve: difference,
    dim: power(200, 25),
    hot: power(1000, 65),
  };
}

function resultsOf(count: number, seed: number, print: Print): Result[] {
  const random = new Random(seed);
  return Array.from({ length: count }, (_, k) =>
    resultOf(randomModule(random.split(`module ${k}`)), print),
  );
}

const share = (results: readonly Result[], holds: (result: Result) => boolean): number =>
  results.filter(holds).length / results.length;
const most = (results: readonly Result[], of: (result: Result) => number): number =>
  Math.max(...results.map(of));
const percent = (ratio: number): string => `${(100 * ratio).toFixed(2)} %`;

function summary(title: string, results: readonly Result[]): string {
  return (
    `${title}: ${results.length} modules, ${percent(share(results, (r) => r.fit.solved))} solved; ` +
    `points to ${most(results, (r) => r.points).toExponential(1)}, ` +
    `slope of power to ${most(results, (r) => r.slope).toExponential(1)} Imp; ` +
    `STC curve within 0.5 % of Isc: ${percent(share(results, (r) => r.curve <= 0.005))}; ` +
    `Pmp within 1 % at 200 W/m²: ${percent(share(results, (r) => r.dim <= 0.01))}, ` +
    `at 65 °C: ${percent(share(results, (r) => r.hot <= 0.01))}`
  );
}

test('The exact fit solves every datasheet, to 1e-9, and comes near 99 % of the modules behind them', () => {
  const results = resultsOf(6000, 2006, USUAL);
  console.log(summary('Two decimals', results));
  expect(share(results, (r) => r.fit.solved)).toBe(1);
  expect(most(results, (r) => r.points)).toBeLessThan(1e-9);
  expect(most(results, (r) => r.slope)).toBeLessThan(1e-9);
  expect(share(results, (r) => r.curve <= 0.005)).toBeGreaterThanOrEqual(0.99);
  expect(share(results, (r) => r.dim <= 0.01)).toBeGreaterThanOrEqual(0.95);
  expect(share(results, (r) => r.hot <= 0.01)).toBeGreaterThanOrEqual(0.95);

  // Every miss has one cause: the last digit of Isc and Imp is so large a part of Isc - Imp (3 % and
  // more) that for the A which the coefficient of Voc takes no shunt path is left. The nearest A misses
  // the coefficient, and power at 65 °C with it. A datasheet with one digit more has none of this.
  for (const { fit, sheet } of results.filter(isMissed)) {
    expect(fit.fifth!.met).toBe(false);
    expect(fit.feasible!.mostEnd).toBe('shunt-path');
    const digit = Math.pow(10, -USUAL.amperes(sheet.shortCircuitCurrent));
    expect(digit / (sheet.shortCircuitCurrent - sheet.peakCurrent)).toBeGreaterThan(0.03);
  }
});

const isMissed = ({ curve, dim, hot }: Result): boolean =>
  curve > 0.005 || dim > 0.01 || hot > 0.01;

test('With two more digits on the datasheet no module is missed: the misses are rounding alone', () => {
  const finer: Print = { volts: 4, amperes: (i) => USUAL.amperes(i) + 2, alpha: 5, beta: 4 };
  const results = resultsOf(6000, 2006, finer);
  console.log(summary('Two digits more', results));
  expect(share(results, (r) => r.fit.solved && r.fit.fifth!.met)).toBe(1);
  expect(results.filter(isMissed)).toEqual([]);
});

test('With one decimal of volts the curve is met only as far as Voc is: 0.05 V of it is up to 1 % of Isc', () => {
  const results = resultsOf(3000, 2006, { ...USUAL, volts: 1 });
  console.log(summary('One decimal of volts', results));
  expect(share(results, (r) => r.fit.solved)).toBe(1);
  expect(most(results, (r) => r.points)).toBeLessThan(1e-9);
  expect(share(results, (r) => r.dim <= 0.01)).toBeGreaterThanOrEqual(0.95);
  expect(share(results, (r) => r.hot <= 0.01)).toBeGreaterThanOrEqual(0.95);
  // Half a digit of volts at the steep end of the curve, and half as much again for its bend; or the
  // cause above.
  for (const { sheet, curve, fit } of results.filter((r) => r.curve > 0.005)) {
    const steepness = steepnessAtOpenCircuit(fit);
    const open = (0.05 * steepness) / sheet.shortCircuitCurrent;
    expect(curve < 1.5 * open || !fit.fifth!.met).toBe(true);
  }
});

function steepnessAtOpenCircuit({ diode }: ExactOutcome): number {
  const g = diode.photocurrent / diode.idealityVoltage;
  return g / (1 + diode.seriesResistance * g);
}
