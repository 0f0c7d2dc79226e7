import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { Random } from '../../src/numeric/random.js';
import { fromCelsius, STC_IRRADIANCE, STC_TEMPERATURE } from '../../src/quantities.js';
import { TECHNOLOGIES, type TechnologyName } from '../../src/source/technology.js';
import { saturationRatio, translate } from '../../src/source/translation.js';
import { anyModule } from './any-diode.js';

const NAMES = Object.keys(TECHNOLOGIES) as TechnologyName[];
const modules = fc.integer({ min: 0, max: 1e9 }).map((seed) => anyModule(new Random(seed)));
const irradiances = fc.double({ min: 0, max: 2000, noNaN: true });
const temperatures = fc.double({ min: -60, max: 120, noNaN: true }).map(fromCelsius);

describe('translate', () => {
  test('changes nothing at STC, to the last bit', () => {
    fc.assert(
      fc.property(modules, ({ diode, technology }) => {
        const behaviour = { technology, shortCircuitCoefficient: 0.003 };
        expect(translate(diode, behaviour, STC_IRRADIANCE, STC_TEMPERATURE)).toEqual(diode);
      }),
      { seed: 51 },
    );
  });

  test('takes photocurrent and shunt conductance in proportion to irradiance', () => {
    fc.assert(
      fc.property(modules, irradiances, temperatures, ({ diode, technology }, sun, temperature) => {
        const behaviour = { technology, shortCircuitCoefficient: 0.0004 * diode.photocurrent };
        const full = translate(diode, behaviour, 1000, temperature);
        const part = translate(diode, behaviour, sun, temperature);
        expect(part.photocurrent).toBe((sun / 1000) * full.photocurrent);
        expect(part.shuntConductance).toBe((sun / 1000) * full.shuntConductance);
        expect(part.saturationCurrent).toBe(full.saturationCurrent);
        expect(part.seriesResistance).toBe(diode.seriesResistance);
      }),
      { seed: 52 },
    );
  });

  test('leaves no light at night', () => {
    const { diode } = anyModule(new Random(3));
    const behaviour = { technology: 'mono-si', shortCircuitCoefficient: 0.004 } as const;
    const night = translate(diode, behaviour, 0, fromCelsius(-60));
    expect(night.photocurrent).toBe(0);
    expect(night.shuntConductance).toBe(0);
  });

  test('holds a photocurrent at zero that an absurd coefficient would turn round', () => {
    const { diode } = anyModule(new Random(4));
    const behaviour = {
      technology: 'mono-si',
      shortCircuitCoefficient: diode.photocurrent,
    } as const;
    expect(translate(diode, behaviour, 1000, fromCelsius(0)).photocurrent).toBe(0);
  });
});

describe('saturationRatio', () => {
  test('is 1 at 25 °C', () => {
    for (const name of NAMES) expect(saturationRatio(name, STC_TEMPERATURE)).toBe(1);
  });

  test('rises with temperature for every technology', () => {
    for (const name of NAMES) {
      let last = 0;
      for (let celsius = -60; celsius <= 120; celsius += 5) {
        const ratio = saturationRatio(name, fromCelsius(celsius));
        expect(ratio).toBeGreaterThan(last);
        last = ratio;
      }
    }
  });
});
