import type { ReadColumn, ReadSection, VectorFile } from './binary-reader.js';
import type { QuantityName } from './quantity.js';
import type { Complain } from './verify-codes.js';

/**
 * What holds for every curve set, checked from the file alone: indexes stay inside their tables,
 * voltage rises and current never does, and the global peak is a peak: no point of the table has
 * more power than rounding explains, and its own power is the product of its voltage and current.
 */
export function checkCurveRules(file: VectorFile, complain: Complain): void {
  const section = (tag: string): ReadSection | undefined =>
    file.sections.find((candidate) => candidate.tag === tag);
  const curves = section('CURV');
  const points = section('POIN');
  const peaks = section('PEAK');
  if (curves === undefined || points === undefined || peaks === undefined) {
    complain('CURV', undefined, 'a curve set has the sections CURV, POIN and PEAK.');
    return;
  }
  const curveReader = columnReader(curves);
  const pointReader = columnReader(points);
  const peakReader = columnReader(peaks);
  let nextPoint = 0;
  let nextPeak = 0;
  for (let curve = 0; curve < curves.count; curve++) {
    const pointSpan = span(curveReader, curve, 'firstPoint', 'pointCount');
    const peakSpan = span(curveReader, curve, 'firstPeak', 'peakCount');
    const globalPeak = curveReader('globalPeak', curve).code;
    if (pointSpan.first !== nextPoint || pointSpan.end > points.count) {
      complain('CURV', curve, `points ${pointSpan.first} to ${pointSpan.end} do not follow.`);
      return;
    }
    if (peakSpan.first !== nextPeak || peakSpan.end > peaks.count) {
      complain('CURV', curve, `peaks ${peakSpan.first} to ${peakSpan.end} do not follow.`);
      return;
    }
    if (globalPeak < peakSpan.first || globalPeak >= peakSpan.end) {
      complain('CURV', curve, `global peak ${globalPeak} is not one of its peaks.`);
      return;
    }
    nextPoint = pointSpan.end;
    nextPeak = peakSpan.end;
    checkOrder(pointReader, pointSpan, complain);
    checkPeaks(pointReader, pointSpan, peakReader, peakSpan, globalPeak, complain);
  }
}

interface Cell {
  readonly code: number;
  readonly value: number;
  /** How far the value may be from the model's by rounding. */
  readonly doubt: number;
  readonly atEnd: boolean;
}

type CellReader = (quantity: QuantityName, record: number) => Cell;

interface Span {
  readonly first: number;
  readonly end: number;
}

function columnReader(section: ReadSection): CellReader {
  const find = new Map(section.columns.map((column) => [column.quantity, column]));
  return (quantity, record) => {
    const column = find.get(quantity);
    return column === undefined ? ABSENT : cell(section, column, record);
  };
}

const ABSENT: Cell = { code: NaN, value: NaN, doubt: NaN, atEnd: false };

function cell(section: ReadSection, column: ReadColumn, record: number): Cell {
  const code = section.code(column, record);
  const { step, origin, rounding, minCode, maxCode } = column.format;
  const nearest = rounding === 'half-even' || rounding === 'half-up';
  return {
    code,
    value: origin + code * step,
    doubt: nearest ? step / 2 : step,
    atEnd: code === minCode || code === maxCode,
  };
}

function span(read: CellReader, curve: number, first: QuantityName, count: QuantityName): Span {
  const start = read(first, curve).code;
  return { first: start, end: start + read(count, curve).code };
}

function checkOrder(read: CellReader, { first, end }: Span, complain: Complain): void {
  for (let point = first + 1; point < end; point++) {
    if (!(read('voltage', point).code > read('voltage', point - 1).code)) {
      complain('POIN', point, 'the voltage does not rise.');
    }
    if (!(read('current', point).code <= read('current', point - 1).code)) {
      complain('POIN', point, 'the current rises with voltage.');
    }
  }
}

function checkPeaks(
  readPoint: CellReader,
  points: Span,
  readPeak: CellReader,
  peaks: Span,
  globalPeak: number,
  complain: Complain,
): void {
  const best = readPeak('peakPower', globalPeak);
  for (let peak = peaks.first; peak < peaks.end; peak++) {
    const voltage = readPeak('peakVoltage', peak);
    const current = readPeak('peakCurrent', peak);
    const power = readPeak('peakPower', peak);
    const doubt = voltage.value * current.doubt + current.value * voltage.doubt + power.doubt;
    const clipped = voltage.atEnd || current.atEnd || power.atEnd;
    if (!clipped && !(Math.abs(voltage.value * current.value - power.value) <= doubt * ROOM)) {
      complain('PEAK', peak, 'the power is not the product of voltage and current.');
    }
    if (!(power.value <= best.value)) {
      complain('PEAK', peak, 'the power is above that of the global peak.');
    }
  }
  if (best.atEnd) return;
  for (let point = points.first; point < points.end; point++) {
    const voltage = readPoint('voltage', point);
    const current = readPoint('current', point);
    const doubt = Math.abs(voltage.value) * current.doubt + best.doubt;
    if (!current.atEnd && !(voltage.value * current.value <= best.value + doubt * ROOM)) {
      complain('POIN', point, 'the power is above that of the global peak.');
    }
  }
}

// Products of rounded values: the second-order term and the arithmetic of the check.
const ROOM = 1.01;
