/** What a reader of a fit must not miss. */
import type { Problem } from '../../fault.js';
import { TECHNOLOGIES, type TechnologyName } from '../technology.js';
import type { EstimateName, Standing } from './estimates.js';
import type { MeasuredFit } from './measured-fit.js';

/** Outliers by line, an optimum not confirmed, parameters the data leave open, odd cell voltages. */
export function measuredFitWarnings(fit: MeasuredFit, technology: TechnologyName): Problem[] {
  return [
    ...outlierWarnings(fit),
    ...searchWarnings(fit),
    ...voltageWarnings(fit, technology),
    ...standingWarnings(fit),
  ];
}

function outlierWarnings({ outliers, outliersLeftOut, outliersJudged }: MeasuredFit): Problem[] {
  if (!outliersJudged) {
    const message = 'too few points to tell outliers: two for each parameter are needed.';
    return [{ code: 'OUTLIERS_NOT_JUDGED', message }];
  }
  return outliers.map(({ line, voltage, current, residual, studentised }) => ({
    code: 'OUTLIER',
    ...(line === undefined ? {} : { line }),
    message:
      `${voltage} V, ${current} A is ${milli(residual)} mA off the curve of the other points, ` +
      `${Math.abs(studentised).toFixed(1)} standard deviations; ` +
      `${outliersLeftOut ? 'left out' : 'fitted all the same'}.`,
    ...(outliersLeftOut
      ? {}
      : { hint: 'Check the point, or leave out all such: --without-outliers.' }),
  }));
}

const milli = (current: number): string =>
  String(Number((1000 * Math.abs(current)).toPrecision(3)));

function searchWarnings({ search }: MeasuredFit): Problem[] {
  if (search.isConfirmed) return [];
  const message =
    `the optimum is not confirmed: ${search.agreeing} of ${search.tried} searches led to it ` +
    `(the best one ended as ${search.end}).`;
  return [{ code: 'OPTIMUM_NOT_CONFIRMED', message }];
}

function voltageWarnings(fit: MeasuredFit, technology: TechnologyName): Problem[] {
  const [least, most] = TECHNOLOGIES[technology].cellVoltage;
  const perCell = fit.curve.openCircuitVoltage / fit.cellsInSeries;
  // Light a hundred times weaker, or cells 100 K warmer, lower a cell's voltage by a third.
  if (perCell >= 0.6 * least && perCell <= most) return [];
  return [
    {
      code: 'ODD_CELL_VOLTAGE',
      message:
        `open circuit lies at ${perCell.toPrecision(3)} V a cell; expected ${least} to ${most} V ` +
        `for ${TECHNOLOGIES[technology].title}.`,
      hint: 'Check the number of cells, the units, and that the columns are not swapped.',
    },
  ];
}

function standingWarnings({ estimates }: MeasuredFit): Problem[] {
  return estimates.flatMap(({ name, standing }) =>
    standing === 'determined'
      ? []
      : [{ code: 'NOT_DETERMINED', message: `${TITLES[name]}: ${REASONS[standing]}.` }],
  );
}

const TITLES: Readonly<Record<EstimateName, string>> = {
  photocurrent: 'photocurrent',
  shuntConductance: 'shunt resistance',
  seriesResistance: 'series resistance',
  saturationCurrent: 'saturation current',
  ideality: 'ideality factor',
  secondSaturationCurrent: 'saturation current of the second diode',
  secondIdeality: 'ideality factor of the second diode',
};

const REASONS: Readonly<Record<Exclude<Standing, 'determined'>, string>> = {
  loose: 'these points hardly determine it (two standard errors reach its value)',
  'at-bound': 'held by a bound of the search; the points would have it beyond',
  unknown: 'no point is to spare that could show how well it is determined',
  undetermined: 'these points do not determine it at all',
};
