import { PinnedModel } from './freeDatum';
import { type AdjustmentModel, SingularError } from './model';
import { SparseNormals } from './sparseNormals';

/** All unknowns of a model that can move without any row seeing it at x, beside the movements of its free datum. */
export function movableUnknowns(model: AdjustmentModel, x: Float64Array): readonly number[] {
  try {
    const system = model.datum ? new PinnedModel(model, model.datum, x).system : model;
    const coefficients = new Float64Array(system.columns.length);
    const misclosures = new Float64Array(system.weights.length);
    system.linearise(x, coefficients, misclosures);
    new SparseNormals(system).build(coefficients, misclosures);
    return [];
  } catch (error) {
    if (error instanceof SingularError) return error.movable;
    throw error;
  }
}
