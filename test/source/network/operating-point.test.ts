import { describe, expect, test } from 'vitest';
import { parseInput } from '../../../src/file/document.js';
import { STC_TEMPERATURE, uniformConditions } from '../../../src/quantities.js';
import { parseArray } from '../../../src/source/network/array-file.js';
import { hottestCell, operatingPoint } from '../../../src/source/network/operating-point.js';
import { ARRAY_MODULE } from './array-module.js';

const STC = uniformConditions(1000, STC_TEMPERATURE);
const arrayOf = (text: string) =>
  parseArray(
    parseInput(`array: any\nmodule: m.yaml\nsubstrings_per_module: 3\n${text}`, 'a.yaml'),
    () => ARRAY_MODULE,
  ).array;

describe('operatingPoint', () => {
  const array = arrayOf(`bypass: { drop_V: 0.5 }
reverse: { bishop: { share: 0.1, exponent: 3.7, breakdown_V: -15 } }
strings: [{ modules: 3 }]
shaded_cells: [{ string: 1, module: 2, substring: 3, count: 1, factor: 0.2 }]
`);
  const curve = array.at(STC);

  test('keeps the laws of the circuit: voltages add to the terminal voltage, currents are one', () => {
    for (const share of [0, 0.3, 0.6, 0.9, 0.99]) {
      const voltage = share * curve.openCircuitVoltage;
      const states = operatingPoint(array, STC, voltage);
      const sum = states.reduce((total, { places, voltage: v }) => total + places.length * v, 0);
      // Rounding of a sum of voltages, over the slope with which a current follows.
      expect(sum).toBeCloseTo(voltage, 9);
      for (const state of states) {
        expect(state.current).toBeCloseTo(curve.current(voltage), 12);
        const cells = state.cells.reduce((total, { count, voltage: v }) => total + count * v, 0);
        expect(cells).toBeCloseTo(state.voltage, 9);
      }
    }
  });

  test('finds the shaded cell as the one that takes power, driven back by its 19 neighbours', () => {
    const hottest = hottestCell(operatingPoint(array, STC, 0))!;
    expect(hottest.places).toEqual([{ string: 1, module: 2, substring: 3 }]);
    expect(hottest.cell.count).toBe(1);
    // Common practice: the neighbours' voltage and the drop of the bypass, 19 x 0.6 V + 0.5 V.
    expect(hottest.cell.voltage).toBeLessThan(-9);
    expect(hottest.cell.voltage).toBeGreaterThan(-12.9);
    const inCell = hottest.cell.dissipated / -hottest.cell.voltage;
    const state = operatingPoint(array, STC, 0).find(({ places }) => places.length === 1)!;
    expect(inCell + state.bypassCurrent).toBeCloseTo(state.current, 9);
  });

  test('finds no such cell in an array lit evenly, at its peak', () => {
    const even = arrayOf('strings: [{ modules: 2 }]\n');
    const { voltage } = even.at(STC).peaks()[0]!;
    expect(hottestCell(operatingPoint(even, STC, voltage))).toBeUndefined();
  });
});
