import { BlockCofactors } from './blockCofactors';
import { factor, inverseFromFactor, solveLower, solveUpper } from './cholesky';
import type { AdjustmentModel } from './model';
import type { CofactorSource, NormalEquations } from './normals';

/**
 * Normal equations of a model with its blocks eliminated (Schur complement; Brown 1958, "A solution to the
 * general problem of multiple station analytical stereotriangulation", the bordered block-diagonal case):
 *
 *   ⎡ G  Bᵀ⎤ ⎡dx⎤   ⎡t⎤        for each block  D = LLᵀ,  W = L⁻¹B,  y = L⁻¹u
 *   ⎣ B  D ⎦ ⎣dl⎦ = ⎣u⎦        S = G − ΣWᵀW,  S dx = t − ΣWᵀy,  Lᵀdl = y − W dx
 */
export class BlockNormals implements NormalEquations {
  private readonly g: number;
  private readonly blockCount: number;
  private readonly blockOfRow: Int32Array;
  private readonly blockOfUnknown: Int32Array;
  /** Offsets of each block's D, B and G parts in the arrays below. */
  private readonly dStart: Int32Array;
  private readonly bStart: Int32Array;

  private readonly d: Float64Array;
  /** B while rows are added, W = L⁻¹B after the factorisation. */
  private readonly w: Float64Array;
  private readonly u: Float64Array;
  private readonly gBlocks: Float64Array;
  private readonly tBlocks: Float64Array;
  private readonly gShared: Float64Array;
  private readonly tShared: Float64Array;
  /** Cholesky factor of S (after `build`). */
  readonly s: Float64Array;
  private readonly t: Float64Array;
  /** Diagonal of G before the blocks were eliminated, against which the pivots of S are measured. */
  private readonly gDiagonal: Float64Array;

