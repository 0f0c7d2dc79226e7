import { hold, ramp, repeat, sequence, step } from './blocks.js';
import type { Block, Trapezoids } from './definition.js';
import {
  TRAPEZOID_TABLES,
  USUAL_SETTLING,
  type TrapezoidRow,
  type TrapezoidTable,
} from './trapezoid-tables.js';

/** Names of the two spans in every row, by which a score can leave the settling out. */
export const SETTLING = 'settling';
export const TRAPEZOIDS = 'trapezoids';

/**
 * Rows of a table, written out in the other blocks: each row steps to the low level, settles there
 * (300 s unless `settle_s` says otherwise; no such span if 0), then runs its trapezoids. The ramp
 * times are exact: (high - low) / slope. A row is a span named `low-medium 0.5 W/m²/s`.
 * @param request Its slopes are rows of the table.
 */
export function trapezoidBlocks(request: Trapezoids): Block[] {
  const table = TRAPEZOID_TABLES[request.table];
  const slopes = request.slopes_W_per_m2_per_s ?? table.rows.map((row) => row.slope);
  const settling = request.settle_s ?? USUAL_SETTLING;
  return slopes.map((slope) => {
    const row = table.rows.find((candidate) => candidate.slope === slope)!;
    return sequence(
      [
        step({ irradiance_W_per_m2: table.low }),
        ...(settling > 0 ? [sequence([hold(settling)], SETTLING)] : []),
        sequence([repeat(row.repetitions, oneTrapezoid(table, row))], TRAPEZOIDS),
      ],
      `${request.table} ${slope} W/m²/s`,
    );
  });
}

function oneTrapezoid({ low, high }: TrapezoidTable, { slope, dwell }: TrapezoidRow): Block[] {
  return [
    ramp({ irradiance_W_per_m2: high, slope_W_per_m2_per_s: slope }),
    hold(dwell),
    ramp({ irradiance_W_per_m2: low, slope_W_per_m2_per_s: slope }),
    hold(dwell),
  ];
}
