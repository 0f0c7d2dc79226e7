/** Currents of strings against the equations of their cells and diodes to 40 digits. */
import { describe, expect, test } from 'vitest';
import { Random } from '../../../src/numeric/random.js';
import { thermalVoltage } from '../../../src/quantities.js';
import type { Bypass } from '../../../src/source/network/bypass.js';
import { StringCurve } from '../../../src/source/network/string-curve.js';
import { substring } from '../../../src/source/network/substring.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';
import { fixed, toDouble } from '../fixed-point.js';
import { ExactDiode } from '../reference.js';

interface Kind {
  readonly count: number;
  /** Of all the cells of one substring. */
  readonly diode: SingleDiode;
}

/** 20 cells a substring, a few irradiances. */
function anyKinds(random: Random): Kind[] {
  const photocurrent = random.between(1, 12);
  const a = 20 * random.between(1, 1.4) * thermalVoltage(random.between(260, 340));
  return Array.from({ length: random.integer(1, 4) }, () => {
    const light = random.between(0.05, 1);
    return {
      count: random.integer(1, 12),
      diode: {
        photocurrent: photocurrent * light,
        saturationCurrent: photocurrent / Math.expm1(random.between(11, 14) / a),
        idealityVoltage: a,
        seriesResistance: random.between(0.02, 0.1),
        shuntConductance: light / random.between(50, 3000),
      },
    };
  });
}

const stringOf = (kinds: readonly Kind[], bypass: Bypass): StringCurve =>
  new StringCurve(
    kinds.map(({ count, diode }) => ({
      count,
      element: substring([{ count: 1, diode }], bypass),
    })),
    { kind: 'none' },
  );

describe('the current of a string', () => {
  test('is within 1e-12 of Isc with ideal bypasses: the exact voltages there enclose the one asked', () => {
    const random = new Random(30);
    for (let index = 0; index < 60; index++) {
      const kinds = anyKinds(random);
      const string = stringOf(kinds, { kind: 'clamp', drop: 0.5 });
      const exactVoltage = (current: number): number => {
        const each = kinds.map(({ count, diode }) => {
          const start = voltageNear(diode, current);
          const exact = new ExactDiode(diode).voltageAt(current, start);
          const clamped = exact < fixed(-0.5) ? fixed(-0.5) : exact;
          return BigInt(count) * clamped;
        });
        return toDouble(each.reduce((sum, voltage) => sum + voltage, 0n));
      };
      for (let point = 0; point < 10; point++) {
        const voltage = string.openCircuitVoltage * random.uniform();
        const current = string.current(voltage);
        const margin = 1e-12 * string.shortCircuitCurrent;
        expect(exactVoltage(current - margin)).toBeGreaterThanOrEqual(voltage);
        expect(exactVoltage(current + margin)).toBeLessThanOrEqual(voltage);
      }
    }
  });

  test('splits between cells and bypass diodes so that their exact currents add to it', () => {
    const random = new Random(31);
    for (let index = 0; index < 60; index++) {
      const kinds = anyKinds(random);
      const bypass = {
        saturationCurrent: [1e-9, 1e-7, 1e-5][index % 3]!,
        idealityVoltage: random.between(1, 1.5) * thermalVoltage(300),
        seriesResistance: random.between(0.001, 0.02),
      };
      const exactBypass = new ExactDiode({ ...bypass, photocurrent: 0, shuntConductance: 0 });
      const string = stringOf(kinds, { kind: 'diode', diode: bypass });
      for (let point = 0; point < 10; point++) {
        const voltage = string.openCircuitVoltage * random.uniform();
        const current = string.current(voltage);
        const margin = 1e-12 * string.shortCircuitCurrent;
        for (const { diode } of kinds) {
          const element = substring([{ count: 1, diode }], { kind: 'diode', diode: bypass });
          const across = element.voltage(current);
          const cells = new ExactDiode(diode).at(across, element.currentInCells(current));
          const past = exactBypass.at(-across, element.currentInCells(current) - current);
          const sum = toDouble(cells.current - past.current);
          expect(Math.abs(sum - current)).toBeLessThanOrEqual(margin);
        }
        // The sum of voltages is off by no more than what such a current makes of it.
        const off = Math.abs(string.voltage(current) - voltage);
        expect(off / string.resistance(current)).toBeLessThanOrEqual(margin);
      }
    }
  });
});

/** A start for the exact solution, right of it by no more than a few ideality voltages. */
function voltageNear(diode: SingleDiode, current: number): number {
  const inner = diode.photocurrent - current;
  const { saturationCurrent, idealityVoltage, seriesResistance, shuntConductance } = diode;
  const junction =
    inner > 0
      ? Math.min(idealityVoltage * Math.log1p(inner / saturationCurrent), inner / shuntConductance)
      : inner / shuntConductance;
  return junction - current * seriesResistance;
}
