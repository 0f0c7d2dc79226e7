/** One point of a least-squares search: residuals, derivatives, and the steps that lead on. */
import { reduceToTriangle, solveTriangle } from './orthogonal.js';
import type {
  LeastSquaresEnd,
  LeastSquaresOptions,
  LeastSquaresProblem,
  LeastSquaresResult,
} from './least-squares-problem.js';

export class DampedStep {
  readonly parameters: Float64Array;
  readonly residuals: Float64Array;
  readonly sumOfSquares: number;
  readonly jacobian: Float64Array;
  readonly held: boolean[];
  cosine = NaN;
  /** Whether the residuals are no longer than rounding leaves them. */
  isRounding = false;
  /** How far rounding alone moves the sum of squares. */
  sumRounding = NaN;
  readonly #problem: LeastSquaresProblem;
  readonly #options: LeastSquaresOptions;
  /** Largest length so far of each column of the Jacobian. */
  readonly #scale: Float64Array;
  /** R and Qᵀr of the free columns, once asked for. */
  #reduced:
    { readonly free: number[]; readonly r: Float64Array; readonly y: Float64Array } | undefined;

  constructor(
    problem: LeastSquaresProblem,
    parameters: Readonly<ArrayLike<number>>,
    options: LeastSquaresOptions,
    before?: DampedStep,
  ) {
    const count = parameters.length;
    this.#problem = problem;
    this.#options = options;
    this.parameters = Float64Array.from(parameters, (value, j) =>
      Math.min(Math.max(value, options.lower?.[j] ?? -Infinity), options.upper?.[j] ?? Infinity),
    );
    this.residuals = new Float64Array(problem.residualCount);
    this.jacobian = new Float64Array(problem.residualCount * count).fill(NaN);
    this.#scale = before === undefined ? new Float64Array(count) : before.#scale.slice();
    this.held = new Array<boolean>(count).fill(false);
    problem.residuals(this.parameters, this.residuals);
    this.sumOfSquares = square(this.residuals);
    if (before === undefined) this.differentiate();
  }

  get isFinite(): boolean {
    return this.sumOfSquares < Infinity && this.jacobian.every((entry) => Number.isFinite(entry));
  }

  /** Takes the derivatives here, and with them all that the search asks of this point. */
  differentiate(): void {
    const { parameters, residuals, jacobian } = this;
    this.#problem.jacobian(parameters, jacobian);
    const count = parameters.length;
    const length = Math.sqrt(this.sumOfSquares);
    let cosine = 0;
    let swing = 0;
    for (let j = 0; j < count; j++) {
      let slope = 0;
      let norm = 0;
      for (let i = 0; i < residuals.length; i++) {
        const entry = jacobian[i * count + j]!;
        slope += entry * residuals[i]!;
        norm += entry * entry;
      }
      norm = Math.sqrt(norm);
      swing += norm * Math.abs(parameters[j]!);
      this.#scale[j] = Math.max(this.#scale[j]!, norm);
      this.held[j] = this.#isHeld(j, slope);
      if (!this.held[j] && norm * length > 0)
        cosine = Math.max(cosine, Math.abs(slope) / (norm * length));
    }
    this.cosine = cosine;
    // A residual is a sum of terms about as large as its derivatives times the parameters.
    const rounding = ROUNDING * swing;
    this.isRounding = length <= rounding;
    this.sumRounding = 2 * length * rounding;
  }

  /**
   * The point that the step with this damping leads to, its derivatives not yet taken, and by how
   * much the linear model says the sum falls. Undefined if the step is too short to count.
   */
  step(damping: number): { readonly next: DampedStep; readonly promised: number } | undefined {
    const { free, r, y } = (this.#reduced ??= this.#reduce());
    const change = this.#solve(damping, free, r, y);
    const target = this.parameters.slice();
    free.forEach((j, k) => (target[j]! += change[k]!));
    const next = new DampedStep(this.#problem, target, this.#options, this);
    const taken = free.map((j) => next.parameters[j]! - this.parameters[j]!);
    const isShort = free.every(
      (j, k) => Math.abs(taken[k]!) <= Number.EPSILON * Math.abs(this.parameters[j]!),
    );
    if (isShort) return undefined;
    let promised = 0;
    for (let i = 0; i < Math.min(free.length, this.residuals.length); i++) {
      let along = 0;
      for (let k = i; k < free.length; k++) along += r[i * free.length + k]! * taken[k]!;
      promised -= along * (2 * y[i]! + along);
    }
    return { next, promised };
  }

  /** By how much the linear model says the sum falls without any damping. */
  get mostPromised(): number {
    const { free, y } = (this.#reduced ??= this.#reduce());
    return square(y.subarray(0, free.length));
  }

  result(end: LeastSquaresEnd, iterations: number): LeastSquaresResult {
    const { parameters, residuals, jacobian, sumOfSquares, cosine, held } = this;
    const isSolution = end === 'stationary' || end === 'rounding';
    return {
      end,
      isSolution,
      parameters,
      residuals,
      jacobian,
      sumOfSquares,
      cosine,
      held,
      iterations,
    };
  }

  #isHeld(j: number, slope: number): boolean {
    const value = this.parameters[j]!;
    const lower = this.#options.lower?.[j] ?? -Infinity;
    const upper = this.#options.upper?.[j] ?? Infinity;
    return (value <= lower && slope >= 0) || (value >= upper && slope <= 0) || lower === upper;
  }

  #reduce() {
    const { parameters, residuals, jacobian } = this;
    const free = Array.from(parameters.keys()).filter((j) => !this.held[j]);
    const r = new Float64Array(residuals.length * free.length);
    for (let i = 0; i < residuals.length; i++) {
      free.forEach((j, k) => {
        r[i * free.length + k] = jacobian[i * parameters.length + j]!;
      });
    }
    const y = residuals.slice();
    reduceToTriangle(r, residuals.length, free.length, y);
    return { free, r, y };
  }

  /** Least |R x + y|² + damping |scale x|², by reducing R with the scale below it. */
  #solve(damping: number, free: number[], r: Float64Array, y: Float64Array): Float64Array {
    const n = free.length;
    const top = Math.min(n, this.residuals.length);
    const a = new Float64Array((top + n) * n);
    a.set(r.subarray(0, top * n));
    const root = Math.sqrt(damping);
    free.forEach((j, k) => {
      const scale = this.#scale[j]!;
      a[(top + k) * n + k] = root * (scale > 0 ? scale : 1);
    });
    const b = new Float64Array(top + n);
    for (let i = 0; i < top; i++) b[i] = -y[i]!;
    reduceToTriangle(a, top + n, n, b);
    return solveTriangle(a, n, b);
  }
}

/** Two ulp for each term of a residual. */
const ROUNDING = 4.440892098500626e-16;

function square(values: Float64Array): number {
  let total = 0;
  for (const value of values) total += value * value;
  // A residual that is not a number counts as one out of reach.
  return total < Infinity ? total : Infinity;
}
