import { argumentFault } from '../../fault.js';
import type { Amperes, AmperesPerVolt, Volts } from '../../quantities.js';
import type { Curve, Peak } from '../curve.js';
import { SingleDiodeCurve } from '../single-diode-curve.js';
import type { EnclosedCurve, Enclosure } from './enclosure.js';

export interface CompileOptions {
  /** How far the compiled current may be from the curve's, from 0 V to Voc: above 0. */
  readonly currentError: Amperes;
}

/**
 * The same curve as straight lines between points of it, close enough that nowhere between 0 V and
 * open circuit its current is off by more than `currentError`: a look-up and a product a point, for
 * loops of millions. Outside that range the curve itself answers; short-circuit current,
 * open-circuit voltage and peaks are the curve's own.
 *
 * The bound is proved, not sampled. On a piece of width w the curve's slope lies between l and m and
 * the line's is s. From the left end the curve's distance from the line grows at most by m - s per
 * volt, and it must be gone at the right end, towards which it shrinks at most by s - l: so it is at
 * most w (m - s) (s - l) / (m - l), and as much the other way. Pieces are halved until that is
 * within the bound less 10^-12 Isc for rounding.
 *
 * `slope` is that of the line. The bound on current needs about (Isc / 8 currentError)^½ points for
 * each knee: 1,000 to 4,000 for a millionth of Isc.
 * @throws Fault `ARGUMENT` for an error of 4·10^-12 Isc or less, or one that takes more than a
 * million points.
 */
export function compileCurve(
  curve: EnclosedCurve | SingleDiodeCurve,
  { currentError }: CompileOptions,
): CompiledCurve {
  const noise = ROUNDING * curve.shortCircuitCurrent;
  if (!(currentError > 4 * noise && currentError < Infinity)) {
    throw argumentFault('currentError', `finite and above ${4 * noise} A`, currentError);
  }
  const enclosed = curve instanceof SingleDiodeCurve ? concaveCurve(curve) : curve;
  return new CompiledCurve(curve, placeKnots(enclosed, currentError - noise), currentError);
}

const ROUNDING = 1e-12;
const MOST_KNOTS = 1_000_000;

/** Points of a curve, rising in voltage from 0 to open circuit. */
interface Knots {
  readonly voltages: Float64Array;
  readonly currents: Float64Array;
}

export class CompiledCurve implements Curve {
  readonly shortCircuitCurrent: Amperes;
  readonly openCircuitVoltage: Volts;
  /** Straight lines that the curve consists of. */
  readonly pieces: number;
  readonly #curve: Curve;
  readonly #knots: Knots;
  /** For equal steps of voltage, the piece in which the step begins. */
  readonly #start: Uint32Array;
  readonly #perVolt: number;

  constructor(
    curve: Curve,
    knots: Knots,
    /** The proved bound on the error of the current between 0 V and open circuit. */
    readonly currentError: Amperes,
  ) {
    this.#curve = curve;
    this.#knots = knots;
    this.shortCircuitCurrent = curve.shortCircuitCurrent;
    this.openCircuitVoltage = curve.openCircuitVoltage;
    this.pieces = knots.voltages.length - 1;
    const steps = Math.max(4 * this.pieces, 1);
    this.#perVolt = steps / curve.openCircuitVoltage;
    this.#start = new Uint32Array(steps + 1);
    let piece = 0;
    for (let step = 0; step <= steps; step++) {
      while (piece < this.pieces - 1 && knots.voltages[piece + 1]! * this.#perVolt <= step) piece++;
      this.#start[step] = piece;
    }
  }

  current(voltage: Volts): Amperes {
    const piece = this.#pieceAt(voltage);
    if (piece < 0) return this.#curve.current(voltage);
    const { voltages, currents } = this.#knots;
    const from = voltages[piece]!;
    const atFrom = currents[piece]!;
    const share = (voltage - from) / (voltages[piece + 1]! - from);
    return atFrom + share * (currents[piece + 1]! - atFrom);
  }

  slope(voltage: Volts): AmperesPerVolt {
    const piece = this.#pieceAt(voltage);
    if (piece < 0) return this.#curve.slope(voltage);
    const { voltages, currents } = this.#knots;
    return (currents[piece + 1]! - currents[piece]!) / (voltages[piece + 1]! - voltages[piece]!);
  }

  peaks(): readonly Peak[] {
    return this.#curve.peaks();
  }

  /** -1 outside of 0 V to open circuit. */
  #pieceAt(voltage: Volts): number {
    if (!(voltage >= 0 && voltage <= this.openCircuitVoltage) || this.pieces < 1) return -1;
    const { voltages } = this.#knots;
    let piece = this.#start[Math.floor(voltage * this.#perVolt)] ?? this.pieces - 1;
    // Rounding may name the step after; the pieces of one step are few.
    while (piece > 0 && voltages[piece]! > voltage) piece--;
    while (piece < this.pieces - 1 && voltages[piece + 1]! <= voltage) piece++;
    return piece;
  }
}

/** The curve of one diode is concave everywhere, so its slope is known from the ends. */
function concaveCurve(curve: SingleDiodeCurve): EnclosedCurve {
  return {
    shortCircuitCurrent: curve.shortCircuitCurrent,
    openCircuitVoltage: curve.openCircuitVoltage,
    current: (voltage) => curve.current(voltage),
    slope: (voltage) => curve.slope(voltage),
    peaks: () => curve.peaks(),
    kinks: [],
    concave: true,
    encloseSlope: (from, to, into) => {
      into.most = curve.slope(from);
      into.least = curve.slope(to);
    },
  };
}

function placeKnots(curve: EnclosedCurve, error: Amperes): Knots {
  const end = curve.openCircuitVoltage;
  if (!(end > 0)) return { voltages: new Float64Array(1), currents: new Float64Array(1) };
  const edges = [0, ...curve.kinks, end];
  const voltages = [0];
  const currents = [curve.shortCircuitCurrent];
  const range: Enclosure = { least: 0, most: 0 };
  const at = (voltage: Volts): Amperes => (voltage === end ? 0 : curve.current(voltage));
  for (let piece = 1; piece < edges.length; piece++) {
    const open = [{ to: edges[piece]!, atTo: at(edges[piece]!) }];
    for (let next = open.at(-1); next !== undefined; next = open.at(-1)) {
      const from = voltages.at(-1)!;
      const middle = 0.5 * (from + next.to);
      const slope = (next.atTo - currents.at(-1)!) / (next.to - from);
      curve.encloseSlope(from, next.to, range);
      const isClose = farthest(next.to - from, slope, range) <= error;
      if (isClose || middle <= from || middle >= next.to) {
        voltages.push(next.to);
        currents.push(next.atTo);
        open.pop();
      } else open.push({ to: middle, atTo: at(middle) });
      if (voltages.length + open.length > MOST_KNOTS) {
        throw argumentFault('currentError', 'large enough for a million points', error);
      }
    }
  }
  return { voltages: Float64Array.from(voltages), currents: Float64Array.from(currents) };
}

/** Of a curve with slopes in the range from a line of the given slope that meets it at both ends. */
function farthest(width: Volts, slope: AmperesPerVolt, { least, most }: Enclosure): Amperes {
  // A slope outside the range is rounding: the piece is straight.
  const above = Math.max(most - slope, 0);
  const below = Math.max(slope - least, 0);
  if (below === Infinity) return width * above;
  return above + below > 0 ? (width * above * below) / (above + below) : 0;
}
