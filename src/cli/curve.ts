import { Command, Option } from '@commander-js/extra-typings';
import type { Curve } from '../index.js';
import { numberOption, wholeOption } from './options.js';

export function curveCommand() {
  return new Command('curve')
    .description('Show the I-V curve of a source at one irradiance and cell temperature.')
    .argument('<source>', 'datasheet or model file')
    .option('--irradiance <W/m2>', 'in the plane', numberOption(0, 2000, ' W/m2'), 1000)
    .option('--temperature <C>', 'of the cells', numberOption(-60, 120, ' °C'), 25)
    .option('--points <N>', 'rows of the table', wholeOption(2, 100_000), 21)
    .addOption(new Option('--csv', 'print the table as CSV and nothing else').conflicts('json'))
    .option('--json', 'print one JSON document')
    .action(async (file, options) => {
      const { fromCelsius, loadSource, sampleCurve, uniformConditions } =
        await import('../index.js');
      const { printJson, printLine, sayWarnings } = await import('./print.js');
      const { module, warnings } = loadSource(file);
      sayWarnings(warnings);
      const curve = module.at(
        uniformConditions(options.irradiance, fromCelsius(options.temperature)),
      );
      const points = sampleCurve(curve, options.points);
      if (options.csv === true) {
        printLine('voltage_V,current_A,power_W');
        for (const { voltage, current, power } of points) {
          printLine(`${voltage},${current},${power}`);
        }
      } else if (options.json === true) {
        printJson({
          name: module.name,
          irradiance_W_per_m2: options.irradiance,
          cell_temperature_C: options.temperature,
          isc_A: curve.shortCircuitCurrent,
          voc_V: curve.openCircuitVoltage,
          peaks: curve.peaks().map(inFileUnits),
          points: points.map(inFileUnits),
        });
      } else {
        printLine(`${module.name} at ${options.irradiance} W/m², ${options.temperature} °C`);
        await printCurve(curve, points);
      }
    });
}

const inFileUnits = ({ voltage, current, power }: Points[number]) => ({
  voltage_V: voltage,
  current_A: current,
  power_W: power,
});

type Points = readonly {
  readonly voltage: number;
  readonly current: number;
  readonly power: number;
}[];

async function printCurve(curve: Curve, points: Points): Promise<void> {
  const { figure, printLine, printTable } = await import('./print.js');
  const { pictureOf } = await import('./picture.js');
  printLine();
  printLine(`  short-circuit current  ${figure(curve.shortCircuitCurrent, 6)} A`);
  printLine(`  open-circuit voltage   ${figure(curve.openCircuitVoltage, 6)} V`);
  for (const { voltage, current, power } of curve.peaks()) {
    printLine(
      `  peak                   ${figure(power, 6)} W at ${figure(voltage, 6)} V, ${figure(current, 6)} A`,
    );
  }
  printLine();
  for (const line of pictureOf(curve)) printLine(`  ${line}`);
  printLine();
  printTable(
    ['voltage V', 'current A', 'power W'],
    points.map(({ voltage, current, power }) => [
      voltage.toFixed(4),
      current.toFixed(5),
      power.toFixed(4),
    ]),
  );
}
