import { drawTraces, sampleCurve, type Curve } from '../index.js';
import { colours, showsUnicode } from './print.js';

/** The I-V and P-V curves as the terminal can show them. */
export function pictureOf(curve: Curve): string[] {
  const points = sampleCurve(curve, 120);
  const x = points.map(({ voltage }) => voltage);
  const paints = [colours.cyan, colours.yellow];
  return drawTraces(
    [
      { mark: 'i', title: 'current', unit: 'A', x, y: points.map(({ current }) => current) },
      { mark: 'p', title: 'power', unit: 'W', x, y: points.map(({ power }) => power) },
    ],
    {
      width: 60,
      height: 14,
      dots: showsUnicode(),
      xTitle: 'V',
      paint: (text, trace) => paints[trace]!(text),
    },
  );
}
