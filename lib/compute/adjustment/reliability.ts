import { DELTA_0 } from '@/lib/compute/statistics/distributions';
import type { Cofactors } from './cofactors';
import type { Solution } from './solve';

/**
 * Below this redundancy number an observation is not controlled by any other: its standardised residual and the
 * smallest error that it would show are not defined (common practice; Baarda's own limit is a matter of taste).
 */
export const CONTROLLED = 1e-6;

export interface Reliability {
  /** rᵢ = 1 − pᵢ aᵢᵀQaᵢ, the share of an error in ℓᵢ that shows in its own residual. */
  readonly redundancy: Float64Array;
  /** wᵢ = residualᵢ / (σᵢ√rᵢ), standard normal without blunders; NaN where not controlled. */
  readonly standardised: Float64Array;
  /** δ₀ σᵢ/√rᵢ, the smallest error found with power 0.80 at α₀ = 0.001; Infinity where not controlled. */
  readonly minimalDetectable: Float64Array;
}

/**
 * Redundancy numbers, standardised residuals and minimal detectable biases of every row, in the row's own unit.
 * Baarda, A Testing Procedure for Use in Geodetic Networks (1968), with the a-priori variance factor.
 */
export function reliability(solution: Solution, cofactors: Cofactors): Reliability {
  const { model, residuals, coefficients } = solution;
  const rows = model.weights.length;
  const redundancy = new Float64Array(rows);
  const standardised = new Float64Array(rows);
  const minimalDetectable = new Float64Array(rows);
  for (let i = 0; i < rows; i++) {
    const p = model.weights[i];
    const variance = cofactors.variance(
      model.columns,
      coefficients,
      model.rowStart[i],
      model.rowStart[i + 1],
    );
    const r = Math.min(1, Math.max(0, 1 - p * variance));
    const controlled = r > CONTROLLED;
    const sigma = 1 / Math.sqrt(p);
    redundancy[i] = r;
    standardised[i] = controlled ? residuals[i] / (sigma * Math.sqrt(r)) : Number.NaN;
    minimalDetectable[i] = controlled ? (DELTA_0 * sigma) / Math.sqrt(r) : Number.POSITIVE_INFINITY;
  }
  return { redundancy, standardised, minimalDetectable };
}

/**
 * What an undetected error of the size of row i's minimal detectable bias would do to the unknowns:
 * Q aᵢ pᵢ ∇ᵢ (external reliability, Baarda 1968).
 *
 * @param unknowns which unknowns to answer for
 */
export function externalReliability(
  solution: Solution,
  cofactors: Cofactors,
  row: number,
  bias: number,
  unknowns: readonly number[],
): number[] {
  const { model, coefficients } = solution;
  return unknowns.map((unknown) => {
    let sum = 0;
    for (let e = model.rowStart[row]; e < model.rowStart[row + 1]; e++) {
      sum += cofactors.of(unknown, model.columns[e]) * coefficients[e];
    }
    return sum * model.weights[row] * bias;
  });
}
