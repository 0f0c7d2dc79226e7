/** Modules of one type, as they leave the factory and as years on the roof leave them. */
import { argumentFault, Fault } from '../fault.js';
import { exp } from '../numeric/exponential.js';
import { log1p } from '../numeric/logarithm.js';
import { Random } from '../numeric/random.js';
import { aged, checkAgeing, type Ageing } from './ageing.js';
import { globalPeak } from './curve.js';
import { fitExactly } from './fit/exact.js';
import { idealityVoltageAtStc } from './fit/outcome.js';
import { Module } from './module.js';
import type { SingleDiode } from './single-diode.js';
import { SingleDiodeCurve } from './single-diode-curve.js';
import type { TemperatureBehaviour } from './translation.js';

/** How modules of a type differ when new: relative standard deviations, each from 0 to 0.2. */
export interface Spread {
  readonly shortCircuitCurrent?: number;
  readonly openCircuitVoltage?: number;
  readonly peakPower?: number;
}

export interface PopulationPlan {
  /** From 0 to 1,000,000. */
  readonly count: number;
  /** See `Random`. */
  readonly seed: number;
  /** None of it by default. */
  readonly spread?: Spread;
  readonly ageing?: Ageing & {
    /** Relative standard deviation of the yearly loss between modules, 0 to 2. Default 0. */
    readonly lossSpread?: number;
  };
}

/**
 * Modules around a nominal one. Isc, Voc and Pmp of a new module are those of the nominal one times
 * random factors, log-normal, of mean 1 and the standard deviations asked for; its curve meets them
 * exactly (to 1e-9), with the nominal ideality factor unless no such curve is feasible (`fitExactly`).
 * Then it ages.
 *
 * Isc and Voc vary independently. Where Pmp spreads more than both together, the fill factor varies
 * besides, independently of them. Where it spreads less, as in modules sorted by power, Pmp follows
 * Isc times Voc at the reduced rate and the fill factor makes up for it. Vmp and Imp share what the fill
 * factor does in equal parts.
 *
 * A draw without a feasible curve, of a fill factor beyond what junctions can have, is drawn anew: with
 * square modules and wide spreads of power that trims the upper tail.
 *
 * Module k (from 0) is the same whatever the count. Its temperature coefficients are the nominal ones
 * relative to its own Isc and Voc.
 * @throws Fault `ARGUMENT` for a plan out of its range; `NO_FEASIBLE_MODULE` where 100 draws in a
 * row leave no feasible curve.
 */
export function population(nominal: Module, plan: PopulationPlan): Module[] {
  const { count } = plan;
  if (!(Number.isSafeInteger(count) && count >= 0 && count <= MOST_MODULES)) {
    throw argumentFault('count', `a whole number from 0 to ${MOST_MODULES}`, count);
  }
  const member = populationOf(nominal, plan);
  return Array.from({ length: count }, (_, index) => member(index));
}

const MOST_MODULES = 1_000_000;

/** The same one by one, for populations too large to keep: module k from its number. */
export function populationOf(
  nominal: Module,
  plan: Omit<PopulationPlan, 'count'>,
): (index: number) => Module {
  const { seed, ageing } = plan;
  const spreads = logarithmicSpreads(plan.spread ?? {});
  if (ageing !== undefined) checkAgeing(ageing);
  const lossSpread = logarithmicSpread('lossSpread', ageing?.lossSpread ?? 0, 2);
  const key = keyPoints(nominal.reference);
  const random = new Random(seed);
  return (index) => {
    const own = random.split(`module ${index}`);
    const fresh = newDiode(nominal, key, spreads, own.split('factory'));
    const loss = Math.min(
      (ageing?.yearlyLoss ?? 0) * logNormal(lossSpread, own.split('ageing').normal()),
      MOST_LOSS,
    );
    const diode = ageing === undefined ? fresh : aged(fresh, { ...ageing, yearlyLoss: loss });
    const { name, cellsInSeries, behaviour } = nominal;
    const label = `${name} #${index}`;
    return new Module(label, cellsInSeries, diode, scaled(behaviour, key, keyPoints(diode)));
  };
}

const MOST_LOSS = 0.2;

/** Standard deviations of the logarithms. */
interface LogarithmicSpreads {
  readonly current: number;
  readonly voltage: number;
  readonly power: number;
}

