/**
 * Materials of cells: band gaps and what is plausible for one cell.
 *
 * Silicon: 1.121 eV and -0.0002677 1/K, De Soto, Klein and Beckman 2006 (Solar Energy 80:78-88);
 * two independent copies agree. The other band gaps and their slopes are commonly used with the
 * same method but are from memory, unconfirmed. The slope of CIGS is 0 because no value is agreed on,
 * that of triple junctions because none was at hand.
 */
export interface Technology {
  readonly title: string;
  /** Junctions stacked in one cell; their ideality factors add. */
  readonly junctions: number;
  /** Band gap at 25 °C, in electronvolts. */
  readonly bandGap: number;
  /** Relative change of the band gap, 1/K. */
  readonly bandGapSlope: number;
  /** Plausible open-circuit voltage of one cell at STC, in volts. */
  readonly cellVoltage: readonly [least: number, most: number];
  /**
   * A of one cell where nothing of a datasheet settles it: the figures that circulate in the trade
   * for each material, from memory, unconfirmed. A coefficient of the datasheet does far better.
   */
  readonly typicalIdeality: number;
}

const SILICON = {
  junctions: 1,
  bandGap: 1.121,
  bandGapSlope: -0.0002677,
  cellVoltage: [0.3, 1.3],
} as const;

export const TECHNOLOGIES = {
  'mono-si': { title: 'monocrystalline silicon', ...SILICON, typicalIdeality: 1.2 },
  'poly-si': { title: 'polycrystalline silicon', ...SILICON, typicalIdeality: 1.3 },
  cdte: {
    title: 'cadmium telluride',
    junctions: 1,
    bandGap: 1.475,
    bandGapSlope: -0.0003,
    cellVoltage: [0.3, 1.4],
    typicalIdeality: 1.5,
  },
  cis: {
    title: 'copper indium selenide',
    junctions: 1,
    bandGap: 1.01,
    bandGapSlope: -0.00011,
    cellVoltage: [0.3, 1.1],
    typicalIdeality: 1.5,
  },
  cigs: {
    title: 'copper indium gallium selenide',
    junctions: 1,
    bandGap: 1.15,
    bandGapSlope: 0,
    cellVoltage: [0.3, 1.1],
    typicalIdeality: 1.5,
  },
  gaas: {
    title: 'gallium arsenide',
    junctions: 1,
    bandGap: 1.424,
    bandGapSlope: -0.000433,
    cellVoltage: [0.5, 1.5],
    typicalIdeality: 1.3,
  },
  'a-si-triple': {
    title: 'triple-junction amorphous silicon',
    junctions: 3,
    bandGap: 1.6,
    bandGapSlope: 0,
    cellVoltage: [1, 3],
    typicalIdeality: 5,
  },
} as const satisfies Readonly<Record<string, Technology>>;

export type TechnologyName = keyof typeof TECHNOLOGIES;
