import { factor, solveLower } from '@/lib/compute/adjustment/cholesky';

/**
 * How well models of different kinds explain the same residuals: log marginal likelihoods, the part that all of them
 * share left out. A model with a fault that it may choose freely fits better always; what that freedom is worth is
 * paid for by the width that the fault might have had (the Occam factor; MacKay, Information Theory, Inference, and
 * Learning Algorithms, ch. 28).
 */

/**
 * Widths of the prior of a fault, as multiples of its usual size: faults of the field have heavy tails. A wrong name
 * puts a mark a thousand times as far off as a bump does.
 */
export const WIDTHS = [0.3, 1, 3, 10, 30, 100, 300, 1000];

/** Without any free fault: vᵀPv against its own expectation. */
export function logEvidence(weightedSquares: number): number {
  return -weightedSquares / 2;
}

/** Faults that were estimated beside the unknowns. */
export interface EstimatedFaults {
  estimate: readonly number[];
  /** Their covariance, row by row. */
  covariance: Float64Array;
  /** How large such a fault usually is: one standard deviation beforehand, in the unit of the estimate. */
  usual: readonly number[];
}

/**
 * With faults ∇ that were estimated beside the unknowns. With ∇ ~ N(0, S) beforehand and ∇̂ ~ N(∇, Q) estimated,
 *
 *   ln E = −½ vᵀPv − ½ ln |Q + S| + ½ ln |Q| − ½ ∇̂ᵀ(Q + S)⁻¹∇̂,
 *
 * averaged over prior widths.
 *
 * @param weightedSquares vᵀPv with the faults estimated
 * @throws SingularError where the faults are not determined
 */
export function logEvidenceOfFaults(weightedSquares: number, faults: EstimatedFaults): number {
  const { estimate, covariance, usual } = faults;
  const determinant = (matrix: Float64Array) => {
    factor(matrix, usual.length);
    return usual.reduce((sum, _, i) => sum + 2 * Math.log(matrix[i * usual.length + i]), 0);
  };
  const estimated = determinant(covariance.slice());
  const byWidth = WIDTHS.map((width) => {
    const both = covariance.slice();
    for (const [i, size] of usual.entries()) both[i * usual.length + i] += (width * size) ** 2;
    const occam = (estimated - determinant(both)) / 2;
    const scaled = Float64Array.from(estimate);
    solveLower(both, usual.length, scaled);
    return occam - scaled.reduce((sum, value) => sum + value * value, 0) / 2;
  });
  return logEvidence(weightedSquares) + logSum(byWidth) - Math.log(WIDTHS.length);
}

const INFLATIONS = 25;
export const LARGEST_INFLATION = 1000;

/**
 * Of no model in particular: all standard deviations are s times as large as stated, s anything between 1 and 1000
 * (uniform in its logarithm). ln ∫ s^−ν exp(−vᵀPv/2s²) d ln s / ln 1000.
 */
export function logEvidenceOfSpread(weightedSquares: number, degreesOfFreedom: number): number {
  const terms = Array.from({ length: INFLATIONS }, (_, i) => {
    const s = LARGEST_INFLATION ** ((i + 0.5) / INFLATIONS);
    return -degreesOfFreedom * Math.log(s) - weightedSquares / (2 * s * s);
  });
  return logSum(terms) - Math.log(INFLATIONS);
}

/** ln Σ exp, without overflow. */
function logSum(terms: readonly number[]): number {
  const largest = Math.max(...terms);
  return largest + Math.log(terms.reduce((sum, term) => sum + Math.exp(term - largest), 0));
}

/** Shares of models whose log evidences and prior odds are given; they sum to 1. */
export function shares(models: readonly { evidence: number; odds: number }[]): number[] {
  const logs = models.map(({ evidence, odds }) => evidence + Math.log(odds));
  const whole = logSum(logs);
  return logs.map((log) => Math.exp(log - whole));
}
