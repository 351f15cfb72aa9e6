import { DatumTransform } from './freeDatum';
import type { CofactorSource } from './normals';
import type { Solution } from './solve';

/** Cofactors (a-priori covariances) of a solution's unknowns, from its factored normal equations. */
export class Cofactors {
  private readonly source: CofactorSource;
  private readonly placed: DatumTransform | null;

  constructor({ normals, without, model, unknowns }: Solution) {
    this.source = normals.cofactors(without);
    const times = (vector: Float64Array) => this.source.times(vector);
    this.placed = model.datum ? new DatumTransform(model.datum, unknowns, times) : null;
  }

  /** Covariance of unknowns i and j with the a-priori variance factor 1. */
  of(i: number, j: number): number {
    const own = this.source.of(i, j);
    return this.placed ? own + this.placed.of(i, j) : own;
  }

  /** Q·vector: covariances of all unknowns with a function of them. */
  times(vector: Float64Array): Float64Array {
    const image = this.source.times(vector);
    this.placed?.addTimes(vector, image);
    return image;
  }

  /** aᵀQa of a function of the unknowns, a given by its non-zero entries [from, to) of two lists. */
  variance(columns: ArrayLike<number>, entries: ArrayLike<number>, from = 0, to = columns.length): number {
    let sum = 0;
    for (let a = from; a < to; a++) {
      let row = 0.5 * entries[a] * this.of(columns[a], columns[a]);
      for (let b = from; b < a; b++) row += entries[b] * this.of(columns[a], columns[b]);
      sum += 2 * entries[a] * row;
    }
    return sum;
  }
}
