import { inverseFromFactor, solveUpper } from './cholesky';
import type { Solution } from './solve';

/**
 * Cofactors (a-priori covariances) of a solution's unknowns, from its factored normal equations: with
 * Z = D⁻¹B of a block, Q_gg = S⁻¹, Q_bg = −Z Q_gg and Q_bc = δ_bc D⁻¹ + Z_b Q_gg Z_cᵀ.
 */
export class Cofactors {
  /** Q of the shared unknowns (shared × shared). */
  readonly shared: Float64Array;
  private readonly z: Float64Array[] = [];
  private readonly inverse: Float64Array[] = [];
  private readonly border: Float64Array[] = [];

  constructor(private readonly solution: Solution) {
    const { model, normals, without } = solution;
    const g = model.shared;
    this.shared = inverseFromFactor(normals.s, g);
    for (let b = 0; b < model.blocks.length - 1; b++) {
      const size = model.blocks[b + 1] - model.blocks[b];
      if (b === without) {
        this.z.push(new Float64Array(0));
        this.border.push(new Float64Array(0));
        this.inverse.push(new Float64Array(0));
        continue;
      }
      const l = normals.blockFactor(b);
      const z = normals.blockBorder(b).slice();
      solveUpper(l, size, z, g);
      const border = new Float64Array(size * g);
      for (let i = 0; i < size; i++) {
        for (let j = 0; j < g; j++) {
          let sum = 0;
          for (let k = 0; k < g; k++) sum -= z[i * g + k] * this.shared[k * g + j];
          border[i * g + j] = sum;
        }
      }
      this.z.push(z);
      this.border.push(border);
      this.inverse.push(inverseFromFactor(l, size));
    }
  }

  /** Covariance of unknowns i and j with the a-priori variance factor 1. */
  of(i: number, j: number): number {
    const { model, normals } = this.solution;
    const g = model.shared;
    if (i < g && j < g) return this.shared[i * g + j];
    if (i < g) return this.of(j, i);
    const b = normals.blockOf(i);
    const row = i - model.blocks[b];
    if (j < g) return this.border[b][row * g + j];
    const c = normals.blockOf(j);
    const column = j - model.blocks[c];
    let sum = 0;
    for (let k = 0; k < g; k++) sum -= this.border[b][row * g + k] * this.z[c][column * g + k];
    return b === c ? sum + this.inverse[b][row * (model.blocks[b + 1] - model.blocks[b]) + column] : sum;
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
