import { BlockNormals } from './blockNormals';
import type { AdjustmentModel } from './model';
import { SparseNormals } from './sparseNormals';

/** Normal equations of a model, N dx = AᵀP(ℓ − f), whichever way they are factored. */
export interface NormalEquations {
  /**
   * Adds up all rows and factors; `without` leaves one block and all its rows out.
   *
   * @throws SingularError where the rows do not determine an unknown
   */
  build(coefficients: Float64Array, misclosures: Float64Array, without?: number): void;
  /**
   * Solves for the step of all unknowns (`step`, unknowns long); a block left out keeps 0. Answers the squared
   * length of the step in its own standard deviations, stepᵀ N step = |L⁻¹t|² over all factors. Needs `build`.
   */
  solve(step: Float64Array, without?: number): number;
  /**
   * One Gauss-Newton step of the shared unknowns from the present point when the rows of `block` are not there.
   * Needs `build` at the present point.
   *
   * @param fixed a shared unknown that is to stay where it is, −1 for none
   * @throws SingularError where the rest does not determine the shared unknowns
   */
  stepWithout(block: number, fixed?: number): Float64Array;
  /**
   * Cofactors of the shared unknowns when the rows of `block` are not there (shared × shared); parameters and errors as
   * of `stepWithout`.
   */
  cofactorsWithout(block: number, fixed?: number): Float64Array;
  /** N⁻¹ of the last `build`; `without` as there. */
  cofactors(without?: number): CofactorSource;
  /** Block that a row touches, −1 where it touches shared unknowns alone. */
  rowBlock(row: number): number;
}

export interface CofactorSource {
  /** Element of N⁻¹; zero where an unknown took no part. */
  of(i: number, j: number): number;
  /** N⁻¹·vector. */
  times(vector: Float64Array): Float64Array;
}

/** Above so many shared unknowns their dense matrix costs more than a sparse elimination in a good order. */
const MANY_SHARED = 200;

export function normalEquations(model: AdjustmentModel): NormalEquations {
  return model.shared > MANY_SHARED ? new SparseNormals(model) : new BlockNormals(model);
}
