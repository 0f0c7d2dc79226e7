/**
 * The two residuals in use for measured curves. Exact: the model's current at the measured voltage,
 * less the measured current. Implicit: the measured voltage and current put into the right-hand
 * side of the equation, less the measured current; the literature's usual error. The implicit one
 * exceeds the exact one by about 1 + Rs g, g the conductance of the junction, so the two have
 * different optima: the implicit one gives the steep end of the curve more weight.
 */
import type { LeastSquaresProblem } from '../../numeric/least-squares-problem.js';
import { DiodeBalance, SERIES_RESISTANCE, type BalanceScale } from './diode-balance.js';
import type { CurveData } from './curve-data.js';

export type ResidualConvention = 'exact' | 'implicit';

/**
 * @param weights Factors on the residuals, one a point; all 1 if left out.
 */
export function residualProblem(
  convention: ResidualConvention,
  scale: BalanceScale,
  data: CurveData,
  weights?: Float64Array,
): LeastSquaresProblem {
  const { voltages, currents } = data;
  const balance = new DiodeBalance(scale);
  const count = balance.parameterCount;
  const isExact = convention === 'exact';
  return {
    residualCount: voltages.length,
    residuals: (parameters, into) => {
      for (let i = 0; i < voltages.length; i++) {
        const measured = currents[i]!;
        if (isExact) {
          into[i] = balance.solve(parameters, voltages[i]!, measured) - measured;
        } else {
          balance.at(parameters, voltages[i]!, measured);
          into[i] = balance.excess;
        }
        if (weights !== undefined) into[i]! *= weights[i]!;
      }
    },
    jacobian: (parameters, into) => {
      const resistance = parameters[SERIES_RESISTANCE]!;
      for (let i = 0; i < voltages.length; i++) {
        const voltage = voltages[i]!;
        let current = currents[i]!;
        let factor = weights?.[i] ?? 1;
        if (isExact) {
          current = balance.solve(parameters, voltage, current);
          factor /= 1 + resistance * balance.conductance;
        }
        balance.partials(parameters, voltage, current, factor, into, i * count);
      }
    },
  };
}

/** By how much the implicit residual of each point exceeds the exact one: 1 + Rs g. */
export function implicitStretch(
  scale: BalanceScale,
  data: CurveData,
  parameters: Float64Array,
): Float64Array {
  const balance = new DiodeBalance(scale);
  return Float64Array.from(data.voltages, (voltage, i) => {
    balance.at(parameters, voltage, data.currents[i]!);
    return 1 + parameters[SERIES_RESISTANCE]! * balance.conductance;
  });
}

/** Residuals of a convention at given parameters, unweighted. */
export function residualsAt(
  convention: ResidualConvention,
  scale: BalanceScale,
  data: CurveData,
  parameters: Float64Array,
): Float64Array {
  const into = new Float64Array(data.voltages.length);
  residualProblem(convention, scale, data).residuals(parameters, into);
  return into;
}
