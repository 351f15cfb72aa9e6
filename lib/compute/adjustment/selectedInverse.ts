import { subtractProduct } from './denseKernels';
import type { CofactorSource } from './normals';
import type { SparseFactor } from './sparseFactor';

/**
 * The elements of N⁻¹ = (LLᵀ)⁻¹ at the places of L's own (Takahashi, Fagan and Chin 1973; Erisman and Tinney 1975):
 * every pair of unknowns that share a row is among them. From the roots of the assembly tree to its leaves, a front
 * with own unknowns J and boundary R:
 *
 *   W = L_RJ L_JJ⁻¹,  Z_RJ = −Z_RR W,  Z_JJ = (L_JJ L_JJᵀ)⁻¹ − Wᵀ Z_RJ
 *
 * where Z_RR lies within the parent's front. Other elements are found by solving for a column.
 */
export class SelectedInverse implements CofactorSource {
  /** Z_JJ and below it Z_RJ of each front, laid out as L's panels. */
  private readonly panels: Float64Array;
  private column: { place: number; values: Float64Array } = { place: -1, values: new Float64Array(0) };

  constructor(private readonly factor: SparseFactor) {
    this.panels = new Float64Array(factor.panels.length);
    const { tree } = factor;
    const { fronts, first, boundaryStart, parent, inParent } = tree;
    const end = new Float64Array(fronts);
    let most = 0;
    let widest = 0;
    for (let f = fronts - 1; f >= 0; f--) {
      const size = first[f + 1] - first[f];
      const rows = size + boundaryStart[f + 1] - boundaryStart[f];
      end[f] = (parent[f] < 0 ? 0 : end[parent[f]]) + rows * rows;
      most = Math.max(most, end[f]);
      widest = Math.max(widest, size * rows);
    }
    /** Full fronts of the inverse, from a root down to the present one. */
    const stack = new Float64Array(most);
    const work = new Float64Array(widest);

    for (let f = fronts - 1; f >= 0; f--) {
      const size = first[f + 1] - first[f];
      const base = boundaryStart[f];
      const over = boundaryStart[f + 1] - base;
      const rows = size + over;
      const start = end[f] - rows * rows;
      stack.fill(0, start, start + size * rows);
      if (over > 0) {
        const up = parent[f];
        const wide = first[up + 1] - first[up] + boundaryStart[up + 1] - boundaryStart[up];
        const from = end[up] - wide * wide;
        for (let a = 0; a < over; a++) {
          const source = from + inParent[base + a] * wide;
          const target = start + (size + a) * rows + size;
          for (let b = 0; b < over; b++) stack[target + b] = stack[source + inParent[base + b]];
        }
      }
      this.fillFront(f, size, over, { values: stack, start, stride: rows }, work);
    }
  }

  /** Element of the inverse by unknowns. */
  of(i: number, j: number): number {
    const { out, tree } = this.factor;
    const low = Math.min(tree.placeOf[i], tree.placeOf[j]);
    const high = Math.max(tree.placeOf[i], tree.placeOf[j]);
    if (out[low] || out[high]) return 0;
    const f = tree.frontOf[low];
    const begin = tree.first[f];
    const size = tree.first[f + 1] - begin;
    const row = high < begin + size ? high - begin : this.boundaryRow(f, high, size);
    return row < 0
      ? this.solved(low, high)
      : this.panels[this.factor.panelStart[f] + row * size + low - begin];
  }

  times(vector: Float64Array): Float64Array {
    const { factor } = this;
    const { placeOf } = factor.tree;
    const values = new Float64Array(vector.length);
    for (let i = 0; i < vector.length; i++) if (!factor.out[placeOf[i]]) values[placeOf[i]] = vector[i];
    factor.solveLower(values);
    factor.solveUpper(values);
    return vector.map((_, i) => values[placeOf[i]]);
  }

  private boundaryRow(f: number, place: number, size: number): number {
    const { boundary, boundaryStart } = this.factor.tree;
    let low = boundaryStart[f];
    let high = boundaryStart[f + 1] - 1;
    while (low <= high) {
      const middle = (low + high) >> 1;
      if (boundary[middle] === place) return size + middle - boundaryStart[f];
      if (boundary[middle] < place) low = middle + 1;
      else high = middle - 1;
    }
    return -1;
  }

  /** An element beyond the structure of L, from a column of the inverse that is kept for the next. */
  private solved(low: number, high: number): number {
    if (this.column.place === high) return this.column.values[low];
    if (this.column.place !== low) {
      const values = new Float64Array(this.factor.out.length);
      values[low] = 1;
      this.factor.solveLower(values);
      this.factor.solveUpper(values);
      this.column = { place: low, values };
    }
    return this.column.values[high];
  }

  /** @param front the front's part of the inverse, where that of its boundary is there already */
  private fillFront(
    f: number,
    size: number,
    over: number,
    front: { values: Float64Array; start: number; stride: number },
    work: Float64Array,
  ): void {
    const l = this.factor.panels;
    const panel = this.factor.panelStart[f];
    const { values: z, start, stride } = front;
    invertLower(l, panel, size, work);
    for (let i = 0; i < size; i++) {
      for (let j = 0; j <= i; j++) {
        let sum = 0;
        for (let k = i; k < size; k++) sum += work[k * size + i] * work[k * size + j];
        z[start + i * stride + j] = z[start + j * stride + i] = sum;
      }
    }
    if (over > 0) {
      // Wᵀ = L_JJ⁻ᵀ L_RJᵀ, size × over.
      for (let r = 0; r < over; r++) {
        const line = panel + (size + r) * size;
        for (let k = size - 1; k >= 0; k--) {
          let sum = l[line + k];
          for (let i = k + 1; i < size; i++) sum -= work[i * over + r] * l[panel + i * size + k];
          work[k * over + r] = sum / l[panel + k * size + k];
        }
      }
      const w = { values: work, start: 0, stride: over };
      const corner = { ...front, start: start + size * stride + size };
      const right = { ...front, start: start + size };
      subtractProduct(right, w, corner, size, over, over);
      subtractProduct(front, w, right, size, size, over);
      for (let k = 0; k < size; k++) {
        for (let r = size; r < stride; r++) z[start + r * stride + k] = z[start + k * stride + r];
      }
    }
    for (let i = 0; i < stride; i++) {
      for (let k = 0; k < size; k++) this.panels[panel + i * size + k] = z[start + i * stride + k];
    }
  }
}

/** L⁻¹ of the lower triangle of a panel into `inverse` (size × size, lower part). */
function invertLower(l: Float64Array, panel: number, size: number, inverse: Float64Array): void {
  for (let j = 0; j < size; j++) {
    inverse[j * size + j] = 1 / l[panel + j * size + j];
    for (let i = j + 1; i < size; i++) {
      let sum = 0;
      for (let k = j; k < i; k++) sum -= l[panel + i * size + k] * inverse[k * size + j];
      inverse[i * size + j] = sum / l[panel + i * size + i];
    }
  }
}
