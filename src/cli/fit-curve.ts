import { Command, Option } from '@commander-js/extra-typings';
import { basename, extname } from 'node:path';
import { fromCelsius } from '../quantities.js';
import type { MeasuredFit } from '../source/measured/measured-fit.js';
import { TECHNOLOGIES, type TechnologyName } from '../source/technology.js';
import { numberOption, wholeOption } from './options.js';

const technologies = Object.keys(TECHNOLOGIES) as TechnologyName[];

export function fitCurveCommand() {
  return new Command('fit-curve')
    .description('Fit the single- or double-diode equation to a measured curve (CSV of V and I).')
    .argument('<curve>', 'CSV file with a header that names the columns and units')
    .requiredOption('--cells <N>', 'cells in series', wholeOption(1, 400))
    .requiredOption('--temperature <C>', 'of the cells, as measured', numberOption(-60, 120, ' °C'))
    .requiredOption('--irradiance <W/m2>', 'as measured', numberOption(1, 2000, ' W/m2'))
    .addOption(
      new Option('--technology <name>', 'material of the cells')
        .choices(technologies)
        .default('mono-si'),
    )
    .addOption(
      new Option('--model <diodes>', 'one diode or two')
        .choices(['single', 'double'] as const)
        .default('single' as const),
    )
    .addOption(
      new Option('--residual <kind>', 'what is minimised: error of the current, or of the equation')
        .choices(['exact', 'implicit'] as const)
        .default('exact' as const),
    )
    .option('--voltage-column <name>', 'where the header leaves it open')
    .option('--current-column <name>', 'where the header leaves it open')
    .option('--decimal-comma', 'numbers have decimal commas')
    .option('--negate-current', 'the instrument counts currents as a load does')
    .option('--without-outliers', 'leave out what does not belong to the curve of the others')
    .option(
      '--alpha <mA/K>',
      'temperature coefficient of Isc, for -o',
      numberOption(-1000, 1000, ' mA/K'),
    )
    .option('-o, --output <file>', 'write a model file, which other commands take as a source')
    .option('--json', 'print one JSON document')
    .action(runFitCurve);
}

interface FitCurveOptions {
  readonly cells: number;
  readonly temperature: number;
  readonly irradiance: number;
  readonly technology: TechnologyName;
  readonly model: 'single' | 'double';
  readonly residual: 'exact' | 'implicit';
  readonly voltageColumn?: string | undefined;
  readonly currentColumn?: string | undefined;
  readonly decimalComma?: true | undefined;
  readonly negateCurrent?: true | undefined;
  readonly withoutOutliers?: true | undefined;
  readonly alpha?: number | undefined;
  readonly output?: string | undefined;
  readonly json?: true | undefined;
}

async function runFitCurve(file: string, options: FitCurveOptions): Promise<void> {
  const { readMeasuredCurve } = await import('../source/measured/curve-file.js');
  const { fitMeasuredCurve } = await import('../source/measured/measured-fit.js');
  const { measuredFitWarnings } = await import('../source/measured/fit-warnings.js');
  const { inFile } = await import('./file-of-fault.js');
  const { printJson, sayWarnings } = await import('./print.js');
  checkModelOptions(options, await import('../fault.js'));
  const measured = readMeasuredCurve(file, options);
  const fit = inFile(file, () =>
    fitMeasuredCurve(measured.points, {
      cellsInSeries: options.cells,
      cellTemperature: fromCelsius(options.temperature),
      model: options.model,
      residual: options.residual,
      junctions: TECHNOLOGIES[options.technology].junctions,
      withoutOutliers: options.withoutOutliers === true,
    }),
  );
  sayWarnings(
    measuredFitWarnings(fit, options.technology).map((problem) => ({ file, ...problem })),
  );
  if (options.json === true) {
    const { measuredFitJson } = await import('./fit-curve-json.js');
    printJson(measuredFitJson(file, fit));
  } else {
    const { printMeasuredFit } = await import('./fit-curve-print.js');
    printMeasuredFit(file, fit);
  }
  if (options.output !== undefined) await writeModel(file, fit, options, options.output);
}

/** Before any work: what a model file needs. */
function checkModelOptions(
  { output, model, alpha }: FitCurveOptions,
  { Fault }: typeof import('../fault.js'),
): void {
  if (output === undefined) return;
  if (model === 'double') {
    throw new Fault('input', {
      code: 'NO_MODULE',
      field: '--output',
      message: 'a model file holds a single-diode model, found --model double.',
      hint: 'Leave --model out to write one.',
    });
  }
  if (alpha === undefined) {
    throw new Fault('input', {
      code: 'NO_MODULE',
      field: '--alpha',
      message: 'is missing: a model file needs the temperature coefficient of Isc, in mA/K.',
      hint: 'From a coefficient in %/K: that times Isc in A, times 10.',
    });
  }
}

async function writeModel(
  file: string,
  fit: MeasuredFit,
  { technology, irradiance, alpha = 0 }: FitCurveOptions,
  output: string,
): Promise<void> {
  const { modelText } = await import('../source/model-file.js');
  const { moduleOf } = await import('../source/measured/reference-module.js');
  const { writeWhole } = await import('../file/written-file.js');
  const { say } = await import('./print.js');
  const name = basename(file, extname(file)).slice(0, 80);
  // The decimal point is moved in the text, so that 4.1 mA/K is written as 0.0041 A/K.
  const shortCircuitCoefficient = Number(`${alpha}e-3`);
  const module = moduleOf(fit, { name, technology, irradiance, shortCircuitCoefficient });
  writeWhole(output, modelText(module));
  say(`Model at STC, of ${TECHNOLOGIES[technology].title}, written to ${output}.`);
}
