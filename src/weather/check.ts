/** Mistakes that can be seen in a block by itself, beyond what the definition can express. */
import type { Problem } from '../fault.js';
import { fieldProblem } from '../file/definition.js';
import type { FieldPath, InputDocument } from '../file/document.js';
import { ZERO_CELSIUS } from '../quantities.js';
import {
  blockDefinition,
  blockNames,
  CELL_TEMPERATURE_RANGE_C,
  IRRADIANCE_RANGE_W_PER_M2,
  type Block,
  type Ramp,
  type Step,
  type Trapezoids,
  type WeatherDefinition,
} from './definition.js';
import { TRAPEZOID_TABLES } from './trapezoid-tables.js';

/** Every mistake of that kind, in the order of the file. */
export function mistakesIn(definition: WeatherDefinition, document: InputDocument): Problem[] {
  const report: Report = (path, problem, blame = 'value') =>
    blame === 'key'
      ? { ...problem, ...document.placeOfKey(path) }
      : fieldProblem(document, path, problem);
  return [
    ...settingMistakes(definition, [], report),
    ...listMistakes(definition.blocks, ['blocks'], report),
  ];
}

type Report = (
  path: FieldPath,
  problem: { readonly code: string; readonly message: string; readonly hint?: string },
  blame?: 'value' | 'key',
) => Problem;

const listMistakes = (blocks: readonly Block[], path: FieldPath, report: Report): Problem[] =>
  blocks.flatMap((block, index) => blockMistakes(block, [...path, index], report));

function blockMistakes(block: Block, path: FieldPath, report: Report): Problem[] {
  const names = blockNames(block);
  const [name, second] = names;
  if (name === undefined) {
    const message = 'an entry must name exactly one block, found none.';
    const hint = `Blocks: ${Object.keys(blockDefinition.shape).join(', ')}.`;
    return [report(path, { code: 'ONE_BLOCK_PER_ENTRY', message, hint })];
  }
  if (second !== undefined) {
    const message = `an entry must name exactly one block, found ${names.join(' and ')}.`;
    const hint = 'Give each block an entry of its own: a line that begins with "- ".';
    return [report([...path, second], { code: 'ONE_BLOCK_PER_ENTRY', message, hint }, 'key')];
  }
  const inside = [...path, name];
  const { step, ramp, repeat, sequence, trapezoids } = block;
  if (step !== undefined) return changeMistakes(step, inside, report);
  if (ramp !== undefined) return rampMistakes(ramp, inside, report);
  if (trapezoids !== undefined) return rowMistakes(trapezoids, inside, report);
  const blocks = (repeat ?? sequence)?.blocks ?? [];
  return listMistakes(blocks, [...inside, 'blocks'], report);
}

function changeMistakes(change: Step, path: FieldPath, report: Report): Problem[] {
  if (change.irradiance_W_per_m2 === undefined && change.cell_temperature_C === undefined) {
    return [
      report(path, {
        code: 'NOTHING_SET',
        message: 'must set irradiance_W_per_m2, cell_temperature_C or both, found neither.',
      }),
    ];
  }
  return settingMistakes(change, path, report);
}

function rampMistakes(ramp: Ramp, path: FieldPath, report: Report): Problem[] {
  return [...changeMistakes(ramp, path, report), ...rampTimeMistakes(ramp, path, report)];
}

function rampTimeMistakes(ramp: Ramp, path: FieldPath, report: Report): Problem[] {
  const { for_s: time, slope_W_per_m2_per_s: slope } = ramp;
  const at = [...path, 'slope_W_per_m2_per_s'];
  if (slope === undefined) {
    if (time !== undefined) return [];
    const message = 'must have for_s or slope_W_per_m2_per_s, found neither.';
    const hint = 'For a change that takes no time use step.';
    return [report(path, { code: 'RAMP_TIME', message, hint })];
  }
  if (time !== undefined) {
    const message = 'must have for_s or slope_W_per_m2_per_s, found both.';
    return [report(at, { code: 'RAMP_TIME', message, hint: 'Each follows from the other.' })];
  }
  if (!(slope > 0)) {
    const message = `must be above 0, found ${slope}.`;
    const hint = 'Whether the irradiance rises or falls follows from the values.';
    return [report(at, { code: 'OUT_OF_RANGE', message, hint })];
  }
  if (ramp.irradiance_W_per_m2 === undefined) {
    const message = 'is a slope of the irradiance: expected irradiance_W_per_m2 beside it.';
    const hint = 'Give a ramp of the cell temperature alone a time: for_s.';
    return [report(at, { code: 'RAMP_TIME', message, hint })];
  }
  return [];
}

function rowMistakes(request: Trapezoids, path: FieldPath, report: Report): Problem[] {
  const known = TRAPEZOID_TABLES[request.table].rows.map((row) => row.slope);
  return (request.slopes_W_per_m2_per_s ?? []).flatMap((slope, index) =>
    known.includes(slope)
      ? []
      : [
          report([...path, 'slopes_W_per_m2_per_s', index], {
            code: 'NO_SUCH_ROW',
            message: `must be the slope of a row of ${request.table}, found ${slope}.`,
            hint: `Its rows: ${known.join(', ')}.`,
          }),
        ],
  );
}

function settingMistakes(setting: Step, path: FieldPath, report: Report): Problem[] {
  const { irradiance_W_per_m2: irradiance, cell_temperature_C: temperature } = setting;
  const problems: Problem[] = [];
  const { minimum: darkest, maximum: brightest } = IRRADIANCE_RANGE_W_PER_M2;
  if (irradiance !== undefined && !(irradiance >= darkest && irradiance <= brightest)) {
    problems.push(
      report([...path, 'irradiance_W_per_m2'], {
        code: 'OUT_OF_RANGE',
        message: `must be ${darkest} to ${brightest} W/m², found ${irradiance}.`,
        hint: irradiance < darkest ? 'Darkness is 0.' : BRIGHTEST_SEEN,
      }),
    );
  }
  const { minimum: coldest, maximum: hottest } = CELL_TEMPERATURE_RANGE_C;
  if (temperature !== undefined && !(temperature >= coldest && temperature <= hottest)) {
    const hint = kelvinHint(temperature);
    problems.push(
      report([...path, 'cell_temperature_C'], {
        code: 'OUT_OF_RANGE',
        message: `must be ${coldest} to ${hottest} °C, found ${temperature}.`,
        ...(hint === undefined ? {} : { hint }),
      }),
    );
  }
  return problems;
}

// Emck and Richter 2008, J. Appl. Meteorol. Climatol. 47: 1832 W/m² on a horizontal plane.
const BRIGHTEST_SEEN =
  'Sun and bright cloud edges together reach about 1.8 kW/m² on the ground (Emck and Richter 2008).';

function kelvinHint(temperature: number): string | undefined {
  const { minimum, maximum } = CELL_TEMPERATURE_RANGE_C;
  const celsius = Math.round((temperature - ZERO_CELSIUS) * 100) / 100;
  return celsius >= minimum && celsius <= maximum
    ? `This looks like kelvin: ${temperature} K is ${celsius} °C.`
    : undefined;
}
