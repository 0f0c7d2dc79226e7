import { describe, expect, test } from 'vitest';
import { drawTraces, type PictureOptions } from '../../src/report/terminal-picture.js';

const ramp = { mark: 'r', title: 'rise', unit: 'A', x: [0, 10], y: [0, 2] };
const level = { mark: 'l', title: 'level', unit: 'W', x: [0, 10], y: [50, 50] };
const letters: PictureOptions = { width: 12, height: 4, dots: false, xTitle: 'V' };

describe('the picture of two traces', () => {
  test('draws each to its own scale: the first on the left, the second on the right', () => {
    expect(drawTraces([ramp, level], letters)).toEqual([
      '2 A |llllllllllll| 50 W',
      '    |      rrr   |',
      '    |   rrrr     |',
      '  0 |rrr         |',
      '    +------------+',
      '     0       10 V',
      '     r: rise   l: level',
    ]);
  });

  test('uses dots of two by four in a character where Unicode is shown', () => {
    const lines = drawTraces([ramp], { ...letters, dots: true });
    expect(lines.slice(0, 4).join('')).toMatch(/[\u2801-\u28ff]/);
    expect(lines.at(-1)).toContain('rise');
  });

  test('colours the pieces that belong to a trace', () => {
    const lines = drawTraces([ramp], { ...letters, paint: (text, trace) => `<${trace}${text}>` });
    expect(lines[3]).toContain('<0r>');
  });

  test('of a source in the dark is an empty frame, not a failure', () => {
    const dark = { ...ramp, x: [0, 0], y: [0, 0] };
    expect(drawTraces([dark], letters)[0]).toBe('0 A |            |');
  });
});
