import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fromCelsius, uniformConditions } from '../../../src/quantities.js';
import { EN_50530_TECHNOLOGIES } from '../../../src/source/en-50530/constants.js';
import { En50530Generator } from '../../../src/source/en-50530/generator.js';
import { faultOf } from '../fault-of.js';

const RATING = { technology: 'c-si', peakVoltage: 400, peakCurrent: 10 } as const;
const SOURCE = new En50530Generator('source', RATING);

const irradiances = fc.double({ min: 0.01, max: 2000, noNaN: true });
const temperatures = fc.double({ min: -60, max: 120, noNaN: true }).map(fromCelsius);
const sources = fc
  .record({
    technology: fc.constantFrom(...EN_50530_TECHNOLOGIES),
    peakVoltage: fc.double({ min: 5, max: 1500, noNaN: true }),
    peakCurrent: fc.double({ min: 0.1, max: 200, noNaN: true }),
  })
  .map((rating) => new En50530Generator('any', rating));

describe('En50530Generator', () => {
  test('is a source of one group', () => {
    expect(SOURCE.groups).toBe(1);
    expect(SOURCE.name).toBe('source');
  });

  test('has a peak that no voltage beats, strictly between short and open circuit', () => {
    fc.assert(
      fc.property(
        sources,
        irradiances,
        temperatures,
        fc.double({ min: 0, max: 1, noNaN: true }),
        (source, irradiance, temperature, share) => {
          const curve = source.at(uniformConditions(irradiance, temperature));
          const [peak, ...others] = curve.peaks();
          expect(others).toEqual([]);
          expect(peak!.voltage).toBeGreaterThan(0);
          expect(peak!.voltage).toBeLessThan(curve.openCircuitVoltage);
          const voltage = share * curve.openCircuitVoltage;
          // A few roundings of the power.
          expect(voltage * curve.current(voltage)).toBeLessThanOrEqual(peak!.power * (1 + 1e-14));
        },
      ),
      { seed: 621, numRuns: 500 },
    );
  });

  test('has a slope of power of zero at its peak', () => {
    fc.assert(
      fc.property(sources, irradiances, temperatures, (source, irradiance, temperature) => {
        const curve = source.at(uniformConditions(irradiance, temperature));
        const peak = curve.peaks()[0]!;
        const slope = curve.current(peak.voltage) + peak.voltage * curve.slope(peak.voltage);
        // Voltage to 3e-14, times P'' V / I of at most 15.
        expect(Math.abs(slope / peak.current)).toBeLessThan(1e-12);
      }),
      { seed: 622, numRuns: 300 },
    );
  });

  test('has slopes that its currents show', () => {
    const curve = SOURCE.at(uniformConditions(600, fromCelsius(40)));
    for (const voltage of [0, 200, 350, 430]) {
      const step = 1e-3;
      const shown = (curve.current(voltage + step) - curve.current(voltage - step)) / (2 * step);
      // Rounding 1e-15 A / 1e-3 V, and I''' h² / 6 with I''' up to 1e-5 A/V³.
      expect(Math.abs(shown - curve.slope(voltage))).toBeLessThan(1e-11);
    }
  });

  test('takes coefficients in place of those of the technology', () => {
    const own = new En50530Generator('own', {
      ...RATING,
      shortCircuitCoefficient: 0.00045,
      openCircuitCoefficient: -0.00275,
    });
    const warm = uniformConditions(1000, fromCelsius(52));
    expect(own.at(warm).shortCircuitCurrent).toBeCloseTo((10 / 0.9) * (1 + 0.00045 * 27), 12);
    const atStc = own.at(uniformConditions(1000, 298.15)).nominalOpenCircuitVoltage;
    expect(own.at(warm).nominalOpenCircuitVoltage / atStc).toBeCloseTo(1 - 0.00275 * 27, 13);
  });

  test('neither gives nor takes current in the dark', () => {
    for (const irradiance of [0, 5e-324]) {
      const night = SOURCE.at(uniformConditions(irradiance, fromCelsius(5)));
      expect(night.shortCircuitCurrent).toBe(0);
      expect(night.openCircuitVoltage).toBe(0);
      expect(night.nominalOpenCircuitVoltage).toBe(0);
      expect(night.peaks()).toEqual([{ voltage: 0, current: 0, power: 0 }]);
      expect([night.current(300), night.slope(300)]).toEqual([0, 0]);
    }
  });

  test('refuses conditions out of range, as modules do', () => {
    expect(faultOf(() => SOURCE.at(uniformConditions(-1, 298))).problems[0]).toMatchObject({
      code: 'ARGUMENT',
      field: 'irradiance',
    });
    expect(faultOf(() => SOURCE.at(uniformConditions(1, 400))).problems[0]).toMatchObject({
      code: 'ARGUMENT',
      field: 'cellTemperature',
    });
  });

  test.each([
    ['peakVoltage', 0, 'above 0 and at most 100000, found 0.'],
    ['peakVoltage', NaN, 'found NaN.'],
    ['peakCurrent', -3, 'found -3.'],
    ['peakCurrent', Infinity, 'found Infinity.'],
    ['shortCircuitCoefficient', 0.04, 'from -0.01 to 0.01 1/K, found 0.04.'],
    ['openCircuitCoefficient', -0.4, 'from -0.01 to 0.01 1/K, found -0.4.'],
    ['openCircuitCoefficient', NaN, 'found NaN.'],
  ])('refuses a %s of %d', (field, value, message) => {
    const fault = faultOf(() => new En50530Generator('x', { ...RATING, [field]: value }));
    expect(fault.kind).toBe('input');
    expect(fault.problems[0]).toMatchObject({ code: 'ARGUMENT', field });
    expect(fault.problems[0]!.message).toContain(message);
  });
});
