import { drawTraces } from '../report/terminal-picture.js';
import type { Estimate, EstimateName, Standing } from '../source/measured/estimates.js';
import type { MeasuredFit } from '../source/measured/measured-fit.js';
import { colours, figure, printLine, printTable, showsUnicode } from './print.js';

/** Parameters, errors in both conventions, residuals and outliers of a measured fit. */
export function printMeasuredFit(file: string, fit: MeasuredFit): void {
  const { search, rms, curve } = fit;
  printLine(colours.bold(`${file}: ${MODELS[fit.model]}, least ${fit.residual} residuals`));
  printLine(
    `${fit.points.length} points; ${search.agreeing} of ${search.tried} searches led to this optimum` +
      `${search.isConfirmed ? '' : ' (not confirmed)'}.`,
  );
  printLine();
  printTable(
    ['parameter as measured', 'value', 'standard error', 'unit', 'data'],
    fit.estimates.map((estimate) => parameterRow(estimate)),
  );
  printLine();
  printTable(
    ['root mean square of residuals', 'mA'],
    [
      ['exact: current of the model less measured', figure(1000 * rms.exact, 6)],
      ['implicit: equation with measured V and I', figure(1000 * rms.implicit, 6)],
    ],
  );
  printLine();
  const { voltage, current, power } = curve.peaks()[0]!;
  printLine(
    `  Isc ${figure(curve.shortCircuitCurrent, 6)} A, Voc ${figure(curve.openCircuitVoltage, 6)} V, ` +
      `peak ${figure(power, 6)} W at ${figure(voltage, 6)} V, ${figure(current, 6)} A`,
  );
  printLine();
  for (const line of residualPicture(fit)) printLine(`  ${line}`);
  printOutliers(fit);
}

function parameterRow({ name, value, standardError, standing }: Estimate): string[] {
  const data = STANDINGS[standing];
  if (name !== 'shuntConductance') {
    const [title, unit] = TITLES[name];
    const error = standardError === undefined ? '' : figure(standardError, 3);
    return [title, Number.isNaN(value) ? '' : figure(value, 8), error, unit, data];
  }
  // Rsh = 1 / Gsh, and so dRsh = dGsh / Gsh².
  const error =
    standardError === undefined || value === 0 ? '' : figure(standardError / (value * value), 3);
  return ['shunt resistance Rsh', figure(1 / value, 8), error, 'ohm', data];
}

const MODELS = { single: 'single-diode equation', double: 'double-diode equation' } as const;

const TITLES: Readonly<Record<Exclude<EstimateName, 'shuntConductance'>, [string, string]>> = {
  photocurrent: ['photocurrent Iph', 'A'],
  seriesResistance: ['series resistance Rs', 'ohm'],
  saturationCurrent: ['saturation current I0', 'A'],
  ideality: ['ideality factor A', ''],
  secondSaturationCurrent: ['second saturation current', 'A'],
  secondIdeality: ['second ideality factor', ''],
};

const STANDINGS: Readonly<Record<Standing, string>> = {
  determined: 'determine it',
  loose: 'hardly determine it',
  'at-bound': 'push it to a bound',
  unknown: 'show no noise',
  undetermined: 'do not determine it',
};

function residualPicture({ points, curve }: MeasuredFit): string[] {
  const x = points.map(({ voltage }) => voltage);
  const paints = [colours.cyan, colours.yellow];
  return drawTraces(
    [
      { mark: 'i', title: 'current', unit: 'A', x, y: x.map((v) => curve.current(v)) },
      {
        mark: 'r',
        title: 'size of residual',
        unit: 'mA',
        x,
        y: points.map(({ residual }) => 1000 * Math.abs(residual)),
      },
    ],
    {
      ...{ width: 60, height: 14, dots: showsUnicode(), xTitle: 'V' },
      paint: (text, trace) => paints[trace]!(text),
    },
  );
}

function printOutliers({ outliers, outliersLeftOut, outliersJudged }: MeasuredFit): void {
  printLine();
  if (!outliersJudged) return;
  if (outliers.length === 0) {
    printLine('  No point is an outlier.');
    return;
  }
  printLine(`  Outliers, ${outliersLeftOut ? 'left out of the fit' : 'part of the fit'}:`);
  printTable(
    ['line', 'voltage V', 'current A', 'off by mA', 'standard deviations'],
    outliers.map(({ line, voltage, current, residual, studentised }) => [
      String(line ?? ''),
      figure(voltage, 6),
      figure(current, 6),
      figure(1000 * residual, 4),
      studentised.toFixed(1),
    ]),
  );
}
