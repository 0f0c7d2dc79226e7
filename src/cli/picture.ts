import { drawTraces, globalPeak, sampleCurve, type Curve } from '../index.js';
import { colours, showsUnicode } from './print.js';

/**
 * The I-V and P-V curves as the terminal can show them. Where there are several peaks, the line
 * below the axis marks them: ^ a local peak, G the global one.
 */
export function pictureOf(curve: Curve): string[] {
  const points = sampleCurve(curve, 120);
  const x = points.map(({ voltage }) => voltage);
  const paints = [colours.cyan, colours.yellow];
  const lines = drawTraces(
    [
      { mark: 'i', title: 'current', unit: 'A', x, y: points.map(({ current }) => current) },
      { mark: 'p', title: 'power', unit: 'W', x, y: points.map(({ power }) => power) },
    ],
    {
      width: WIDTH,
      height: 14,
      dots: showsUnicode(),
      xTitle: 'V',
      paint: (text, trace) => paints[trace]!(text),
    },
  );
  const peaks = curve.peaks();
  if (peaks.length < 2) return lines;
  const axis = lines.length - AXIS_FROM_END;
  const margin = ' '.repeat(lines[axis]!.indexOf('+') + 1);
  lines.splice(axis + 1, 0, `${margin}${peakMarks(curve)}`);
  return [...lines, `${margin}^ local peak   G global peak`];
}

const WIDTH = 60;
/** Below the axis the picture has its scale and the names of its traces. */
const AXIS_FROM_END = 3;

function peakMarks(curve: Curve): string {
  const marks = new Array<string>(WIDTH).fill(' ');
  const column = (voltage: number): number =>
    Math.round((voltage / curve.openCircuitVoltage) * (WIDTH - 1));
  const peaks = curve.peaks();
  for (const { voltage } of peaks) marks[column(voltage)] = '^';
  marks[column(globalPeak(peaks).voltage)] = 'G';
  return marks.join('').trimEnd();
}
