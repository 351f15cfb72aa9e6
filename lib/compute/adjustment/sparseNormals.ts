import { type AssemblyTree, assemblyTree } from './assemblyTree';
import { type AdjustmentModel, SingularError } from './model';
import type { CofactorSource, NormalEquations } from './normals';
import { SelectedInverse } from './selectedInverse';
import { SparseFactor } from './sparseFactor';

/**
 * Normal equations of a model with many shared unknowns, a network: shared and block unknowns alike are eliminated in
 * a fill-reducing order, which is analysed once and serves every iteration.
 */
export class SparseNormals implements NormalEquations {
  private readonly tree: AssemblyTree;
  private readonly factor: SparseFactor;
  private readonly blockOfRow: Int32Array;
  private readonly blockOfUnknown: Int32Array;
  private coefficients: Float64Array = new Float64Array(0);
  private misclosures: Float64Array = new Float64Array(0);

  constructor(private readonly model: AdjustmentModel) {
    const { unknowns, blocks, rowStart, columns } = model;
    this.tree = assemblyTree(unknowns, rowStart, columns);
    this.factor = new SparseFactor(this.tree);
    this.blockOfUnknown = new Int32Array(unknowns).fill(-1);
    for (let b = 0; b + 1 < blocks.length; b++) this.blockOfUnknown.fill(b, blocks[b], blocks[b + 1]);
    this.blockOfRow = new Int32Array(rowStart.length - 1).fill(-1);
    for (let i = 0; i < this.blockOfRow.length; i++) {
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        const block = this.blockOfUnknown[columns[e]];
        if (block >= 0) this.blockOfRow[i] = block;
      }
    }
  }

  build(coefficients: Float64Array, misclosures: Float64Array, without = -1): void {
    this.coefficients = coefficients;
    this.misclosures = misclosures;
    this.factorWithout(this.factor, without, -1);
  }

  solve(step: Float64Array, without = -1): number {
    return this.solveBy(this.factor, step, without);
  }

  stepWithout(block: number, fixed = -1): Float64Array {
    const step = new Float64Array(this.model.unknowns);
    this.solveBy(this.factoredWithout(block, fixed), step, block);
    return step.subarray(0, this.model.shared);
  }

  cofactorsWithout(block: number, fixed = -1): Float64Array {
    const { shared } = this.model;
    const inverse = new SelectedInverse(this.factoredWithout(block, fixed));
    const result = new Float64Array(shared * shared);
    for (let i = 0; i < shared; i++)
      for (let j = 0; j < shared; j++) result[i * shared + j] = inverse.of(i, j);
    return result;
  }

  private factoredWithout(block: number, fixed: number): SparseFactor {
    const factor = new SparseFactor(this.tree);
    this.factorWithout(factor, block, fixed);
    return factor;
  }

  cofactors(): CofactorSource {
    return new SelectedInverse(this.factor);
  }

  rowBlock(row: number): number {
    return this.blockOfRow[row];
  }

  private factorWithout(factor: SparseFactor, block: number, fixed: number): void {
    const { model, blockOfRow, blockOfUnknown } = this;
    const leaves = block >= 0;
    factor.factor(
      model,
      this.coefficients,
      (row) => leaves && blockOfRow[row] === block,
      (unknown) => unknown === fixed || (leaves && blockOfUnknown[unknown] === block),
    );
    if (factor.defects.length > 0) {
      throw new SingularError(this.tree.unknownAt[factor.defects[0]], this.movable(factor));
    }
  }

  private solveBy(factor: SparseFactor, step: Float64Array, block: number): number {
    const { rowStart, columns, weights } = this.model;
    const { placeOf } = this.tree;
    const { out } = factor;
    const t = new Float64Array(step.length);
    for (let i = 0; i < weights.length; i++) {
      if (block >= 0 && this.blockOfRow[i] === block) continue;
      const weighted = weights[i] * this.misclosures[i];
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        t[placeOf[columns[e]]] += weighted * this.coefficients[e];
      }
    }
    for (let k = 0; k < t.length; k++) if (out[k]) t[k] = 0;
    factor.solveLower(t);
    let decrement = 0;
    for (const value of t) decrement += value * value;
    factor.solveUpper(t);
    for (let i = 0; i < step.length; i++) step[i] = t[placeOf[i]];
    return decrement;
  }

  /**
   * Unknowns that can move unseen by any row: those that take part in the movement belonging to a vanished pivot,
   * Lᵀx = e, by more than a millionth of what would show at once.
   */
  private movable(factor: SparseFactor): number[] {
    const { unknowns, rowStart, columns, weights } = this.model;
    const { placeOf, unknownAt } = this.tree;
    const diagonal = new Float64Array(unknowns);
    for (let i = 0; i < weights.length; i++) {
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        diagonal[placeOf[columns[e]]] += weights[i] * this.coefficients[e] * this.coefficients[e];
      }
    }
    const moved = new Set<number>();
    for (const defect of factor.defects) {
      const x = new Float64Array(unknowns);
      x[defect] = 1;
      factor.solveUpper(x);
      let most = 0;
      for (let k = 0; k < unknowns; k++) most = Math.max(most, diagonal[k] * x[k] * x[k]);
      for (let k = 0; k < unknowns; k++) {
        if (k === defect || diagonal[k] * x[k] * x[k] > 1e-12 * most) moved.add(unknownAt[k]);
      }
    }
    return [...moved].sort((a, b) => a - b);
  }
}
