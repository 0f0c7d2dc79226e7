/**
 * The least-squares optimum of a single-diode fit to 40 digits, by the Gauss-Newton method on the
 * equation itself with the five physical parameters. What is to be checked serves as the start.
 */
import { Decimal } from 'decimal.js';
import type { ResidualConvention } from '../../../src/source/measured/residuals.js';
import type { MeasuredPoint } from '../../../src/source/measured/curve-data.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';

const D = Decimal.clone({ precision: 50 });
type D = Decimal;

/** A double as it is, not as its shortest decimal. */
const SCALE = 2n ** 200n;
const exactly = (x: number): D => {
  // Scaling by a power of two is exact.
  return new D(BigInt(x * 2 ** 200).toString()).div(SCALE.toString());
};

export interface PreciseOptimum {
  readonly photocurrent: D;
  readonly shuntConductance: D;
  readonly seriesResistance: D;
  readonly saturationCurrent: D;
  readonly idealityVoltage: D;
  readonly rms: D;
}

export function preciseOptimum(
  convention: ResidualConvention,
  points: readonly MeasuredPoint[],
  start: SingleDiode,
): PreciseOptimum {
  const data = points.map(({ voltage, current }) => [exactly(voltage), exactly(current)] as const);
  const { photocurrent, shuntConductance, seriesResistance, saturationCurrent } = start;
  let p = [photocurrent, shuntConductance, seriesResistance, saturationCurrent].map(exactly);
  p.push(exactly(start.idealityVoltage));
  for (let pass = 0; pass < 40; pass++) {
    const rows = data.map(([v, i]) => row(convention, p, v, i));
    const step = solve(normal(rows));
    p = p.map((value, j) => value.minus(step[j]!));
    if (p.every((value, j) => step[j]!.abs().lte(value.abs().times(1e-25)))) {
      const sum = rows.reduce((total, { residual }) => total.plus(residual.pow(2)), new D(0));
      const [photo, shunt, series, saturation, ideality] = p as [D, D, D, D, D];
      return {
        ...{ photocurrent: photo, shuntConductance: shunt, seriesResistance: series },
        ...{ saturationCurrent: saturation, idealityVoltage: ideality },
        rms: sum.div(data.length).sqrt(),
      };
    }
  }
  throw new Error('The reference does not settle.');
}

interface Row {
  readonly residual: D;
  readonly derivatives: readonly D[];
}

function row(convention: ResidualConvention, p: readonly D[], v: D, measured: D): Row {
  if (convention === 'implicit') {
    const { residual, derivatives } = equation(p, v, measured);
    return { residual, derivatives };
  }
  let i = measured;
  for (;;) {
    const { residual, gain } = equation(p, v, i);
    const step = residual.div(gain);
    i = i.plus(step);
    if (step.abs().lt(1e-40)) break;
  }
  const { derivatives, gain } = equation(p, v, i);
  return { residual: i.minus(measured), derivatives: derivatives.map((d) => d.div(gain)) };
}

function equation(p: readonly D[], v: D, i: D): Row & { readonly gain: D } {
  const [photo, shunt, series, saturation, a] = p as [D, D, D, D, D];
  const u = v.plus(i.times(series));
  const growth = u.div(a).exp();
  const conductance = saturation.div(a).times(growth).plus(shunt);
  return {
    residual: photo
      .minus(saturation.times(growth.minus(1)))
      .minus(u.times(shunt))
      .minus(i),
    derivatives: [
      new D(1),
      u.neg(),
      i.times(conductance).neg(),
      growth.minus(1).neg(),
      saturation.times(growth).times(u).div(a.pow(2)),
    ],
    gain: conductance.times(series).plus(1),
  };
}

/** JᵀJ with Jᵀr beside it. */
function normal(rows: readonly Row[]): D[][] {
  const n = rows[0]!.derivatives.length;
  return Array.from({ length: n }, (_, j) =>
    Array.from({ length: n + 1 }, (_unused, k) =>
      rows.reduce((sum, { residual, derivatives }) => {
        const other = k < n ? derivatives[k]! : residual;
        return sum.plus(derivatives[j]!.times(other));
      }, new D(0)),
    ),
  );
}

/** Gaussian elimination; the matrix is positive definite, so the order of rows is fine. */
function solve(a: D[][]): D[] {
  const n = a.length;
  for (let k = 0; k < n; k++) {
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const share = a[i]![k]!.div(a[k]![k]!);
      a[i] = a[i]!.map((value, j) => value.minus(share.times(a[k]![j]!)));
    }
  }
  return a.map((line, k) => line[n]!.div(line[k]!));
}
