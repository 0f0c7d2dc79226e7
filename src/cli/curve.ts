import { Command, Option } from '@commander-js/extra-typings';
import type { Conditions, Curve, Peak, Source } from '../index.js';
import { numberOption, wholeOption } from './options.js';

export function curveCommand() {
  return new Command('curve')
    .description('Show the I-V curve of a source at one irradiance and cell temperature.')
    .argument('<source>', 'datasheet, model or array file')
    .option('--irradiance <W/m2>', 'in the plane', numberOption(0, 2000, ' W/m2'), 1000)
    .option('--temperature <C>', 'of the cells', numberOption(-60, 120, ' °C'), 25)
    .option('--points <N>', 'rows of the table', wholeOption(2, 100_000), 21)
    .addOption(new Option('--csv', 'print the table as CSV and nothing else').conflicts('json'))
    .option('--json', 'print one JSON document')
    .action(async (file, options) => {
      const { fromCelsius, globalPeak, loadSource, sampleCurve, uniformConditions } =
        await import('../index.js');
      const { printJson, printLine, sayWarnings } = await import('./print.js');
      const { source, warnings } = loadSource(file);
      sayWarnings(warnings);
      const conditions = uniformConditions(options.irradiance, fromCelsius(options.temperature));
      const curve = source.at(conditions);
      const points = sampleCurve(curve, options.points);
      if (options.csv === true) {
        printLine('voltage_V,current_A,power_W');
        for (const { voltage, current, power } of points) {
          printLine(`${voltage},${current},${power}`);
        }
      } else if (options.json === true) {
        printJson({
          name: source.name,
          irradiance_W_per_m2: options.irradiance,
          cell_temperature_C: options.temperature,
          isc_A: curve.shortCircuitCurrent,
          voc_V: curve.openCircuitVoltage,
          peaks: curve.peaks().map(inFileUnits),
          global_peak: curve.peaks().indexOf(globalPeak(curve.peaks())),
          hottest_cells: await hottestCells(source, conditions, curve),
          points: points.map(inFileUnits),
        });
      } else {
        printLine(`${source.name} at ${options.irradiance} W/m², ${options.temperature} °C`);
        await printCurve(curve, points, await hottestCells(source, conditions, curve));
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

interface Hottest {
  readonly when: string;
  readonly dissipated_W: number;
  readonly voltage_V: number;
  /** Of one such cell; others may be as hot. */
  readonly place: { readonly string: number; readonly module: number; readonly substring: number };
}

/** The cells of an array that take most power, where any takes some. */
async function hottestCells(
  source: Source,
  conditions: Conditions,
  curve: Curve,
): Promise<Hottest[]> {
  const { globalPeak, hottestCell, operatingPoint, PvArray } = await import('../index.js');
  if (!(source instanceof PvArray)) return [];
  const times = [
    ['at the global peak', globalPeak(curve.peaks()).voltage],
    ['at short circuit', 0],
  ] as const;
  return times.flatMap(([when, voltage]) => {
    const hottest = hottestCell(operatingPoint(source, conditions, voltage));
    if (hottest === undefined) return [];
    const { cell, places } = hottest;
    return [{ when, dissipated_W: cell.dissipated, voltage_V: cell.voltage, place: places[0]! }];
  });
}

async function printCurve(
  curve: Curve,
  points: Points,
  hottest: readonly Hottest[],
): Promise<void> {
  const { globalPeak } = await import('../index.js');
  const { figure, printLine, printTable } = await import('./print.js');
  const { pictureOf } = await import('./picture.js');
  printLine();
  printLine(`  short-circuit current  ${figure(curve.shortCircuitCurrent, 6)} A`);
  printLine(`  open-circuit voltage   ${figure(curve.openCircuitVoltage, 6)} V`);
  const peaks = curve.peaks();
  const best = globalPeak(peaks);
  for (const peak of peaks) {
    const { voltage, current, power } = peak;
    const title = titleOf(peak, best, peaks.length).padEnd(23);
    printLine(
      `  ${title}${figure(power, 6)} W at ${figure(voltage, 6)} V, ${figure(current, 6)} A`,
    );
  }
  for (const { when, dissipated_W: power, voltage_V: voltage, place } of hottest) {
    const where = `string ${place.string}, module ${place.module}, substring ${place.substring}`;
    printLine(
      `  hottest cell           takes ${figure(power)} W at ${figure(voltage)} V ${when}: ${where}`,
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

function titleOf(peak: Peak, best: Peak, count: number): string {
  if (count === 1) return 'peak';
  return peak === best ? 'global peak' : 'local peak';
}
