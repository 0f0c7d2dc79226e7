/**
 * Modules in series, unevenly lit, each behind one ideal bypass: peaks and open-circuit voltages
 * computed independently in double precision for the 54-cell, 200 W module of Villalva, Gazoli and
 * Ruppert Filho 2009 with its published parameters at 25 °C, photocurrent in proportion to
 * irradiance and the other parameters fixed. And Bishop's cell, Solar Cells 25 (1988) 73-89, with
 * the same parameters for one cell; his two sets of breakdown parameters are those often met in the
 * literature, from memory.
 */
import { describe, expect, test } from 'vitest';
import { thermalVoltage, STC_TEMPERATURE } from '../../src/quantities.js';
import { globalPeak } from '../../src/source/curve.js';
import { ArrayCurve } from '../../src/source/network/array-curve.js';
import { breakdownCurrent } from '../../src/source/network/breakdown.js';
import { CellGroup } from '../../src/source/network/cell-group.js';
import { StringCurve } from '../../src/source/network/string-curve.js';
import { substring } from '../../src/source/network/substring.js';
import { currentAtJunction } from '../../src/source/single-diode.js';

const CELL = {
  photocurrent: 8.214,
  saturationCurrent: 9.825e-8,
  idealityVoltage: 1.3 * thermalVoltage(STC_TEMPERATURE),
  seriesResistance: 0.221 / 54,
  shuntConductance: 54 / 415.405,
};

function stringOf(irradiances: readonly number[], drop: number): ArrayCurve {
  const parts = irradiances.map((irradiance) => {
    const diode = { ...CELL, photocurrent: (CELL.photocurrent * irradiance) / 1000 };
    return { count: 1, element: substring([{ count: 54, diode }], { kind: 'clamp', drop }) };
  });
  return new ArrayCurve([{ count: 1, string: new StringCurve(parts, { kind: 'none' }) }]);
}

/** Voltage, current and power of each peak, and which of them is the global one. */
const EXAMPLES = [
  {
    irradiances: [1000, 600, 300],
    drop: 0.5,
    voc: '95.5091',
    peaks: [
      ['25.4182', '7.57529', '192.5501'],
      ['54.6051', '4.70114', '256.7060'],
      ['85.0850', '2.35918', '200.7305'],
    ],
    best: 1,
  },
  {
    irradiances: [1000, 600, 300],
    drop: 0,
    voc: '95.5091',
    peaks: [
      ['26.3490', '7.59557', '200.1357'],
      ['55.0865', '4.70273', '259.0570'],
      ['85.0850', '2.35918', '200.7305'],
    ],
    best: 1,
  },
  {
    irradiances: [1000, 1000, 500],
    drop: 0.5,
    voc: '97.3838',
    peaks: [
      ['52.2321', '7.59063', '396.4748'],
      ['85.4061', '3.96191', '338.3710'],
    ],
    best: 0,
  },
  {
    irradiances: [1000, 500, 500],
    drop: 0.5,
    voc: '96.1174',
    peaks: [
      ['25.4182', '7.57529', '192.5501'],
      ['81.1165', '3.86744', '313.7130'],
    ],
    best: 1,
  },
  {
    irradiances: [1000, 800, 600, 400],
    drop: 0.5,
    voc: '128.5179',
    peaks: [
      ['24.9537', '7.56462', '188.7651'],
      ['53.0833', '6.25700', '332.1421'],
      ['82.9457', '4.75363', '394.2926'],
      ['114.1897', '3.17832', '362.9320'],
    ],
    best: 2,
  },
  {
    irradiances: [1000, 1000, 1000, 300],
    drop: 0.5,
    voc: '129.3247',
    peaks: [
      ['78.5811', '7.59228', '596.6101'],
      ['117.6586', '2.37543', '279.4896'],
    ],
    best: 0,
  },
] as const;

describe('a string of unevenly lit modules', () => {
  test.each(EXAMPLES)(
    'lit $irradiances W/m², bypass drop $drop V, has exactly the published peaks, to every digit',
    ({ irradiances, drop, voc, peaks, best }) => {
      const curve = stringOf(irradiances, drop);
      expect(curve.openCircuitVoltage.toFixed(4)).toBe(voc);
      const found = curve.peaks();
      expect(
        found.map(({ voltage, current, power }) => [
          voltage.toFixed(4),
          current.toFixed(5),
          power.toFixed(4),
        ]),
      ).toEqual(peaks);
      expect(found.indexOf(globalPeak(found))).toBe(best);
    },
  );
});

describe('a cell driven backwards', () => {
  const shunt = CELL.shuntConductance;
  const SETS = [
    {
      breakdown: { conductance: 0.1 * shunt, exponent: 3.7, voltage: -15 },
      points: [
        ['8.214000', '-0.033617', '0.2761'],
        ['8.518134', '-2.034861', '17.3332'],
        ['9.155328', '-5.037469', '46.1197'],
        ['10.998513', '-8.045012', '88.4832'],
        ['17.086984', '-10.069930', '172.0647'],
        ['69.931773', '-12.286202', '859.1959'],
      ],
    },
    {
      breakdown: { conductance: 2e-3 * shunt, exponent: 3, voltage: -15 },
      points: [
        ['8.214000', '-0.033617', '0.2761'],
        ['8.474786', '-2.034684', '17.2435'],
        ['8.868355', '-5.036295', '44.6637'],
        ['9.274415', '-8.037956', '74.5473'],
        ['9.584133', '-10.039224', '96.2173'],
        ['10.163904', '-12.041597', '122.3896'],
      ],
    },
  ] as const;

  /** Junction voltages of the points. */
  const JUNCTIONS = [0, -2, -5, -8, -10, -12];

  test.each(SETS)('has the published points to every digit, with $breakdown', (set) => {
    const cell = new CellGroup({ count: 1, diode: CELL, breakdown: set.breakdown });
    JUNCTIONS.forEach((u, index) => {
      const current = currentAtJunction(CELL, u) - breakdownCurrent(set.breakdown, u);
      const voltage = u - CELL.seriesResistance * current;
      const power = -voltage * current;
      const point = [current.toFixed(6), voltage.toFixed(6), power.toFixed(4)];
      expect(point).toEqual(set.points[index]);
      // A rounding of the current, over the conductance of the shunt.
      expect(Math.abs(cell.voltage(current) - voltage)).toBeLessThan(1e-13);
    });
  });
});
