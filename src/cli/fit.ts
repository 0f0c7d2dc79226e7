import { Command, Option } from '@commander-js/extra-typings';
import type { Fit, SweepCandidate } from '../index.js';

export function fitCommand() {
  return new Command('fit')
    .description('Fit the five single-diode parameters to a datasheet.')
    .argument('<datasheet>', 'datasheet file (YAML or JSON)')
    .addOption(
      new Option('--method <method>', 'simultaneous, or sweep of the ideality factor').choices([
        'simultaneous',
        'sweep',
      ] as const),
    )
    .option('--candidates', 'also show every candidate of the sweep')
    .option('-o, --output <file>', 'write a model file, which other commands take as a source')
    .option('--json', 'print one JSON document')
    .action(async (file, options) => {
      const { fitDatasheet, parseDatasheet, readInput, sweepIdeality, writeModel } =
        await import('../index.js');
      const { printJson, say, sayWarnings } = await import('./print.js');
      const { datasheet, warnings } = parseDatasheet(readInput(file));
      const fit = fitDatasheet(datasheet, options.method);
      const candidates = options.candidates === true ? sweepIdeality(datasheet).candidates : [];
      sayWarnings([...warnings, ...fit.warnings.map((warning) => ({ file, ...warning }))]);
      if (options.json === true) printJson(asJson(fit, candidates));
      else await printFit(fit, candidates);
      if (options.output !== undefined) {
        writeModel(options.output, fit.module);
        say(`Model written to ${options.output}.`);
      }
      if (!fit.solved) {
        say(`No curve meets this datasheet: ${fit.account}.`);
        if (fit.advice !== undefined) say(fit.advice);
        process.exitCode = 1;
      }
    });
}

function asJson(fit: Fit, candidates: readonly SweepCandidate[]): unknown {
  const { diode, module, ideality, method, solved, account, advice, agreements, practice } = fit;
  return {
    name: module.name,
    method,
    solved,
    account,
    ...(advice === undefined ? {} : { advice }),
    parameters: {
      photocurrent_A: diode.photocurrent,
      saturation_current_A: diode.saturationCurrent,
      ideality_factor: ideality,
      series_resistance_ohm: diode.seriesResistance,
      shunt_resistance_ohm: diode.shuntConductance === 0 ? null : 1 / diode.shuntConductance,
    },
    agreements,
    practice,
    candidates,
  };
}

async function printFit(fit: Fit, candidates: readonly SweepCandidate[]): Promise<void> {
  const { colours, figure, percentText, printLine, printTable } = await import('./print.js');
  const { diode, module, ideality } = fit;
  printLine(colours.bold(module.name));
  printLine(`${METHOD_TITLES[fit.method]}: ${fit.account}.`);
  printLine();
  printTable(
    ['parameter at STC', '', ''],
    [
      ['photocurrent Iph', figure(diode.photocurrent, 6), 'A'],
      ['saturation current I0', figure(diode.saturationCurrent, 6), 'A'],
      ['ideality factor A', figure(ideality, 6), ''],
      ['series resistance Rs', figure(diode.seriesResistance, 6), 'ohm'],
      ['shunt resistance Rsh', figure(1 / diode.shuntConductance, 6), 'ohm'],
    ],
  );
  printLine();
  printTable(
    ['datasheet number', 'datasheet', 'model', 'miss'],
    fit.agreements.map(({ field, datasheet, model, miss }) => [
      field,
      figure(datasheet, 6),
      figure(model, 6),
      percentText(miss),
    ]),
  );
  printLine();
  printTable(
    ['common practice', 'value', 'holds'],
    fit.practice.map(({ says, value, holds }) => [says, figure(value), holds ? 'yes' : 'no']),
  );
  if (candidates.length > 0) {
    printLine();
    printTable(
      ['A', 'I0 A', 'Rs ohm', 'Voc miss', 'Vmp miss', 'Imp miss', 'Pmp miss', 'overall'],
      candidates.map((row) => [
        row.ideality.toFixed(3),
        figure(row.diode.saturationCurrent, 6),
        row.feasible ? figure(row.diode.seriesResistance, 5) : 'negative',
        ...[row.openCircuitMiss, row.peakVoltageMiss, row.peakCurrentMiss].map(percentText),
        percentText(row.peakPowerMiss),
        percentText(row.badness),
      ]),
    );
  }
}

const METHOD_TITLES = {
  simultaneous: 'Simultaneous solution',
  sweep: 'Sweep of the ideality factor',
} as const;
