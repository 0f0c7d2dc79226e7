import { Fault, type Place, type Problem } from '../fault.js';
import { fieldProblem, interpret } from '../file/definition.js';
import { refuseOtherKinds } from '../file/document-kind.js';
import { readInput, type FieldPath, type InputDocument } from '../file/document.js';
import type { CodeFormat } from '../fixed/code-format.js';
import type { CodedQuantity } from '../fixed/coded-quantity.js';
import { codeFormatFrom, type CodeFormatDefinition } from '../fixed/file-definition.js';
import { productFormat } from '../fixed/product-format.js';
import { fromCelsius, uniformConditions, type Conditions } from '../quantities.js';
import type { Source } from '../source/curve.js';
import { besideFile, parseSource } from '../source/source-file.js';
import { parseWeather } from '../weather/load.js';
import type { Weather } from '../weather/weather.js';
import { curveSet } from './curve-set.js';
import type { Product, ProductFormats } from './product.js';
import { unfitForC } from './c-sink.js';
import {
  OUTPUT_FORMS,
  suiteDefinition,
  type OutputForm,
  type SuiteEntries,
} from './suite-definition.js';
import { timeline } from './timeline.js';

/** A suite read and checked: everything that `emit` needs. */
export interface Suite {
  readonly name: string;
  readonly products: readonly PlannedProduct[];
  /** The suite file first, then every file it names, and every file that those name. */
  readonly inputs: readonly SuiteInput[];
  readonly warnings: readonly Problem[];
}

export interface SuiteInput {
  /** As the suite file names it, or would; `undefined` for the suite file itself. */
  readonly namedAs: string | undefined;
  readonly text: string;
  readonly file: string;
}

export interface PlannedProduct {
  readonly source: string;
  readonly outputs: readonly OutputForm[];
  /** The part of the suite file that asks for it. */
  readonly place: Place;
  /** Builds it afresh, with its counts of saturated values at zero. */
  readonly build: () => Product;
}

/** How a suite's other files are found: from their name in the suite file to a path. */
export type FindInput = (namedAs: string) => string;

/**
 * Reads a suite file and everything it names, and checks all of it before any work starts.
 * @throws Fault with every error, each with file, line and field.
 */
export function loadSuite(file: string, find?: FindInput): Suite {
  const document = readInput(file);
  refuseOtherKinds(document, 'suite');
  const entries = interpret(document, suiteDefinition);
  const reader = new SuiteReader(document, find ?? ((namedAs) => besideFile(file, namedAs)));
  const formats = reader.formats(entries.formats);
  const sources = Object.entries(entries.sources).map(
    ([label, namedAs]) => [label, reader.source(label, namedAs)] as const,
  );
  const weather = entries.weather === undefined ? undefined : reader.weather(entries.weather);
  reader.checkProducts(entries, sources.length, formats);
  reader.throwProblems();
  const products = sources.flatMap(([label, source]) =>
    plan(entries, label, source!, formats, weather).map((wish) =>
      reader.planned(wish, entries[wish.part]?.outputs ?? entries.outputs),
    ),
  );
  return { name: entries.suite, inputs: reader.inputs, warnings: reader.warnings, products };
}

/** A product before it is settled in which forms it is written. */
interface ProductWish extends Pick<PlannedProduct, 'source' | 'build'> {
  /** The key of the suite file that asks for it. */
  readonly part: 'curves' | 'timeline';
}

function plan(
  entries: SuiteEntries,
  label: string,
  source: Source,
  formats: ProductFormats,
  weather: Weather | undefined,
): ProductWish[] {
  const { suite, curves, timeline: samples } = entries;
  const products: ProductWish[] = [];
  if (curves !== undefined) {
    const conditions = curveConditions(curves);
    products.push({
      source: label,
      part: 'curves',
      build: () =>
        curveSet({
          name: `${suite}-${label}-curves`,
          source,
          conditions,
          points: curves.points,
          formats,
        }),
    });
  }
  if (samples !== undefined && weather !== undefined) {
    products.push({
      source: label,
      part: 'timeline',
      build: () =>
        timeline({
          name: `${suite}-${label}-timeline`,
          source,
          weather,
          period: samples.every_s,
          formats,
        }),
    });
  }
  return products;
}

// The product of codes is what firmware computes; where there is none, power needs its own.
function powerFormat(voltage: CodeFormat, current: CodeFormat): CodeFormat {
  try {
    return productFormat(voltage, current);
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    const hint = 'Give formats.power a format of its own, such as { step: 0.01, bits: 24 }.';
    throw new Fault(
      error.kind,
      error.problems.map((problem) => ({ ...problem, hint })),
    );
  }
}

function curveConditions({ conditions, grid }: NonNullable<SuiteEntries['curves']>): Conditions[] {
  const listed = (conditions ?? []).map((entry) =>
    uniformConditions(entry.irradiance_W_per_m2, fromCelsius(entry.cell_temperature_C)),
  );
  const crossed = (grid?.irradiance_W_per_m2 ?? []).flatMap((irradiance) =>
    grid!.cell_temperature_C.map((celsius) => uniformConditions(irradiance, fromCelsius(celsius))),
  );
  return [...listed, ...crossed];
}

