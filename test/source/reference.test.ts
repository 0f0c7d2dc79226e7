/** The references are held against a decimal library, with which they share nothing. */
import { Decimal } from 'decimal.js';
import { describe, expect, test } from 'vitest';
import { Random } from '../../src/numeric/random.js';
import { SingleDiodeCurve } from '../../src/source/single-diode-curve.js';
import type { SingleDiode } from '../../src/source/single-diode.js';
import { exactly } from '../numeric/ulp.js';
import { anyDiode } from './any-diode.js';
import { exponential, fixed, toDouble, type Fixed } from './fixed-point.js';
import { ExactDiode } from './reference.js';

const Digits = Decimal.clone({ precision: 60 });
/** Wide enough for the quotient to be exact where `a` came from a double. */
const Wide = Decimal.clone({ precision: 400 });
const decimal = (a: Fixed): Decimal => new Digits(new Wide(a.toString()).div(new Wide(2).pow(320)));
const digits = (x: number): Decimal => new Digits(exactly(x));

describe('fixed', () => {
  test('takes doubles in to 50 digits, and toDouble gives them back', () => {
    for (const x of [1, -1, 0.1, 3e-39, -7.25e12, Number.MAX_SAFE_INTEGER, 2 ** -200]) {
      expect(decimal(fixed(x)).div(exactly(x)).minus(1).abs().lt('1e-50')).toBe(true);
      expect(toDouble(fixed(x))).toBe(x);
    }
  });
});

describe('exponential', () => {
  test('agrees with the decimal library to 50 digits', () => {
    const random = new Random(1);
    const arguments_ = [0, 1, -1, ...Array.from({ length: 60 }, () => random.between(-60, 110))];
    for (const x of arguments_) {
      const exact = digits(x).exp();
      expect(
        decimal(exponential(fixed(x)))
          .minus(exact)
          .abs()
          .div(exact)
          .lt('1e-50'),
      ).toBe(true);
    }
  });
});

describe('ExactDiode', () => {
  const random = new Random(2);
  const diodes = Array.from({ length: 25 }, () => anyDiode(random));

  /** What the equation, evaluated by the decimal library, leaves over at a point. */
  function residual(diode: SingleDiode, voltage: Decimal, current: Decimal): Decimal {
    const u = current.times(digits(diode.seriesResistance)).plus(voltage);
    const growth = u.div(digits(diode.idealityVoltage)).exp().minus(1);
    return digits(diode.photocurrent)
      .minus(growth.times(digits(diode.saturationCurrent)))
      .minus(u.times(digits(diode.shuntConductance)))
      .minus(current)
      .abs();
  }

  test('gives currents that meet the equation to 40 digits of Iph', () => {
    for (const diode of diodes) {
      const curve = new SingleDiodeCurve(diode);
      const voltage = curve.openCircuitVoltage * random.between(-0.2, 1.1);
      const { current } = new ExactDiode(diode).at(voltage, curve.current(voltage));
      const left = residual(diode, digits(voltage), decimal(current));
      expect(left.div(diode.photocurrent).lt('1e-40')).toBe(true);
    }
  });

  test('gives voltages that meet the equation to 40 digits of Iph', () => {
    for (const diode of diodes) {
      const curve = new SingleDiodeCurve(diode);
      const current = curve.shortCircuitCurrent * random.between(-0.2, 0.9);
      const voltage = new ExactDiode(diode).voltageAt(current, curve.openCircuitVoltage);
      const left = residual(diode, decimal(voltage), digits(current));
      expect(left.div(diode.photocurrent).lt('1e-40')).toBe(true);
    }
  });

  test('gives a peak beside which power is lower on both sides', () => {
    for (const diode of diodes) {
      const curve = new SingleDiodeCurve(diode);
      const exact = new ExactDiode(diode);
      const peak = exact.peak(curve.peaks()[0]!);
      const voltage = toDouble(peak.voltage);
      for (const side of [voltage * (1 - 1e-9), voltage * (1 + 1e-9)]) {
        const { current } = exact.at(side, curve.current(side));
        expect(fixed(side) * current < peak.voltage * peak.current).toBe(true);
      }
    }
  });
});