function logarithmicSpreads(spread: Spread): LogarithmicSpreads {
  const { shortCircuitCurrent = 0, openCircuitVoltage = 0, peakPower } = spread;
  const current = logarithmicSpread('shortCircuitCurrent', shortCircuitCurrent, MOST_SPREAD);
  const voltage = logarithmicSpread('openCircuitVoltage', openCircuitVoltage, MOST_SPREAD);
  const both = Math.sqrt(current * current + voltage * voltage);
  // Left out, power follows from the others.
  const power =
    peakPower === undefined ? both : logarithmicSpread('peakPower', peakPower, MOST_SPREAD);
  return { current, voltage, power };
}

const MOST_SPREAD = 0.2;

function logarithmicSpread(field: string, spread: number, most: number): number {
  if (!(spread >= 0 && spread <= most)) throw argumentFault(field, `from 0 to ${most}`, spread);
  return Math.sqrt(log1p(spread * spread));
}

/** Mean 1, for a normal number. */
const logNormal = (deviation: number, normal: number): number =>
  exp(deviation * normal - 0.5 * deviation * deviation);

/** The three points of a curve at STC. */
interface KeyPoints {
  readonly shortCircuitCurrent: number;
  readonly openCircuitVoltage: number;
  readonly peakCurrent: number;
  readonly peakVoltage: number;
}

function keyPoints(diode: SingleDiode): KeyPoints {
  const curve = new SingleDiodeCurve(diode);
  const { voltage, current } = globalPeak(curve.peaks());
  return {
    shortCircuitCurrent: curve.shortCircuitCurrent,
    openCircuitVoltage: curve.openCircuitVoltage,
    peakCurrent: current,
    peakVoltage: voltage,
  };
}

function newDiode(
  nominal: Module,
  key: KeyPoints,
  spreads: LogarithmicSpreads,
  random: Random,
): SingleDiode {
  const { technology } = nominal.behaviour;
  const { cellsInSeries, reference } = nominal;
  const ideality = reference.idealityVoltage / idealityVoltageAtStc({ cellsInSeries }, 1);
  for (let draw = 0; draw < MOST_DRAWS; draw += 1) {
    const points = drawnPoints(key, spreads, random);
    const sheet = { name: nominal.name, technology, cellsInSeries, ...points };
    const fit = fitExactly({ ...sheet, shortCircuitCoefficient: 0 }, { ideality });
    if (fit.solved) return fit.diode;
  }
  throw new Fault('input', {
    code: 'NO_FEASIBLE_MODULE',
    message: `${MOST_DRAWS} draws around ${nominal.name} gave no module that can be.`,
    hint: 'Is the nominal module one that gives power, and its spread of peakPower a sensible one?',
  });
}

const MOST_DRAWS = 100;

function drawnPoints(key: KeyPoints, spreads: LogarithmicSpreads, random: Random): KeyPoints {
  const { current, voltage, power } = spreads;
  const [byCurrent, byVoltage] = [random.normal(), random.normal()];
  const both = current * current + voltage * voltage;
  const own = power * power - both;
  // In units of standard deviations of the logarithm of Pmp.
  const shared = both > 0 ? (current * byCurrent + voltage * byVoltage) / Math.sqrt(both) : 0;
  const share = Math.min(Math.sqrt(both), power);
  const rest = own > 0 ? Math.sqrt(own) * random.normal() : 0;
  const currentFactor = logNormal(current, byCurrent);
  const voltageFactor = logNormal(voltage, byVoltage);
  const powerFactor = exp(share * shared + rest - 0.5 * power * power);
  const knee = Math.sqrt(powerFactor / (currentFactor * voltageFactor));
  return {
    shortCircuitCurrent: key.shortCircuitCurrent * currentFactor,
    openCircuitVoltage: key.openCircuitVoltage * voltageFactor,
    peakCurrent: key.peakCurrent * currentFactor * knee,
    peakVoltage: key.peakVoltage * voltageFactor * knee,
  };
}

/** Coefficients relative to the module's own Isc and Voc. */
function scaled(
  behaviour: TemperatureBehaviour,
  from: KeyPoints,
  to: KeyPoints,
): TemperatureBehaviour {
  const current = to.shortCircuitCurrent / from.shortCircuitCurrent;
  const shortCircuitCoefficient = behaviour.shortCircuitCoefficient * current;
  if (behaviour.translation !== 'villalva-2009') return { ...behaviour, shortCircuitCoefficient };
  const voltage = to.openCircuitVoltage / from.openCircuitVoltage;
  return {
    ...behaviour,
    shortCircuitCoefficient,
    openCircuitCoefficient: behaviour.openCircuitCoefficient * voltage,
    shortCircuitCurrent: behaviour.shortCircuitCurrent * current,
    openCircuitVoltage: behaviour.openCircuitVoltage * voltage,
  };
}
