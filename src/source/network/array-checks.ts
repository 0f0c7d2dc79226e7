/** What an array file says that its definition alone cannot refuse. */
import type { Problem } from '../../fault.js';
import { fieldProblem } from '../../file/definition.js';
import type { FieldPath, InputDocument } from '../../file/document.js';
import { suggest } from '../../file/nearest.js';
import type { Module } from '../module.js';
import type { ArrayEntries } from './array-definition.js';

export interface ArrayChecks {
  readonly problems: readonly Problem[];
  readonly warnings: readonly Problem[];
}

/** @param document The one that the entries come from: it knows their places. */
export function checkArray(
  entries: ArrayEntries,
  module: Module,
  document: InputDocument,
): ArrayChecks {
  const check = new Check(entries, module, document);
  check.cells();
  entries.strings.forEach((string, index) => {
    check.string(string, index);
  });
  check.places('shaded_cells', entries.shaded_cells ?? []);
  check.places('faults', entries.faults ?? []);
  check.oddCells();
  check.contradictions();
  check.shortedStrings();
  return { problems: check.problems, warnings: check.unequalStrings() };
}

type StringEntry = ArrayEntries['strings'][number];

interface Somewhere {
  readonly string: number;
  readonly module: number;
  readonly substring?: number;
}

class Check {
  readonly problems: Problem[] = [];
  readonly #groups: readonly string[];

  constructor(
    readonly entries: ArrayEntries,
    readonly module: Module,
    readonly document: InputDocument,
  ) {
    this.#groups = Object.keys(entries.groups ?? { sun: 1 });
  }

  cells(): void {
    const { substrings_per_module: substrings } = this.entries;
    const { cellsInSeries } = this.module;
    if (this.#groups.length === 0) this.#refuse(['groups'], 'UNKNOWN_GROUP', 'names no group.');
    if (cellsInSeries % substrings === 0) return;
    const message = `must divide the ${cellsInSeries} cells of the module, found ${substrings}.`;
    this.#refuse(['substrings_per_module'], 'UNEVEN_SUBSTRINGS', message);
  }

  string({ modules, shade = {}, deviation_pct: deviation = {} }: StringEntry, index: number): void {
    const path: FieldPath = ['strings', index];
    for (const key of ['shade', 'deviation_pct'] as const) {
      for (const number of Object.keys(key === 'shade' ? shade : deviation)) {
        if (Number(number) <= modules) continue;
        const message = `there is no module ${number} in a string of ${modules}.`;
        this.#refuse([...path, key, number], 'NO_SUCH_MODULE', message);
      }
    }
    for (const [number, lit] of Object.entries(shade)) {
      this.#shade([...path, 'shade', number], lit);
    }
  }

  #shade(path: FieldPath, lit: string | readonly string[]): void {
    const { substrings_per_module: substrings } = this.entries;
    if (typeof lit !== 'string' && lit.length !== substrings) {
      const message = `must name a group for each of the ${substrings} substrings, found ${lit.length}.`;
      this.#refuse(path, 'NO_SUCH_SUBSTRING', message);
    }
    for (const name of new Set(typeof lit === 'string' ? [lit] : lit)) {
      if (this.#groups.includes(name)) continue;
      const message = `"${name}" is not a shading group.`;
      this.#refuse(path, 'UNKNOWN_GROUP', message, suggest(name, this.#groups));
    }
  }

  places(key: 'shaded_cells' | 'faults', list: readonly Somewhere[]): void {
    list.forEach((where, index) => {
      const { strings, substrings_per_module: substrings } = this.entries;
      const path: FieldPath = [key, index];
      const modules = strings[where.string - 1]?.modules;
      if (modules === undefined) {
        const message = `there is no string ${where.string}: the file lists ${strings.length}.`;
        this.#refuse([...path, 'string'], 'NO_SUCH_STRING', message);
      } else if (where.module > modules) {
        const message = `there is no module ${where.module} in a string of ${modules}.`;
        this.#refuse([...path, 'module'], 'NO_SUCH_MODULE', message);
      }
      if (where.substring !== undefined && where.substring > substrings) {
        const message = `there is no substring ${where.substring} in a module of ${substrings}.`;
        this.#refuse([...path, 'substring'], 'NO_SUCH_SUBSTRING', message);
      }
    });
  }

  /** Shaded and cracked cells of a substring are different cells: together no more than it has. */
  oddCells(): void {
    const most = this.module.cellsInSeries / this.entries.substrings_per_module;
    const taken = new Map<string, number>();
    const take = (where: Somewhere, count: number, path: FieldPath): void => {
      const key = placeText(where);
      const sum = (taken.get(key) ?? 0) + count;
      taken.set(key, sum);
      if (sum <= most || sum - count > most) return;
      const message = `asks for ${sum} shaded or cracked cells, the substring has ${most}.`;
      this.#refuse(path, 'TOO_MANY_CELLS', message);
    };
    (this.entries.shaded_cells ?? []).forEach((each, index) => {
      take(each, each.count, ['shaded_cells', index]);
    });
    (this.entries.faults ?? []).forEach((each, index) => {
      if ('cracked' in each) take(each, each.cracked.count, ['faults', index]);
    });
  }

  contradictions(): void {
    const states = new Map<string, string>();
    (this.entries.faults ?? []).forEach((fault, index) => {
      if (!('bypass' in fault)) return;
      const before = states.get(placeText(fault));
      states.set(placeText(fault), fault.bypass);
      if (before === undefined || before === fault.bypass) return;
      const message = `the bypass is said to be ${before} already, found ${fault.bypass}.`;
      this.#refuse(['faults', index, 'bypass'], 'CONTRARY_FAULTS', message);
    });
  }

  /** A string of wires short-circuits all others. */
  shortedStrings(): void {
    const { faults = [], strings, substrings_per_module: substrings } = this.entries;
    strings.forEach(({ modules }, index) => {
      const shorted = faults.filter(
        (fault) => fault.string === index + 1 && 'bypass' in fault && fault.bypass === 'shorted',
      );
      if (new Set(shorted.map(placeText)).size < modules * substrings) return;
      const message = 'every substring is shorted: the string is a wire.';
      this.#refuse(['strings', index], 'SHORTED_STRING', message);
    });
  }

  unequalStrings(): Problem[] {
    const [first, ...others] = this.entries.strings.map(({ modules }) => modules);
    const index = others.findIndex((modules) => modules !== first) + 1;
    if (index === 0) return [];
    return [
      fieldProblem(this.document, ['strings', index, 'modules'], {
        code: 'UNEQUAL_STRINGS',
        message: `is ${others[index - 1]!}, the first string has ${first!}.`,
        hint: 'Strings of different voltages in parallel: power is lost, and without blocking current flows back.',
      }),
    ];
  }

  #refuse(path: FieldPath, code: string, message: string, hint?: string): void {
    const text = { code, message, ...(hint === undefined ? {} : { hint }) };
    this.problems.push(fieldProblem(this.document, path, text));
  }
}

const placeText = ({ string, module, substring }: Somewhere): string =>
  `${string} ${module} ${substring ?? ''}`;
