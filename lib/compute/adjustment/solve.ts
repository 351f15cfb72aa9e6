import { PinnedModel } from './freeDatum';
import { type AdjustmentModel, SingularError } from './model';
import { type NormalEquations, normalEquations } from './normals';

/** The squared step, in its own standard deviations, that no longer matters. */
export const CONVERGED = 1e-12;
export const MAX_ITERATIONS = 50;
const MAX_HALVINGS = 10;

export interface Solution {
  readonly model: AdjustmentModel;
  /** The block that took no part, −1 for none. */
  readonly without: number;
  readonly unknowns: Float64Array;
  readonly converged: boolean;
  readonly iterations: number;
  /** ∂f/∂x at the solution, aligned with the model's columns. */
  readonly coefficients: Float64Array;
  /** ℓ − f(x) at the solution, a value a row: observed minus fitted. */
  readonly residuals: Float64Array;
  /** vᵀPv of the rows that took part. */
  readonly weightedSquares: number;
  /** Rows minus unknowns, of those that took part, plus movements that a free datum settles. */
  readonly degreesOfFreedom: number;
  readonly normals: NormalEquations;
}

/**
 * Gauss-Newton solution of a weighted least-squares problem, the step halved while it makes vᵀPv grow
 * (Björck, Numerical Methods for Least Squares Problems, §9.2). It stops when the squared step in its own
 * standard deviations, stepᵀ N step, is below 10⁻¹².
 *
 * Where a step leads to a place at which something is not determined that the start does determine, the observations
 * contradict each other grossly: the answer is the start, not converged.
 *
 * @param start start values of all unknowns; not changed
 * @param without a block to leave out with its unknowns and all its rows
 * @param maxIterations fewer where only a solution near by is of interest
 * @throws SingularError where the observations do not determine an unknown
 */
export function solve(
  model: AdjustmentModel,
  start: Float64Array,
  { without = -1, maxIterations = MAX_ITERATIONS } = {},
): Solution {
  const pinned = model.datum ? new PinnedModel(model, model.datum, start) : null;
  const system = pinned?.system ?? model;
  const normals = normalEquations(system);
  const coefficients = new Float64Array(system.columns.length);
  const residuals = new Float64Array(system.weights.length);
  const step = new Float64Array(model.unknowns);
  const squaresAt = (point: Float64Array): number => {
    system.linearise(point, coefficients, residuals);
    return weightedSquares(system, residuals, normals, without);
  };

  let x = start.slice();
  let trial = new Float64Array(model.unknowns);
  let squares = squaresAt(x);
  let converged = false;
  let iterations = 0;
  while (!converged && iterations < maxIterations && Number.isFinite(squares)) {
    iterations++;
    try {
      normals.build(coefficients, residuals, without);
    } catch (error) {
      if (!(error instanceof SingularError) || iterations === 1) throw error;
      x.set(start);
      squares = squaresAt(x);
      normals.build(coefficients, residuals, without);
      break;
    }
    const decrement = normals.solve(step, without);
    const placed = pinned ? pinned.place(x, step) : 0;
    converged = decrement + placed <= CONVERGED;
    const before = squares;
    for (let halving = 0, length = 1; halving <= MAX_HALVINGS; halving++, length /= 2) {
      for (let i = 0; i < trial.length; i++) trial[i] = x[i] + length * step[i];
      squares = squaresAt(trial);
      if (converged || squares <= before + CONVERGED * Math.max(1, before)) break;
    }
    [x, trial] = [trial, x];
  }
  return {
    model,
    without,
    unknowns: x,
    converged,
    iterations,
    coefficients: coefficients.subarray(0, model.columns.length),
    residuals: residuals.subarray(0, model.weights.length),
    weightedSquares: squares,
    degreesOfFreedom: freedom(system, normals, without),
    normals,
  };
}

function weightedSquares(
  { weights }: AdjustmentModel,
  residuals: Float64Array,
  normals: NormalEquations,
  without: number,
): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i++) {
    if (without < 0 || normals.rowBlock(i) !== without) sum += weights[i] * residuals[i] * residuals[i];
  }
  return sum;
}

function freedom({ weights, unknowns, blocks }: AdjustmentModel, normals: NormalEquations, without: number) {
  let rows = 0;
  for (let i = 0; i < weights.length; i++) {
    if (weights[i] > 0 && (without < 0 || normals.rowBlock(i) !== without)) rows++;
  }
  return without < 0 ? rows - unknowns : rows - (unknowns - (blocks[without + 1] - blocks[without]));
}
