/**
 * The library's face: everything a command does can be done from code. Read from top to bottom it
 * is the way from a datasheet to verified vectors.
 */

// Errors and quantities.
export { Fault, describeProblem, type FaultKind, type Place, type Problem } from './fault.js';
export {
  fromCelsius,
  STC_IRRADIANCE,
  STC_TEMPERATURE,
  thermalVoltage,
  toCelsius,
  uniformConditions,
  type Amperes,
  type AmperesPerKelvin,
  type AmperesPerVolt,
  type Conditions,
  type Kelvin,
  type Ohms,
  type Seconds,
  type Siemens,
  type Volts,
  type VoltsPerKelvin,
  type Watts,
  type WattsPerSquareMetre,
} from './quantities.js';
export { VERSION } from './version.js';

// Input files, and writing a file whole or not at all.
export { parseInput, readInput, type InputDocument } from './file/document.js';
export { writeWhole } from './file/written-file.js';
export { SCHEMA_NAMES, schemaText, type SchemaName } from './schemas.js';

// Numbers that are the same on every machine.
export { exp, expm1 } from './numeric/exponential.js';
export { log, log1p } from './numeric/logarithm.js';
export { wrightOmega } from './numeric/wright-omega.js';
export { findRoot, findRootWithSlope, type RootOptions, type RootResult } from './numeric/root.js';
export { Random } from './numeric/random.js';
export { crc32 } from './numeric/crc32.js';

// Integers: formats and codes.
export { codeRange, type CodeFormat, type Overflow } from './fixed/code-format.js';
export { Quantizer } from './fixed/quantizer.js';
export { ROUNDINGS, type Rounding } from './fixed/rounding.js';
export { codeFormatFrom, type CodeFormatDefinition } from './fixed/file-definition.js';
export { formatQ, parseQ } from './fixed/q-format.js';
export { productFormat } from './fixed/product-format.js';

// Sources.
export { globalPeak, type Curve, type Peak, type Source } from './source/curve.js';
export { sampleCurve, type CurvePoint } from './source/sample.js';
export type { SingleDiode } from './source/single-diode.js';
export { voltageAtCurrent } from './source/single-diode.js';
export { SingleDiodeCurve } from './source/single-diode-curve.js';
export { translate, type TemperatureBehaviour } from './source/translation.js';
export { TECHNOLOGIES, type TechnologyName } from './source/technology.js';
export { Module } from './source/module.js';
export type { Datasheet } from './source/datasheet.js';
export { parseDatasheet, type DatasheetReading } from './source/datasheet-file.js';
export {
  fitDatasheet,
  FIT_METHODS,
  type Fit,
  type FitMethod,
  type PracticeCheck,
} from './source/fit/fit.js';
export type { Agreement, AgreementField } from './source/fit/agreement.js';
export { DEFAULT_SWEEP, sweepIdeality, type SweepCandidate } from './source/fit/sweep.js';
export { modelText, parseModel, writeModel } from './source/model-file.js';
export { loadSource, parseSource, type SourceReading } from './source/source-file.js';

// Weather.
export { hold, ramp, repeat, sequence, step, trapezoids } from './weather/blocks.js';
export { compileWeather, loadWeather, parseWeather, standardSequence } from './weather/load.js';
export {
  writableConditions,
  type Mark,
  type Weather,
  type WritableConditions,
} from './weather/weather.js';
export type { Block, WeatherDefinition } from './weather/definition.js';
export { TRAPEZOID_TABLES, type TrapezoidTable } from './weather/trapezoid-tables.js';
export { sampleCount } from './weather/sampling.js';

// Tables.
export { codeCurve, currentCodeAt, interpolateCode, type CodeCurve } from './table/curve-lookup.js';

// Vectors: build, write, read, verify.
export { curveSet, type CurveSetPlan } from './vectors/curve-set.js';
export { timeline, type TimelinePlan } from './vectors/timeline.js';
export { writeProduct, type ProductFile } from './vectors/write-product.js';
export type { OutputForm } from './vectors/suite-definition.js';
export type { Suite } from './vectors/suite.js';
export type { CodedQuantity } from './fixed/coded-quantity.js';
export type { Column, Product, ProductFormats, Section } from './vectors/product.js';
export { emitSuite, type Emission, type EmitOptions } from './vectors/emit.js';
export { verifySuite, type Verification, type VerifyOptions } from './vectors/verify.js';
export { readVectorFile, type VectorFile, type ReadSection } from './vectors/binary-reader.js';
export type { Manifest } from './vectors/manifest.js';

// Pictures.
export { drawTraces, type PictureOptions, type Trace } from './report/terminal-picture.js';
