/**
 * Starting points for the search, from the data alone. For given idealities and Rs the implicit
 * residuals are linear in photocurrent, Gsh and the diodes' currents, none of which is negative:
 * one small linear problem with one solution. A grid over the rest is a map of the whole valley.
 */
import { exp } from '../../numeric/exponential.js';
import { reduceToTriangle, solveTriangle } from '../../numeric/orthogonal.js';
import type { CurveData } from './curve-data.js';
import { IDEALITY, PER_DIODE, REFERENCE_CURRENT, SERIES_RESISTANCE } from './diode-balance.js';
import type { SearchBox } from './search-box.js';

/** Parameter sets in rising order of error, no two of them neighbours on the grid. */
export function startingPoints(data: CurveData, box: SearchBox, most: number): Float64Array[] {
  const sample = thinned(data);
  const cells = gridCells(box)
    .map((cell) => ({ cell, ...bestLinear(sample, box, cell) }))
    .filter(({ error }) => error < Infinity)
    .sort((a, b) => a.error - b.error);
  const chosen: typeof cells = [];
  for (const candidate of cells) {
    if (chosen.length === most) break;
    if (chosen.every(({ cell }) => !areNeighbours(cell, candidate.cell))) chosen.push(candidate);
  }
  return chosen.map(({ parameters }) => parameters);
}

interface Cell {
  readonly place: readonly number[];
  readonly seriesResistance: number;
  readonly idealities: readonly number[];
}

const RESISTANCES = 14;
const IDEALITIES = { 1: 24, 2: 10 } as const;
/** The map needs the shape of the curve, not every point of a long sweep. */
const MOST_MAPPED = 240;

function gridCells({ scale: { diodeCount }, upper, ideality: [least, most] }: SearchBox): Cell[] {
  const count = IDEALITIES[diodeCount];
  // Finer towards small idealities, where a step moves the curve more.
  const steps = Array.from({ length: count }, (_, index) => {
    const share = index / (count - 1);
    return least + (most - least) * share * (0.4 + 0.6 * share);
  });
  const pairs = steps.flatMap((first, i) =>
    diodeCount === 1
      ? [{ place: [i], idealities: [first] }]
      : steps
          .map((second, j) => ({ place: [i, j], idealities: [first, second] }))
          .filter((_, j) => j > i),
  );
  return pairs.flatMap(({ place, idealities }) =>
    Array.from({ length: RESISTANCES }, (_, index) => {
      const share = index / RESISTANCES;
      const seriesResistance = upper[SERIES_RESISTANCE]! * share * share;
      return { place: [...place, index], idealities, seriesResistance };
    }),
  );
}

const areNeighbours = (a: Cell, b: Cell): boolean =>
  a.place.every((index, axis) => Math.abs(index - b.place[axis]!) <= 1);

function thinned({ voltages, currents }: CurveData) {
  const count = Math.min(voltages.length, MOST_MAPPED);
  const pick = (values: Float64Array): Float64Array =>
    Float64Array.from({ length: count }, (_, index) => {
      const place = count === 1 ? 0 : Math.round((index * (values.length - 1)) / (count - 1));
      return values[place]!;
    });
  return { voltages: pick(voltages), currents: pick(currents) };
}

/**
 * The linear problem under "not negative": its solution leaves some of the columns out and is
 * positive in the others, so trying every choice of columns finds it. The photocurrent stays in.
 */
function bestLinear(
  data: { readonly voltages: Float64Array; readonly currents: Float64Array },
  { scale }: SearchBox,
  cell: Cell,
): { parameters: Float64Array; error: number } {
  const columns = linearColumns(data, scale.perIdeality, scale.reference, cell);
  const parameters = new Float64Array(IDEALITY - 1 + PER_DIODE * scale.diodeCount);
  let error = Infinity;
  // Bit k - 1 of the choice says whether column k takes part.
  for (let choice = 0; choice < 1 << (columns.length - 1); choice++) {
    const taken = [...columns.keys()].filter((k) => k === 0 || ((choice >> (k - 1)) & 1) === 1);
    const solution = solveColumns(columns, taken, data.currents);
    if (!(solution.error < error && solution.shares.every((share) => share >= 0))) continue;
    error = solution.error;
    columns.forEach((_, k) => {
      // Photocurrent and Gsh, then the diodes.
      const place = k < 2 ? k : REFERENCE_CURRENT + PER_DIODE * (k - 2);
      parameters[place] = solution.shares[k]!;
    });
  }
  parameters[SERIES_RESISTANCE] = cell.seriesResistance;
  cell.idealities.forEach((ideality, k) => (parameters[IDEALITY + PER_DIODE * k] = ideality));
  return { parameters, error };
}

function linearColumns(
  { voltages, currents }: { readonly voltages: Float64Array; readonly currents: Float64Array },
  perIdeality: number,
  reference: number,
  { seriesResistance, idealities }: Cell,
): Float64Array[] {
  const junction = voltages.map((voltage, i) => voltage + currents[i]! * seriesResistance);
  const diodes = idealities.map((ideality) => {
    const a = ideality * perIdeality;
    const rest = exp(-reference / a);
    return junction.map((u) => rest - exp((u - reference) / a));
  });
  return [new Float64Array(voltages.length).fill(1), junction.map((u) => -u), ...diodes];
}

function solveColumns(
  columns: readonly Float64Array[],
  taken: readonly number[],
  currents: Float64Array,
): { shares: Float64Array; error: number } {
  const shares = new Float64Array(columns.length);
  const rows = currents.length;
  const n = taken.length;
  if (rows < n) return { shares, error: Infinity };
  const a = new Float64Array(rows * n);
  taken.forEach((column, k) => {
    for (let i = 0; i < rows; i++) a[i * n + k] = columns[column]![i]!;
  });
  const b = currents.slice();
  reduceToTriangle(a, rows, n, b);
  const solution = solveTriangle(a, n, b);
  taken.forEach((column, k) => (shares[column] = solution[k]!));
  let error = 0;
  for (let i = n; i < rows; i++) error += b[i]! * b[i]!;
  return { shares, error: solution.every(Number.isFinite) ? error : Infinity };
}
