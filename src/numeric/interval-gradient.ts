import { Interval } from './interval.js';

/** A box of variables as differences from a point inside it. */
export interface Surroundings {
  readonly centre: readonly number[];
  readonly offsets: readonly Interval[];
}

/**
 * Enclosures of a function's values and of its partial derivatives over a box of its variables:
 * interval arithmetic and automatic differentiation in one. It tells soundly in which direction a
 * function runs over the whole box, and at most how steeply.
 *
 * Each value is the intersection of what interval arithmetic gives and of the mean value form
 * f(c) + grad f(box) · (x - c). The latter knows that operands move together, so that differences and
 * quotients of functions alike do not widen; its excess falls with the square of the box's width.
 */
export class IntervalGradient {
  constructor(
    readonly around: Surroundings,
    /** At the centre of the box. */
    readonly atCentre: Interval,
    /** Over the box. */
    readonly value: Interval,
    /** By each variable, over the box. */
    readonly slopes: readonly Interval[],
  ) {}

  /** Each variable, as a function of all of them. */
  static variables(around: Surroundings): IntervalGradient[] {
    const { centre, offsets } = around;
    return centre.map((at, index) => {
      const slopes = centre.map((_, i) => (i === index ? ONE : ZERO));
      const point = Interval.point(at);
      return new IntervalGradient(around, point, point.plus(offsets[index]!), slopes);
    });
  }

  plus(other: IntervalGradient): IntervalGradient {
    return this.#joined(
      other,
      (a, b) => a.plus(b),
      (a, b) => a.plus(b),
    );
  }

  minus(other: IntervalGradient): IntervalGradient {
    return this.#joined(
      other,
      (a, b) => a.minus(b),
      (a, b) => a.minus(b),
    );
  }

  times(other: IntervalGradient): IntervalGradient {
    return this.#joined(
      other,
      (a, b) => a.times(b),
      (a, b) => a.times(other.value).plus(b.times(this.value)),
    );
  }

  over(other: IntervalGradient): IntervalGradient {
    const quotient = this.value.over(other.value);
    return this.#joined(
      other,
      (a, b) => a.over(b),
      (a, b) => a.minus(quotient.times(b)).over(other.value),
    );
  }

  exp(): IntervalGradient {
    return this.through(
      (x) => x.exp(),
      (x) => x.exp(),
    );
  }

  /** Adds a constant. */
  shifted(by: number): IntervalGradient {
    const constant = Interval.point(by);
    return this.through(
      (x) => x.plus(constant),
      () => ONE,
    );
  }

  /** Multiplies by a constant. */
  scaled(by: number): IntervalGradient {
    const factor = Interval.point(by);
    return this.through(
      (x) => x.times(factor),
      () => factor,
    );
  }

  /** A function of this one: enclosures of its values over an interval, and of its derivative. */
  through(
    values: (x: Interval) => Interval,
    derivatives: (x: Interval) => Interval,
  ): IntervalGradient {
    const derivative = derivatives(this.value);
    const slopes = this.slopes.map((slope) => slope.times(derivative));
    return narrowed(this.around, values(this.atCentre), values(this.value), slopes);
  }

  #joined(
    other: IntervalGradient,
    values: (a: Interval, b: Interval) => Interval,
    slopes: (a: Interval, b: Interval) => Interval,
  ): IntervalGradient {
    return narrowed(
      this.around,
      values(this.atCentre, other.atCentre),
      values(this.value, other.value),
      this.slopes.map((slope, index) => slopes(slope, other.slopes[index]!)),
    );
  }
}

function narrowed(
  around: Surroundings,
  atCentre: Interval,
  natural: Interval,
  slopes: readonly Interval[],
): IntervalGradient {
  let meanValue = atCentre;
  for (let i = 0; i < slopes.length; i += 1) {
    meanValue = meanValue.plus(slopes[i]!.times(around.offsets[i]!));
  }
  return new IntervalGradient(around, atCentre, natural.intersection(meanValue), slopes);
}

const ZERO = Interval.point(0);
const ONE = Interval.point(1);
