import fc from 'fast-check';
import { hold, ramp, repeat, sequence, step } from '../../src/weather/blocks.js';
import type { Block } from '../../src/weather/definition.js';

interface Ingredients {
  /** s, above 0. */
  readonly duration: fc.Arbitrary<number>;
  readonly steps: boolean;
  /** W/m²/s; none for ramps by time alone. */
  readonly slope?: fc.Arbitrary<number>;
}

/** Lists of blocks nested up to three deep, with up to four passes in each repeat. */
export function randomBlocks({ duration, steps, slope }: Ingredients): fc.Arbitrary<Block[]> {
  const irradiance_W_per_m2 = fc.integer({ min: 0, max: 2000 });
  const cell_temperature_C = fc.integer({ min: -60, max: 120 });
  const target = fc.oneof(
    fc.record({ irradiance_W_per_m2 }),
    fc.record({ cell_temperature_C }),
    fc.record({ irradiance_W_per_m2, cell_temperature_C }),
  );
  const leaf = fc.oneof(
    duration.map(hold),
    fc.tuple(target, duration).map(([to, for_s]) => ramp({ ...to, for_s })),
    ...(steps ? [target.map(step)] : []),
    ...(slope === undefined
      ? []
      : [fc.record({ irradiance_W_per_m2, slope_W_per_m2_per_s: slope }).map(ramp)]),
  );
  const { list } = fc.letrec<{ block: Block; list: Block[] }>((tie) => ({
    list: fc.array(tie('block'), { minLength: 1, maxLength: 4 }),
    block: fc.oneof(
      { maxDepth: 3, depthIdentifier: 'weather' },
      leaf,
      fc.tuple(fc.integer({ min: 1, max: 4 }), tie('list')).map(([n, inner]) => repeat(n, inner)),
      tie('list').map((inner) => sequence(inner)),
    ),
  }));
  return list;
}
