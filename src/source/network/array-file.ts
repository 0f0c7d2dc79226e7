/** The array file: modules in strings, strings in parallel, what shades them and what is broken. */
import { Fault, type Problem } from '../../fault.js';
import { fieldProblem, interpret } from '../../file/definition.js';
import type { InputDocument } from '../../file/document.js';
import { fromCelsius, thermalVoltage } from '../../quantities.js';
import type { Module } from '../module.js';
import { arrayDefinition, type ArrayEntries } from './array-definition.js';
import type { ArrayChecks } from './array-checks.js';
import { checkArray } from './array-checks.js';
import type { Blocking, Bypass } from './bypass.js';
import { PvArray, type ArrayPlan, type OddCells, type StringPlan } from './pv-array.js';
import type { SubstringPlace, SubstringPlan } from './pv-array.js';

/** An array, and what in its file is odd without being wrong. */
export interface ArrayReading {
  readonly array: PvArray;
  readonly warnings: readonly Problem[];
}

/**
 * Checks an array document against its definition, then what it says against itself and its module.
 * @param loadModule Reads the module file that the document names; its Faults pass through, a
 * missing file with the place that names it.
 * @throws Fault `UNKNOWN_KEY`, `MISSING_KEY`, `INVALID_VALUE`; `NETWORK_LOOP`, `ARRAY_IN_ARRAY`;
 * `UNKNOWN_GROUP`, `NO_SUCH_STRING`, `NO_SUCH_MODULE`, `NO_SUCH_SUBSTRING`, `UNEVEN_SUBSTRINGS`,
 * `TOO_MANY_CELLS`, `CONTRARY_FAULTS`, `SHORTED_STRING`. Every error of the file is in it.
 */
export function parseArray(
  document: InputDocument,
  loadModule: (namedAs: string) => Module,
): ArrayReading {
  const entries = interpret(document, arrayDefinition);
  const module = loadPlaced(document, entries.module, loadModule);
  const { problems, warnings }: ArrayChecks = checkArray(entries, module, document);
  if (problems.length > 0) throw new Fault('input', problems);
  return { array: new PvArray(arrayPlan(entries, module)), warnings };
}

// The missing file is not at fault, the line that names it is.
function loadPlaced(
  document: InputDocument,
  namedAs: string,
  loadModule: (namedAs: string) => Module,
): Module {
  try {
    return loadModule(namedAs);
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    throw new Fault(
      error.kind,
      error.problems.map((problem) => {
        const { line, file, code, message, hint } = problem;
        if (line !== undefined || (file !== undefined && code !== 'FILE_MISSING')) return problem;
        const named = file === undefined ? message : `${file}: ${message}`;
        return fieldProblem(document, ['module'], {
          code,
          message: named,
          ...(hint === undefined ? {} : { hint }),
        });
      }),
      { cause: error },
    );
  }
}

/** The plan of an array whose entries have been checked. */
function arrayPlan(entries: ArrayEntries, module: Module): ArrayPlan {
  const clean = 1 - entries.soiling_pct / 100;
  const groups = Object.entries(entries.groups ?? SUN);
  return {
    name: entries.array,
    module,
    cells: module.cellsInSeries / entries.substrings_per_module,
    ...(entries.reverse === undefined ? {} : { reverse: reverseOf(entries.reverse) }),
    groups: groups.map(([name, factor]) => ({ name, factor: factor * clean })),
    strings: entries.strings
      .map((_, index) => stringPlan(entries, index))
      .filter((plan): plan is StringPlan => plan !== undefined),
  };
}

const SUN = { sun: 1 };

const reverseOf = ({ bishop }: NonNullable<ArrayEntries['reverse']>) => ({
  share: bishop.share,
  exponent: bishop.exponent,
  voltage: bishop.breakdown_V,
});

/** Undefined for a string with an open module. */
function stringPlan(entries: ArrayEntries, index: number): StringPlan | undefined {
  const { modules, count, blocking } = entries.strings[index]!;
  const faults = (entries.faults ?? []).filter((fault) => fault.string === index + 1);
  if (faults.some((fault) => 'open' in fault)) return undefined;
  const merged = new Map<string, SubstringPlan & { places: SubstringPlace[] }>();
  for (let module = 1; module <= modules; module++) {
    for (let substring = 1; substring <= entries.substrings_per_module; substring++) {
      const place = { string: index + 1, module, substring };
      const nature = substringNature(entries, place);
      const key = JSON.stringify(nature);
      const alike = merged.get(key);
      if (alike === undefined) merged.set(key, { places: [place], ...nature });
      else alike.places.push(place);
    }
  }
  const diode: Blocking = blocking === undefined ? { kind: 'none' } : conductor(blocking);
  return { count, substrings: [...merged.values()], blocking: diode };
}

/** All that decides the curve of a substring. */
function substringNature(
  entries: ArrayEntries,
  place: SubstringPlace,
): Omit<SubstringPlan, 'places'> {
  const string = entries.strings[place.string - 1]!;
  const names = Object.keys(entries.groups ?? SUN);
  const shade = string.shade?.[String(place.module)];
  const name = Array.isArray(shade) ? shade[place.substring - 1]! : (shade ?? names[0]!);
  const deviation = string.deviation_pct?.[String(place.module)] ?? 0;
  return {
    group: names.indexOf(name),
    photocurrent: 1 + deviation / 100,
    bypass: bypassAt(entries, place),
    odd: oddCells(entries, place),
  };
}

function bypassAt({ faults, bypass }: ArrayEntries, place: SubstringPlace): Bypass {
  for (const fault of faults ?? []) {
    if (!('bypass' in fault) || !isAt(fault, place)) continue;
    return { kind: fault.bypass === 'open' ? 'none' : 'shorted' };
  }
  return bypass === 'none' ? { kind: 'none' } : conductor(bypass);
}

function oddCells(entries: ArrayEntries, place: SubstringPlace): OddCells[] {
  const shaded = (entries.shaded_cells ?? [])
    .filter((each) => isAt(each, place))
    .map(({ count, factor }) => ({ count, light: factor, area: 1 }));
  const cracked = (entries.faults ?? []).flatMap((fault) =>
    'cracked' in fault && isAt(fault, place)
      ? [{ count: fault.cracked.count, light: 1, area: 1 - fault.cracked.lost_area }]
      : [],
  );
  return [...shaded, ...cracked];
}

const isAt = (fault: SubstringPlace, place: SubstringPlace): boolean =>
  fault.string === place.string &&
  fault.module === place.module &&
  fault.substring === place.substring;

type Conductor = NonNullable<ArrayEntries['strings'][number]['blocking']>;

function conductor(entry: Conductor): Bypass & Blocking {
  if ('drop_V' in entry) return { kind: 'clamp', drop: entry.drop_V };
  const { saturation_A, ideality, series_ohm, temperature_C } = entry.diode;
  return {
    kind: 'diode',
    diode: {
      saturationCurrent: saturation_A,
      idealityVoltage: ideality * thermalVoltage(fromCelsius(temperature_C)),
      seriesResistance: series_ohm,
    },
  };
}
