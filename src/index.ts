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
export {
  behaviourOf,
  translate,
  TRANSLATIONS,
  type TemperatureBehaviour,
  type TranslationName,
} from './source/translation.js';
export type { DeSotoBehaviour } from './source/translate/de-soto-2006.js';
export type { VillalvaBehaviour } from './source/translate/villalva-2009.js';
export type { CurvePoints, OperatingPoint } from './source/translate/curve-points.js';
export { FallingPoints } from './source/translate/falling-points.js';
export {
  translateByProcedure1,
  translateByProcedure2,
  type Procedure1Coefficients,
  type Procedure2Coefficients,
  type TranslatedPoints,
} from './source/translate/iec-60891.js';
export {
  interpolateByProcedure3,
  shareAtIrradiance,
  type InterpolatedCurve,
  type MeasuredAt,
} from './source/translate/iec-60891-interpolation.js';
export { En50530Generator, type En50530Rating } from './source/en-50530/generator.js';
export type { En50530Curve } from './source/en-50530/curve.js';
export {
  EN_50530_CONSTANTS,
  type En50530Constants,
  type En50530Technology,
} from './source/en-50530/constants.js';
export { parseEn50530 } from './source/en-50530/file.js';
export {
  PERFORMANCE_MATRIX,
  RATING_CONDITIONS,
  type MatrixPair,
  type RatingCondition,
} from './source/rating-conditions.js';
export { TECHNOLOGIES, type TechnologyName } from './source/technology.js';
export { Module } from './source/module.js';
export type { Datasheet } from './source/datasheet.js';
export { parseDatasheet, type DatasheetReading } from './source/datasheet-file.js';
export {
  fitByAllMethods,
  fitDatasheet,
  FIT_METHODS,
  type Fit,
  type FitMethod,
  type PracticeCheck,
} from './source/fit/fit.js';
export type { Agreement, AgreementField } from './source/fit/agreement.js';
export { fitExactly, type ExactOutcome, type FifthOutcome } from './source/fit/exact.js';
export {
  FIFTH_CONDITIONS,
  type FifthChoice,
  type FifthName,
} from './source/fit/fifth-condition.js';
export {
  roundingOfDocument,
  roundingOfNumbers,
  type DatasheetRounding,
} from './source/fit/printed-rounding.js';
export { roundingBounds, type Bound, type RoundingBounds } from './source/fit/rounding-bounds.js';
export { DEFAULT_SWEEP, sweepIdeality, type SweepCandidate } from './source/fit/sweep.js';
export { modelText, parseModel, writeModel } from './source/model-file.js';
export { parseArray, type ArrayReading } from './source/network/array-file.js';
export { PvArray, type ArrayPlan } from './source/network/pv-array.js';
export { ArrayCurve } from './source/network/array-curve.js';
export {
  hottestCell,
  operatingPoint,
  type CellState,
  type SubstringState,
} from './source/network/operating-point.js';
export {
  compileCurve,
  CompiledCurve,
  type CompileOptions,
} from './source/network/compiled-curve.js';

// Measured curves.
export { leastSquares } from './numeric/least-squares.js';
export type {
  LeastSquaresEnd,
  LeastSquaresOptions,
  LeastSquaresProblem,
  LeastSquaresResult,
} from './numeric/least-squares-problem.js';
export { determination, type Determination } from './numeric/determination.js';
export type { Diode, DoubleDiode } from './source/double-diode.js';
export { DoubleDiodeCurve } from './source/double-diode-curve.js';
export {
  parseMeasuredCurve,
  readMeasuredCurve,
  type MeasuredCurve,
  type MeasuredCurveOptions,
} from './source/measured/curve-file.js';
export type { MeasuredPoint } from './source/measured/curve-data.js';
export {
  fitMeasuredCurve,
  type DiodeModel,
  type FittedPoint,
  type MeasuredFit,
  type MeasuredFitOptions,
} from './source/measured/measured-fit.js';
export type { Estimate, EstimateName, Standing } from './source/measured/estimates.js';
export type { Outlier } from './source/measured/outliers.js';
export type { ResidualConvention } from './source/measured/residuals.js';
export { measuredFitWarnings } from './source/measured/fit-warnings.js';
export { moduleOf, type MeasuredModule } from './source/measured/reference-module.js';

// Many modules of one type.
export { aged, type Ageing } from './source/ageing.js';
export { population, populationOf, type PopulationPlan, type Spread } from './source/population.js';

// Any of these, from a file.
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
export {
  FAIMAN_2008,
  faimanTemperature,
  noctTemperature,
  rossTemperature,
  type FaimanCoefficients,
} from './weather/cell-temperature.js';
export {
  advanceLag,
  EN_50530_THERMAL_LAG,
  laggedTemperature,
  type LaggedIrradiance,
  type ThermalLag,
} from './weather/thermal-lag.js';

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