  constructor(readonly model: AdjustmentModel) {
    const { shared: g, blocks, rowStart, columns, unknowns } = model;
    this.g = g;
    const count = blocks.length - 1;
    this.blockCount = count;
    this.blockOfUnknown = new Int32Array(unknowns).fill(-1);
    this.dStart = new Int32Array(count + 1);
    this.bStart = new Int32Array(count + 1);
    for (let b = 0; b < count; b++) {
      const size = blocks[b + 1] - blocks[b];
      this.blockOfUnknown.fill(b, blocks[b], blocks[b + 1]);
      this.dStart[b + 1] = this.dStart[b] + size * size;
      this.bStart[b + 1] = this.bStart[b] + size * g;
    }
    const rows = rowStart.length - 1;
    this.blockOfRow = new Int32Array(rows).fill(-1);
    for (let i = 0; i < rows; i++) {
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        const block = this.blockOfUnknown[columns[e]];
        if (block >= 0) this.blockOfRow[i] = block;
      }
    }
    this.d = new Float64Array(this.dStart[count]);
    this.w = new Float64Array(this.bStart[count]);
    this.u = new Float64Array(unknowns - g);
    this.gBlocks = new Float64Array(count * g * g);
    this.tBlocks = new Float64Array(count * g);
    this.gShared = new Float64Array(g * g);
    this.tShared = new Float64Array(g);
    this.s = new Float64Array(g * g);
    this.t = new Float64Array(g);
    this.gDiagonal = new Float64Array(g);
  }

  build(coefficients: Float64Array, misclosures: Float64Array, without = -1): void {
    this.accumulate(coefficients, misclosures);
    for (let b = 0; b < this.blockCount; b++) if (b !== without) this.factorBlock(b);
    this.reduce(this.s, this.t, without);
    factor(this.s, this.g, 0, this.gDiagonal);
  }

  solve(step: Float64Array, without = -1): number {
    const { g, s, model } = this;
    const dx = step.subarray(0, g);
    dx.set(this.t);
    solveLower(s, g, dx);
    let decrement = squaredNorm(dx);
    solveUpper(s, g, dx);
    for (let b = 0; b < this.blockCount; b++) {
      const start = model.blocks[b];
      const size = model.blocks[b + 1] - start;
      const dl = step.subarray(start, start + size);
      if (b === without) {
        dl.fill(0);
        continue;
      }
      for (let i = 0; i < size; i++) {
        let sum = this.u[start - g + i];
        decrement += sum * sum;
        const row = this.bStart[b] + i * g;
        for (let j = 0; j < g; j++) sum -= this.w[row + j] * dx[j];
        dl[i] = sum;
      }
      solveUpper(this.blockFactor(b), size, dl);
    }
    return decrement;
  }

  /** (S − Sᵦ) dx = t − tᵦ. */
  stepWithout(block: number, fixed = -1): Float64Array {
    const dx = new Float64Array(this.g);
    const s = this.factoredWithout(block, fixed, dx);
    solveLower(s, this.g, dx);
    solveUpper(s, this.g, dx);
    return dx;
  }

  /** (S − Sᵦ)⁻¹. */
  cofactorsWithout(block: number, fixed = -1): Float64Array {
    return inverseFromFactor(this.factoredWithout(block, fixed, new Float64Array(this.g)), this.g);
  }

  /** Cholesky factor of S − Sᵦ; `t` receives t − tᵦ. */
  private factoredWithout(block: number, fixed: number, t: Float64Array): Float64Array {
    const { g } = this;
    const s = new Float64Array(g * g);
    this.reduce(s, t, block);
    if (fixed >= 0) {
      for (let i = 0; i < g; i++) s[i * g + fixed] = s[fixed * g + i] = 0;
      s[fixed * g + fixed] = this.gDiagonal[fixed] = 1;
      t[fixed] = 0;
    }
    factor(s, g, 0, this.gDiagonal);
    return s;
  }

  /** L of a block's D = LLᵀ (after `build`). */
  blockFactor(b: number): Float64Array {
    return this.d.subarray(this.dStart[b], this.dStart[b + 1]);
  }

  /** W = L⁻¹B of a block (size × shared, after `build`). */
  blockBorder(b: number): Float64Array {
    return this.w.subarray(this.bStart[b], this.bStart[b + 1]);
  }

  /** Block that an unknown belongs to, −1 for a shared one. */
  blockOf(unknown: number): number {
    return this.blockOfUnknown[unknown];
  }

  cofactors(without = -1): CofactorSource {
    return new BlockCofactors(this, without);
  }

  rowBlock(row: number): number {
    return this.blockOfRow[row];
  }

  private accumulate(coefficients: Float64Array, misclosures: Float64Array): void {
    const { g, model, d, w, u, gBlocks, tBlocks, gShared, tShared } = this;
    const { rowStart, columns, weights, blocks } = model;
    for (const part of [d, w, u, gBlocks, tBlocks, gShared, tShared]) part.fill(0);
    for (let i = 0; i < weights.length; i++) {
      const b = this.blockOfRow[i];
      const p = weights[i];
      const size = b < 0 ? 0 : blocks[b + 1] - blocks[b];
      const first = b < 0 ? 0 : blocks[b];
      const [gm, tm, gBase, tBase] = b < 0 ? [gShared, tShared, 0, 0] : [gBlocks, tBlocks, b * g * g, b * g];
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        const row = columns[e];
        const pa = p * coefficients[e];
        if (row < g) tm[tBase + row] += pa * misclosures[i];
        else u[row - g] += pa * misclosures[i];
        for (let f = rowStart[i]; f < rowStart[i + 1]; f++) {
          const column = columns[f];
          const value = pa * coefficients[f];
          if (row < g) {
            if (column < g) gm[gBase + row * g + column] += value;
          } else if (column < g) w[this.bStart[b] + (row - first) * g + column] += value;
          else d[this.dStart[b] + (row - first) * size + (column - first)] += value;
        }
      }
    }
  }

  private factorBlock(b: number): void {
    const { g, model } = this;
    const start = model.blocks[b];
    const size = model.blocks[b + 1] - start;
    const l = this.blockFactor(b);
    factor(l, size, start);
    solveLower(l, size, this.blockBorder(b), g);
    solveLower(l, size, this.u.subarray(start - g, start - g + size));
  }

  /** S, t and the diagonal of G from the shared rows and all factored blocks but `without`. */
  private reduce(s: Float64Array, t: Float64Array, without: number): void {
    const { g, gBlocks, tBlocks, gDiagonal, w, u } = this;
    s.set(this.gShared);
    t.set(this.tShared);
    for (let j = 0; j < g; j++) gDiagonal[j] = s[j * g + j];
    for (let b = 0; b < this.blockCount; b++) {
      if (b === without) continue;
      const start = this.model.blocks[b] - g;
      const size = this.model.blocks[b + 1] - this.model.blocks[b];
      const base = this.bStart[b];
      for (let j = 0; j < g; j++) {
        gDiagonal[j] += gBlocks[b * g * g + j * g + j];
        t[j] += tBlocks[b * g + j];
        for (let r = 0; r < size; r++) t[j] -= w[base + r * g + j] * u[start + r];
        for (let k = 0; k <= j; k++) {
          let value = gBlocks[b * g * g + j * g + k];
          for (let r = 0; r < size; r++) value -= w[base + r * g + j] * w[base + r * g + k];
          s[j * g + k] += value;
          if (k !== j) s[k * g + j] += value;
        }
      }
    }
  }
}

function squaredNorm(vector: Float64Array): number {
  let sum = 0;
  for (const value of vector) sum += value * value;
  return sum;
}
