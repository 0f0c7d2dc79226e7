/** Random strings and arrays: shade in any number of steps, odd cells, every kind of diode. */
import type { Random } from '../../../src/numeric/random.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';
import { ArrayCurve } from '../../../src/source/network/array-curve.js';
import type { Blocking, Bypass, JunctionDiode } from '../../../src/source/network/bypass.js';
import type { Cells } from '../../../src/source/network/cell-group.js';
import { StringCurve } from '../../../src/source/network/string-curve.js';
import { substring } from '../../../src/source/network/substring.js';
import { thermalVoltage } from '../../../src/quantities.js';

export type Diodes = 'ideal' | 'junction' | 'breakdown' | 'mixed';

/** 1 to 4 strings unless `most` says otherwise, each of 1 to 8 kinds of substrings. */
export function anyArray(random: Random, diodes: Diodes, most = 4): ArrayCurve {
  const cell = anyCell(random);
  const cells = random.integer(6, 30);
  const count = random.integer(1, most);
  return new ArrayCurve(
    Array.from({ length: count }, () => ({
      count: random.integer(1, 3),
      string: anyString(random, cell, cells, diodes),
    })),
  );
}

function anyString(random: Random, cell: SingleDiode, cells: number, diodes: Diodes): StringCurve {
  const kinds = random.integer(1, 8);
  const parts = Array.from({ length: kinds }, () => {
    const kind = diodes === 'mixed' ? one(random, ['ideal', 'junction', 'breakdown']) : diodes;
    return {
      count: random.integer(1, 4),
      element: substring(anyCells(random, cell, cells, kind), anyBypass(random, kind)),
    };
  });
  return new StringCurve(parts, anyBlocking(random, diodes));
}

function anyCells(random: Random, cell: SingleDiode, count: number, kind: string): Cells[] {
  const lit = (share: number): SingleDiode => ({
    ...cell,
    photocurrent: cell.photocurrent * share,
    shuntConductance: cell.shuntConductance * (share + 0.01),
  });
  const breakdown = {
    conductance: cell.shuntConductance * random.between(0.002, 0.1),
    exponent: random.between(3, 3.7),
    voltage: random.between(-30, -10),
  };
  const extra = kind === 'breakdown' ? { breakdown } : {};
  const share = random.uniform() < 0.4 ? 1 : random.between(0.02, 1.1);
  const odd = kind === 'breakdown' || random.uniform() < 0.2 ? random.integer(1, 2) : 0;
  return [
    { count: count - odd, diode: lit(share), ...extra },
    { count: odd, diode: lit(share * random.between(0.1, 1)), ...extra },
  ];
}

function anyBypass(random: Random, kind: string): Bypass {
  const chance = random.uniform();
  if (chance < 0.04) return { kind: 'shorted' };
  if (chance < 0.08) return { kind: 'none' };
  if (kind === 'junction') return { kind: 'diode', diode: anyJunction(random) };
  return { kind: 'clamp', drop: one(random, [0, 0.05, 0.5, 0.7]) };
}

function anyBlocking(random: Random, diodes: Diodes): Blocking {
  const chance = random.uniform();
  if (chance < 0.5) return { kind: 'none' };
  if (diodes === 'junction' || (diodes === 'mixed' && chance < 0.75)) {
    return { kind: 'diode', diode: anyJunction(random) };
  }
  return { kind: 'clamp', drop: random.between(0, 0.8) };
}

/** From a silicon diode to a leaky Schottky diode. */
const anyJunction = (random: Random): JunctionDiode => ({
  saturationCurrent: power(random, 1e-10, 1e-5),
  idealityVoltage: random.between(1, 1.6) * thermalVoltage(random.between(270, 380)),
  seriesResistance: random.uniform() < 0.3 ? 0 : random.between(0.001, 0.02),
});

function anyCell(random: Random): SingleDiode {
  const photocurrent = power(random, 0.5, 15);
  const idealityVoltage = random.between(1, 1.5) * thermalVoltage(random.between(260, 350));
  const voc = random.between(0.5, 0.75);
  return {
    photocurrent,
    saturationCurrent: photocurrent / Math.expm1(voc / idealityVoltage),
    idealityVoltage,
    seriesResistance: (random.between(0.002, 0.08) * voc) / photocurrent,
    shuntConductance: photocurrent / voc / power(random, 5, 3000),
  };
}

const power = (random: Random, low: number, high: number): number =>
  low * (high / low) ** random.uniform();

const one = <T>(random: Random, list: readonly T[]): T => list[random.integer(0, list.length - 1)]!;
