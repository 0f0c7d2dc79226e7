import { describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { Random } from '../../src/numeric/random.js';
import { DoubleDiodeCurve } from '../../src/source/double-diode-curve.js';
import type { DoubleDiode } from '../../src/source/double-diode.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import { sampleCurve } from '../../src/source/sample.js';
import { anyDiode } from './any-diode.js';
import { exponential, fixed, ONE, over, size, times, toDouble, type Fixed } from './fixed-point.js';

/** A single diode of the accuracy range with a second one beside it that carries a like share. */
function anyDoubleDiode(random: Random): DoubleDiode {
  const { photocurrent, saturationCurrent, idealityVoltage, ...rest } = anyDiode(random);
  const voc = new SingleDiodeCurve({ photocurrent, saturationCurrent, idealityVoltage, ...rest })
    .openCircuitVoltage;
  const second = idealityVoltage * random.between(1, 2);
  const carried = photocurrent * Math.pow(10, random.between(-4, 1));
  return {
    photocurrent,
    ...rest,
    diodes: [
      { saturationCurrent, idealityVoltage },
      { saturationCurrent: carried / Math.expm1(voc / second), idealityVoltage: second },
    ],
  };
}

/** The equation to 90 digits: excess of the current given by V and I over I, and -dI/du there. */
function balance(d: DoubleDiode, v: Fixed, i: Fixed): { excess: Fixed; conductance: Fixed } {
  const u = v + times(i, fixed(d.seriesResistance));
  let excess = fixed(d.photocurrent) - times(u, fixed(d.shuntConductance)) - i;
  let conductance = fixed(d.shuntConductance);
  for (const { saturationCurrent, idealityVoltage } of d.diodes) {
    const grown = times(fixed(saturationCurrent), exponential(over(u, fixed(idealityVoltage))));
    excess -= grown - fixed(saturationCurrent);
    conductance += over(grown, fixed(idealityVoltage));
  }
  return { excess, conductance };
}

/** Newton's method in 90 digits; what is to be checked serves as the start and as nothing else. */
function exactCurrent(d: DoubleDiode, voltage: number, start: number): Fixed {
  let i = fixed(start);
  for (let pass = 0; pass < 60; pass++) {
    const { excess, conductance } = balance(d, fixed(voltage), i);
    const step = over(excess, ONE + times(fixed(d.seriesResistance), conductance));
    i += step;
    if (size(step) <= size(i) >> 150n || size(step) < 1n << 80n) return i;
  }
  throw new Error('The reference does not settle.');
}

const difference = (found: number, exact: Fixed): number =>
  Math.abs(toDouble(fixed(found) - exact));

describe('Against 90-digit arithmetic, a double-diode curve', () => {
  const random = new Random(22);
  const curves = Array.from({ length: 150 }, () => new DoubleDiodeCurve(anyDoubleDiode(random)));

  test('has its current within 1e-12 of Isc, from reverse to beyond open circuit', () => {
    for (const curve of curves) {
      for (const share of [-0.5, 0, 0.3, 0.7, 0.9, 0.97, 1, 1.1]) {
        const voltage = share * curve.openCircuitVoltage;
        const current = curve.current(voltage);
        const exact = exactCurrent(curve.diode, voltage, current);
        const scale = Math.max(curve.shortCircuitCurrent, Math.abs(current));
        expect(difference(current, exact) / scale).toBeLessThan(1e-12);
      }
    }
  });

  test('has its slope within 1e-11 of itself', () => {
    for (const { diode, openCircuitVoltage, ...curve } of curves.map((curve) => ({
      diode: curve.diode,
      openCircuitVoltage: curve.openCircuitVoltage,
      slope: (voltage: number) => curve.slope(voltage),
      current: (voltage: number) => curve.current(voltage),
    }))) {
      for (const share of [0, 0.6, 0.9, 1]) {
        const voltage = share * openCircuitVoltage;
        const i = exactCurrent(diode, voltage, curve.current(voltage));
        const { conductance } = balance(diode, fixed(voltage), i);
        const exact = -over(conductance, ONE + times(fixed(diode.seriesResistance), conductance));
        const slope = curve.slope(voltage);
        expect(difference(slope, exact)).toBeLessThanOrEqual(1e-11 * Math.abs(slope));
      }
    }
  });

  test('has no current at its open-circuit voltage but what an error of 1e-12 of it drives', () => {
    for (const { diode, openCircuitVoltage } of curves) {
      const { excess, conductance } = balance(diode, fixed(openCircuitVoltage), 0n);
      const miss = Math.abs(toDouble(over(excess, conductance)));
      expect(miss).toBeLessThan(1e-12 * openCircuitVoltage);
    }
  });

  test('has at its peak a slope of power that an error of 1e-12 of the voltage explains', () => {
    for (const curve of curves) {
      const { voltage, current, power } = curve.peaks()[0]!;
      expect(power).toBe(voltage * current);
      const slopeOfPower = (v: number): number => {
        const i = exactCurrent(curve.diode, v, curve.current(v));
        const { conductance } = balance(curve.diode, fixed(v), i);
        const rs = fixed(curve.diode.seriesResistance);
        const slope = -over(conductance, ONE + times(rs, conductance));
        return toDouble(i + times(fixed(v), slope));
      };
      expect(slopeOfPower(voltage * (1 - 1e-12))).toBeGreaterThan(0);
      expect(slopeOfPower(voltage * (1 + 1e-12))).toBeLessThan(0);
    }
  });
});

describe('A double-diode curve', () => {
  const random = new Random(23);

  test('is the single-diode curve where one of its diodes carries nothing', () => {
    for (let run = 0; run < 50; run++) {
      const single = anyDiode(random);
      const { saturationCurrent, idealityVoltage, ...rest } = single;
      const idle = { saturationCurrent: 0, idealityVoltage: 1 };
      const active = { saturationCurrent, idealityVoltage };
      const one = new SingleDiodeCurve(single);
      for (const diodes of [
        [active, idle],
        [idle, active],
      ] as const) {
        const two = new DoubleDiodeCurve({ ...rest, diodes });
        expect(two.openCircuitVoltage / one.openCircuitVoltage).toBeCloseTo(1, 12);
        for (const { voltage, current } of sampleCurve(one, 12)) {
          // Both are within 1e-12 of the short-circuit current.
          expect(Math.abs(two.current(voltage) - current)).toBeLessThan(
            2e-12 * one.shortCircuitCurrent,
          );
        }
      }
    }
  });

  test('falls with voltage, and no voltage yields more power than its peak', () => {
    for (let run = 0; run < 50; run++) {
      const curve = new DoubleDiodeCurve(anyDoubleDiode(random));
      const { power } = curve.peaks()[0]!;
      let last = Infinity;
      for (const point of sampleCurve(curve, 200)) {
        expect(point.current).toBeLessThanOrEqual(last + 1e-12 * curve.shortCircuitCurrent);
        expect(point.power).toBeLessThanOrEqual(power * (1 + 1e-12));
        last = point.current;
      }
    }
  });

  test('in the dark has no current, no voltage and one peak of no power', () => {
    const curve = new DoubleDiodeCurve({ ...anyDoubleDiode(random), photocurrent: 0 });
    expect([curve.shortCircuitCurrent, curve.openCircuitVoltage]).toEqual([0, 0]);
    expect(curve.peaks()).toEqual([{ voltage: 0, current: 0, power: 0 }]);
  });

  test.each([
    ['photocurrent', { photocurrent: -1 }],
    ['seriesResistance', { seriesResistance: NaN }],
    ['shuntConductance', { shuntConductance: Infinity }],
    ['diodes[0].idealityVoltage', { diodes: [{ saturationCurrent: 1, idealityVoltage: 0 }] }],
    ['diodes[0].saturationCurrent', { diodes: [{ saturationCurrent: -1, idealityVoltage: 1 }] }],
  ])('with %s out of its range is refused', (field, change) => {
    const good = anyDoubleDiode(random);
    const diodes = [...('diodes' in change ? change.diodes : []), ...good.diodes].slice(0, 2);
    try {
      new DoubleDiodeCurve({ ...good, ...change, diodes: diodes as never });
      expect.unreachable();
    } catch (error) {
      expect((error as Fault).problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    }
  });
});
