import { Command, Option } from '@commander-js/extra-typings';
import type { Datasheet, FitMethod, InputDocument } from '../index.js';
import type { FifthChoice, FifthName } from '../source/fit/fifth-condition.js';
import { numberOption } from './options.js';

export function fitCommand() {
  return new Command('fit')
    .description('Fit the five single-diode parameters to a datasheet.')
    .argument('<datasheet>', 'datasheet file (YAML or JSON)')
    .addOption(
      new Option(
        '--method <method>',
        'exact (three points and a flat peak; the default), simultaneous, sweep of the ideality ' +
          'factor, or all of them side by side',
      ).choices(['exact', 'simultaneous', 'sweep', 'all'] as const),
    )
    .addOption(
      new Option(
        '--meet <condition>',
        'what settles the ideality factor in the exact method: a number of the datasheet, or what ' +
          'is typical of the technology (default: beta)',
      ).choices(['beta', 'gamma', 'slope-at-isc', 'slope-at-voc', 'typical'] as const),
    )
    .addOption(
      new Option('--ideality <A>', 'the ideality factor of a cell, in place of a condition')
        .argParser(numberOption(0.1, 10, ''))
        .conflicts('meet'),
    )
    .option('--candidates', 'also show every candidate of the sweep')
    .option('-o, --output <file>', 'write a model file, which other commands take as a source')
    .option('--json', 'print one JSON document')
    .action(run);
}

interface FitOptions {
  readonly method?: FitMethod | 'all';
  readonly meet?: FifthName;
  readonly ideality?: number;
  readonly candidates?: true;
  readonly output?: string;
  readonly json?: true;
}

async function run(file: string, options: FitOptions): Promise<void> {
  const { parseDatasheet, readInput } = await import('../index.js');
  const { sayWarnings } = await import('./print.js');
  if (options.method === 'all' && options.output !== undefined) {
    const { argumentFault } = await import('../fault.js');
    throw argumentFault('--output', 'given with one method', '--method all');
  }
  const { meet, ideality } = options;
  const choice = {
    ...(meet === undefined ? {} : { meet }),
    ...(ideality === undefined ? {} : { ideality }),
  };
  const document = readInput(file);
  const { datasheet, warnings } = parseDatasheet(document);
  sayWarnings(warnings);
  if (options.method === 'all') return compare(datasheet, choice, options.json === true);
  await fitOne(document, datasheet, choice, { ...options, method: options.method });
}

/** Every method side by side: that there is no solution by one of them is part of the answer. */
async function compare(datasheet: Datasheet, choice: FifthChoice, asJson: boolean): Promise<void> {
  const { fitByAllMethods } = await import('../source/fit/fit.js');
  const { printJson } = await import('./print.js');
  const { comparisonAsJson, printComparison } = await import('./fit-report.js');
  const fits = fitByAllMethods(datasheet, choice);
  if (asJson) printJson(comparisonAsJson(fits));
  else printComparison(fits);
}

async function fitOne(
  document: InputDocument,
  datasheet: Datasheet,
  choice: FifthChoice,
  options: Omit<FitOptions, 'method'> & { readonly method: FitMethod | undefined },
): Promise<void> {
  const { fitDatasheet, sweepIdeality, writeModel } = await import('../index.js');
  const { printJson, say, sayWarnings } = await import('./print.js');
  const { boundsOf, fitAsJson, printFit } = await import('./fit-report.js');
  const fit = fitDatasheet(datasheet, options.method, choice);
  sayWarnings(fit.warnings.map((warning) => ({ file: document.file, ...warning })));
  const bounds = boundsOf(document, datasheet, fit, choice);
  const candidates = options.candidates === true ? sweepIdeality(datasheet).candidates : [];
  if (options.json === true) printJson(fitAsJson({ ...fit, candidates }, bounds));
  else printFit({ ...fit, candidates }, bounds, options.candidates === true);
  if (options.output !== undefined) {
    writeModel(options.output, fit.module);
    say(`Model written to ${options.output}.`);
  }
  if (fit.solved) return;
  say(`No curve meets this datasheet: ${fit.account}.`);
  if (fit.advice !== undefined) say(`${fit.advice}.`);
  process.exitCode = 1;
}
