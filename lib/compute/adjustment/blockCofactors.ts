import type { BlockNormals } from './blockNormals';
import { inverseFromFactor, solveUpper } from './cholesky';
import type { CofactorSource } from './normals';

/**
 * Cofactors from the factored normal equations of few shared unknowns and many blocks: with Z = D⁻¹B of a block,
 * Q_gg = S⁻¹, Q_bg = −Z Q_gg and Q_bc = δ_bc D⁻¹ + Z_b Q_gg Z_cᵀ.
 */
export class BlockCofactors implements CofactorSource {
  /** Q of the shared unknowns (shared × shared). */
  private readonly shared: Float64Array;
  private readonly z: Float64Array[] = [];
  private readonly inverse: Float64Array[] = [];
  private readonly border: Float64Array[] = [];

  constructor(
    private readonly normals: BlockNormals,
    without: number,
  ) {
    const { model } = normals;
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
        // Along the rows: down the columns nearly every number would come from another line of the cache.
        for (let k = 0; k < g; k++) {
          const factor = z[i * g + k];
          for (let j = 0; j < g; j++) border[i * g + j] -= factor * this.shared[k * g + j];
        }
      }
      this.z.push(z);
      this.border.push(border);
      this.inverse.push(inverseFromFactor(l, size));
    }
  }

  of(i: number, j: number): number {
    const { normals } = this;
    const { model } = normals;
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

  times(vector: Float64Array): Float64Array {
    const image = new Float64Array(vector.length);
    for (let j = 0; j < vector.length; j++) {
      if (vector[j] === 0) continue;
      for (let i = 0; i < vector.length; i++) image[i] += this.of(i, j) * vector[j];
    }
    return image;
  }
}
