/** How well a least-squares problem determines its parameters. */

export interface Determination {
  /**
   * Covariance of the parameters for errors of unit variance, row by row; NaN in the rows and
   * columns of parameters that are not determined.
   */
  readonly covariance: Float64Array;
  /** False where the parameter can move, alone or with others, without moving any residual. */
  readonly isDetermined: readonly boolean[];
  /** Share of each residual's own error that the fit swallows; 0 to 1, sum = rank. */
  readonly leverage: Float64Array;
}

/**
 * From the Jacobian of `columns` parameters, row by row.
 *
 * The covariance is X diag(spread²) Xᵀ with X = (JᵀJ)⁻¹Jᵀ, which is (JᵀJ)⁻¹ where the spread is 1;
 * by Gram-Schmidt with pivoting, each column orthogonalised twice, so that Q is orthonormal to
 * rounding (L. Giraud, J. Langou, M. Rozložník, J. van den Eshof, Numerische Mathematik 101, 2005,
 * 87-100). Columns are brought to length 1 first, so units do not matter. What is left of a column
 * beside the ones before it counts as nothing below 1e-9 of its length.
 *
 * Accuracy: relative 1e-15 times the square of the condition number of the scaled Jacobian.
 * @param spread Standard deviation of each residual's error; 1 if left out.
 */
export function determination(
  jacobian: Float64Array,
  columns: number,
  spread?: Float64Array,
): Determination {
  const rows = jacobian.length / columns;
  const { lengths, order, q, r } = orthogonalise(jacobian, rows, columns);
  const isDetermined = determinedColumns(columns, lengths, order, r);
  const rank = order.length;
  const inverse = invertTriangle(r, order, columns);
  const covariance = new Float64Array(columns * columns).fill(NaN);
  const products = spreadProducts(q, rows, rank, spread);
  for (let a = 0; a < rank; a++) {
    for (let b = 0; b < rank; b++) {
      const [i, j] = [order[a]!, order[b]!];
      if (!isDetermined[i] || !isDetermined[j]) continue;
      let sum = 0;
      for (let k = a; k < rank; k++) {
        for (let l = b; l < rank; l++) {
          sum += inverse[a * rank + k]! * products[k * rank + l]! * inverse[b * rank + l]!;
        }
      }
      covariance[i * columns + j] = sum / (lengths[i]! * lengths[j]!);
    }
  }
  const leverage = new Float64Array(rows);
  for (const direction of q) {
    direction.forEach((share, i) => {
      leverage[i]! += share * share;
    });
  }
  return { covariance, isDetermined, leverage };
}

const NOTHING_LEFT = 1e-9;
/** A share in a direction that moves nothing; rounding leaves about 1e-15 / NOTHING_LEFT. */
const TAKES_PART = 1e-5;

function orthogonalise(jacobian: Float64Array, rows: number, columns: number) {
  const rest = Array.from({ length: columns }, (_, j) =>
    Float64Array.from({ length: rows }, (_unused, i) => jacobian[i * columns + j]!),
  );
  const lengths = Float64Array.from(rest, (column) => Math.sqrt(dot(column, column)));
  rest.forEach((column, j) => {
    if (lengths[j]! > 0) scale(column, 1 / lengths[j]!);
  });
  const order: number[] = [];
  const q: Float64Array[] = [];
  const r = new Float64Array(columns * columns);
  for (;;) {
    const next = longest(rest, order);
    const column = rest[next];
    if (column === undefined) break;
    project(column, q, r, next, columns);
    const left = Math.sqrt(dot(column, column));
    if (!(left > NOTHING_LEFT)) break;
    r[q.length * columns + next] = left;
    order.push(next);
    q.push(scale(column.slice(), 1 / left));
    rest.forEach((other, j) => {
      if (!order.includes(j)) project(other, q.slice(-1), r, j, columns, q.length - 1);
    });
  }
  return { lengths, order, q, r };
}

function project(
  column: Float64Array,
  directions: readonly Float64Array[],
  r: Float64Array,
  j: number,
  columns: number,
  first = 0,
): void {
  directions.forEach((direction, k) => {
    const share = dot(direction, column);
    r[(first + k) * columns + j]! += share;
    for (let i = 0; i < column.length; i++) column[i]! -= share * direction[i]!;
  });
}

function longest(rest: readonly Float64Array[], taken: readonly number[]): number {
  let best = -1;
  let most = 0;
  rest.forEach((column, j) => {
    const square = taken.includes(j) ? 0 : dot(column, column);
    if (square > most) {
      best = j;
      most = square;
    }
  });
  return best;
}

/** A column that depends on others takes those it depends on down with it. */
function determinedColumns(
  columns: number,
  lengths: Float64Array,
  order: readonly number[],
  r: Float64Array,
): boolean[] {
  const isDetermined = Array.from({ length: columns }, (_, j) => order.includes(j));
  const rank = order.length;
  for (let j = 0; j < columns; j++) {
    if (order.includes(j) || lengths[j] === 0) continue;
    const shares = new Float64Array(rank);
    for (let k = rank - 1; k >= 0; k--) {
      let share = r[k * columns + j]!;
      for (let l = k + 1; l < rank; l++) share -= r[k * columns + order[l]!]! * shares[l]!;
      shares[k] = share / r[k * columns + order[k]!]!;
      if (Math.abs(shares[k]!) > TAKES_PART) isDetermined[order[k]!] = false;
    }
  }
  return isDetermined;
}

function invertTriangle(r: Float64Array, order: readonly number[], columns: number): Float64Array {
  const rank = order.length;
  const inverse = new Float64Array(rank * rank);
  for (let b = 0; b < rank; b++) {
    for (let a = b; a >= 0; a--) {
      let rest = a === b ? 1 : 0;
      for (let k = a + 1; k <= b; k++) {
        rest -= r[a * columns + order[k]!]! * inverse[k * rank + b]!;
      }
      inverse[a * rank + b] = rest / r[a * columns + order[a]!]!;
    }
  }
  return inverse;
}

/** Qᵀ diag(spread²) Q. */
function spreadProducts(
  q: readonly Float64Array[],
  rows: number,
  rank: number,
  spread: Float64Array | undefined,
): Float64Array {
  const products = new Float64Array(rank * rank);
  for (let k = 0; k < rank; k++) {
    for (let l = 0; l < rank; l++) {
      let sum = 0;
      for (let i = 0; i < rows; i++) {
        const s = spread?.[i] ?? 1;
        sum += q[k]![i]! * s * s * q[l]![i]!;
      }
      products[k * rank + l] = sum;
    }
  }
  return products;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

function scale(column: Float64Array, factor: number): Float64Array {
  for (let i = 0; i < column.length; i++) column[i]! *= factor;
  return column;
}
