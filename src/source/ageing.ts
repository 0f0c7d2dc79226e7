import { argumentFault } from '../fault.js';
import { exp } from '../numeric/exponential.js';
import { log1p } from '../numeric/logarithm.js';
import { findRoot } from '../numeric/root.js';
import type { Watts } from '../quantities.js';
import { globalPeak } from './curve.js';
import type { SingleDiode } from './single-diode.js';
import { SingleDiodeCurve } from './single-diode-curve.js';

/** What years under the sun do to a module. */
export interface Ageing {
  /** From 0 to 100. */
  readonly years: number;
  /** Relative loss of peak power in a year, from 0 to 0.2; each year takes it of what is left. */
  readonly yearlyLoss: number;
  /** Relative growth of series resistance in a year, from 0 to 1; compound as well. Default 0. */
  readonly seriesResistanceGrowth?: number;
}

/**
 * The five parameters at STC after years. Corroding contacts raise Rs as asked; what they leave of the
 * loss of power is taken off the photocurrent, as browning and soiled glass do, which are most of what
 * modules lose. Diode and shunt path stay. Where the growth of Rs alone costs more than the loss
 * asked for, the power is what it leaves: the loss is then larger than asked.
 *
 * Accuracy: peak power is (1 - yearlyLoss)^years of before, to 1e-12 relative.
 * @throws Fault `ARGUMENT`.
 */
export function aged(diode: SingleDiode, ageing: Ageing): SingleDiode {
  checkAgeing(ageing);
  const { years, yearlyLoss, seriesResistanceGrowth = 0 } = ageing;
  const seriesResistance = diode.seriesResistance * exp(years * log1p(seriesResistanceGrowth));
  const corroded = { ...diode, seriesResistance };
  const wanted = peakPower(diode) * exp(years * log1p(-yearlyLoss));
  const excess = (share: number): Watts => peakPower(dimmed(corroded, share)) - wanted;
  const found = findRoot(excess, 0, 1);
  return found.status === 'converged' ? dimmed(corroded, found.root) : corroded;
}

/** @throws Fault `ARGUMENT` for ageing out of its range. */
export function checkAgeing({ years, yearlyLoss, seriesResistanceGrowth = 0 }: Ageing): void {
  const within = (field: string, value: number, most: number): void => {
    if (!(value >= 0 && value <= most)) throw argumentFault(field, `from 0 to ${most}`, value);
  };
  within('years', years, 100);
  within('yearlyLoss', yearlyLoss, 0.2);
  within('seriesResistanceGrowth', seriesResistanceGrowth, 1);
}

const dimmed = (diode: SingleDiode, share: number): SingleDiode => ({
  ...diode,
  photocurrent: share * diode.photocurrent,
});

const peakPower = (diode: SingleDiode): Watts =>
  globalPeak(new SingleDiodeCurve(diode).peaks()).power;
