/** What a least-squares search is given and what it gives back. */

export interface LeastSquaresProblem {
  /** At least 1. */
  readonly residualCount: number;
  /** Writes the residuals at `parameters`. What is not finite marks a point as out of reach. */
  residuals(parameters: Float64Array, into: Float64Array): void;
  /** Writes the derivatives of the residuals, a row for each residual. Asked only after them. */
  jacobian(parameters: Float64Array, into: Float64Array): void;
}

export interface LeastSquaresOptions {
  /** Box for the parameters; unbounded where left out. Equal bounds fix a parameter. */
  readonly lower?: Readonly<ArrayLike<number>>;
  readonly upper?: Readonly<ArrayLike<number>>;
  /** Derivatives to take at most. Default 200. */
  readonly iterationLimit?: number;
  /** Cosine between the residuals and any direction that counts as a right angle. Default 1e-14. */
  readonly rightAngle?: number;
}

/** How a search ended. The first two are solutions. */
export type LeastSquaresEnd =
  /** The residuals stand at right angles to every direction the box leaves, or are rounding alone. */
  | 'stationary'
  /** As far as the rounding of the residuals lets a search come. */
  | 'rounding'
  /** No step lowers the sum though the slope says so: a wrong derivative, or a jump. */
  | 'stuck'
  | 'iteration-limit'
  /** The start or a derivative is not finite. */
  | 'not-a-number';

export interface LeastSquaresResult {
  readonly end: LeastSquaresEnd;
  readonly isSolution: boolean;
  readonly parameters: Float64Array;
  readonly residuals: Float64Array;
  /** At `parameters`; all NaN if the search ended as `not-a-number`. */
  readonly jacobian: Float64Array;
  readonly sumOfSquares: number;
  /** Largest cosine between the residuals and a direction that is free. */
  readonly cosine: number;
  /** Parameters that a bound holds, against the slope. */
  readonly held: readonly boolean[];
  readonly iterations: number;
}
