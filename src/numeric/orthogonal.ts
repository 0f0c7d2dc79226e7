/**
 * Orthogonal reduction of a small linear system by Householder reflections (A. S. Householder,
 * Journal of the ACM 5, 1958, 339-342). Matrices are row by row in one array.
 */

/**
 * Turns A into R and b into Qᵀb, both in place, where A = Q R, Q has orthonormal columns and R is
 * zero below its diagonal. The x with the least |A x - b| then solves R x = Qᵀb in its first
 * `columns` rows, and what is left of b below them is as long as A x - b.
 *
 * Backward stable: R is exact for a matrix within a few ulp of A, column by column.
 * @param a `rows` times `columns` numbers.
 * @param b `rows` numbers.
 */
export function reduceToTriangle(
  a: Float64Array,
  rows: number,
  columns: number,
  b: Float64Array,
): void {
  const steps = Math.min(rows, columns);
  for (let k = 0; k < steps; k++) {
    let square = 0;
    for (let i = k; i < rows; i++) square += a[i * columns + k]! * a[i * columns + k]!;
    if (!(square > 0)) continue;
    const head = a[k * columns + k]!;
    // The sign that adds up: no cancellation in the reflection's first component.
    const diagonal = head > 0 ? -Math.sqrt(square) : Math.sqrt(square);
    const first = head - diagonal;
    const half = -diagonal * first;
    a[k * columns + k] = first;
    for (let j = k + 1; j < columns; j++) reflect(a, rows, columns, k, half, a, j, columns);
    reflect(a, rows, columns, k, half, b, 0, 1);
    a[k * columns + k] = diagonal;
    for (let i = k + 1; i < rows; i++) a[i * columns + k] = 0;
  }
}

/** Takes (v·t / half) v off a column t of `target`; v is column k of `a` from row k down. */
function reflect(
  a: Float64Array,
  rows: number,
  columns: number,
  k: number,
  half: number,
  target: Float64Array,
  column: number,
  stride: number,
): void {
  let product = 0;
  for (let i = k; i < rows; i++) product += a[i * columns + k]! * target[i * stride + column]!;
  const share = product / half;
  for (let i = k; i < rows; i++) target[i * stride + column]! -= share * a[i * columns + k]!;
}

/**
 * Solves R x = y for the first `columns` rows of R and y.
 * A zero on the diagonal gives infinities or NaN, not an error.
 */
export function solveTriangle(r: Float64Array, columns: number, y: Float64Array): Float64Array {
  const x = new Float64Array(columns);
  for (let k = columns - 1; k >= 0; k--) {
    let rest = y[k]!;
    for (let j = k + 1; j < columns; j++) rest -= r[k * columns + j]! * x[j]!;
    x[k] = rest / r[k * columns + k]!;
  }
  return x;
}