/** Collects what is wrong over all files, so that one run shows everything. */
class SuiteReader {
  readonly inputs: SuiteInput[] = [];
  readonly warnings: Problem[] = [];
  readonly #problems: Problem[] = [];

  constructor(
    readonly document: InputDocument,
    readonly find: FindInput,
  ) {
    this.inputs.push({ namedAs: undefined, text: document.text, file: document.file });
  }

  source(label: string, namedAs: string): Source | undefined {
    return this.#attempt(['sources', label], () => {
      // What a source names is named from its own folder, and so listed as the suite would name it.
      const reading = parseSource(this.#read(namedAs), (inner) =>
        this.#read(besideFile(namedAs, inner)),
      );
      this.warnings.push(...reading.warnings);
      return reading.source;
    });
  }

  weather(namedAs: string): Weather | undefined {
    return this.#attempt(['weather'], () => parseWeather(this.#read(namedAs)));
  }

  formats(entries: SuiteEntries['formats']): ProductFormats {
    const given = (key: keyof ProductFormats, usual: CodeFormatDefinition): CodeFormat =>
      this.#attempt(['formats', key], () => codeFormatFrom(entries[key] ?? usual, key)) ??
      codeFormatFrom({ step: 1, bits: 16 }, key satisfies CodedQuantity);
    const voltage = given('voltage', 'UQ8.8');
    const current = given('current', 'UQ4.12');
    const power =
      entries.power === undefined
        ? this.#attempt(['formats'], () => powerFormat(voltage, current))
        : given('power', 'UQ12.20');
    return {
      voltage,
      current,
      power: power ?? voltage,
      irradiance: given('irradiance', { step: 0.1, bits: 16 }),
      temperature: given('temperature', { step: 0.01, bits: 16, signed: true }),
      // A time that is not what it says is no use to anyone.
      time: { ...given('time', { step: 0.001, bits: 32 }), overflow: 'refuse' },
    };
  }

  /** Asked for by name, every form is written or refused; otherwise those that can hold it. */
  planned({ source, part, build }: ProductWish, asked?: readonly OutputForm[]): PlannedProduct {
    const place = { ...this.document.placeOfKey([part]), field: part };
    if (asked !== undefined) return { source, outputs: asked, place, build };
    const unfit = unfitForC(build());
    if (unfit === undefined) return { source, outputs: OUTPUT_FORMS, place, build };
    this.warnings.push({
      ...place,
      ...unfit,
      message: `is written without C sources: ${unfit.message}`,
      hint: 'Say outputs: [binary, csv, json] here to have it so without this warning.',
    });
    return { source, outputs: OUTPUT_FORMS.filter((form) => form !== 'c'), place, build };
  }

  checkProducts(
    { curves, timeline: samples, weather }: SuiteEntries,
    sourceCount: number,
    formats: ProductFormats,
  ): void {
    if (samples !== undefined && samples.every_s < formats.time.step) {
      this.#refuse(
        ['timeline', 'every_s'],
        `is shorter than a step of the time format (${formats.time.step} s): times would repeat.`,
        `Give formats.time a finer step, such as { step: ${samples.every_s}, bits: 32 }.`,
      );
    }
    if (sourceCount === 0) this.#refuse(['sources'], 'names no source.');
    if (curves === undefined && samples === undefined) {
      this.#refuse([], 'builds nothing: give curves, timeline or both.');
    }
    if (samples !== undefined && weather === undefined) {
      this.#refuse(['timeline'], 'needs a weather file: add the key weather.');
    }
    if (curves !== undefined && curves.conditions === undefined && curves.grid === undefined) {
      this.#refuse(['curves'], 'needs conditions or a grid.');
    }
  }

  throwProblems(): void {
    if (this.#problems.length > 0) throw new Fault('input', this.#problems);
  }

  #read(namedAs: string): InputDocument {
    const document = readInput(this.find(namedAs));
    if (!this.inputs.some((input) => input.namedAs === namedAs)) {
      this.inputs.push({ namedAs, text: document.text, file: document.file });
    }
    return document;
  }

  #refuse(path: FieldPath, message: string, hint?: string): void {
    const problem = { code: 'SUITE', message, ...(hint === undefined ? {} : { hint }) };
    this.#problems.push(fieldProblem(this.document, path, problem));
  }

  // A Fault without a place of its own belongs to the entry of the suite file it came from.
  #attempt<T>(path: FieldPath, work: () => T): T | undefined {
    try {
      return work();
    } catch (error) {
      if (!(error instanceof Fault)) throw error;
      this.#problems.push(
        ...error.problems.map((problem) =>
          problem.line !== undefined ||
          (problem.file !== undefined && problem.code !== 'FILE_MISSING')
            ? problem
            : this.#placed(path, problem),
        ),
      );
      return undefined;
    }
  }

  #placed(path: FieldPath, problem: Problem): Problem {
    const inner = problem.field === undefined ? [] : problem.field.split('.');
    const place = fieldProblem(this.document, [...path, ...inner], problem);
    return problem.file === undefined
      ? place
      : { ...place, message: `${problem.file}: ${problem.message}` };
  }
}
