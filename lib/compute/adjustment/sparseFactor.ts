import type { AssemblyTree } from './assemblyTree';
import { SINGULAR_PIVOT } from './cholesky';
import { dot, subtractProduct } from './denseKernels';
import type { AdjustmentModel } from './model';

/** Columns of a front that are eliminated before their effect on the later ones is added up at once. */
const PANEL = 16;

/**
 * Cholesky factor of sparse normal equations N = AᵀPA, P N Pᵀ = LLᵀ in the order of an assembly tree, by the
 * multifrontal method (Duff and Reid 1983, "The multifrontal solution of indefinite sparse symmetric linear systems";
 * Liu 1992). N itself is never formed: a front adds up the rows that begin in it and what its children leave over.
 *
 * A front's columns of L are stored as a dense panel, row by row: its own unknowns (`size` rows, lower triangle), then
 * its boundary.
 */
export class SparseFactor {
  readonly panels: Float64Array;
  readonly panelStart: Float64Array;
  /** Places whose unknown is held where it is, or is not determined: their rows and columns are those of 1. */
  readonly out: Uint8Array;
  /** Unknowns that the rows do not determine beside those eliminated before, by place; empty in a good factor. */
  readonly defects: number[] = [];
  /** What children leave over for their parents, the latest on top. */
  private readonly stack: Float64Array;

  constructor(readonly tree: AssemblyTree) {
    const { fronts, first, boundaryStart, parent } = tree;
    this.panelStart = new Float64Array(fronts + 1);
    const held = new Float64Array(fronts);
    let top = 0;
    let most = 0;
    for (let f = 0; f < fronts; f++) {
      const size = first[f + 1] - first[f];
      const over = boundaryStart[f + 1] - boundaryStart[f];
      this.panelStart[f + 1] = this.panelStart[f] + size * (size + over);
      most = Math.max(most, top + over * over);
      top += over * over - held[f];
      if (parent[f] >= 0) held[parent[f]] += over * over;
    }
    this.panels = new Float64Array(this.panelStart[fronts]);
    this.stack = new Float64Array(most);
    this.out = new Uint8Array(first[fronts]);
  }

  /**
   * Factors anew. A pivot that vanishes is recorded in `defects` and its unknown held.
   *
   * @param coefficients of the rows
   * @param skipped rows that take no part
   * @param fixed unknowns that are held where they are
   */
  factor(
    { rowStart, columns, weights }: Pick<AdjustmentModel, 'rowStart' | 'columns' | 'weights'>,
    coefficients: Float64Array,
    skipped: (row: number) => boolean,
    fixed: (unknown: number) => boolean,
  ): void {
    const { tree, panels, stack, out, defects } = this;
    const { fronts, first, boundaryStart, parent, rows, rowsStart, local, inParent, unknownAt, placeOf } =
      tree;
    panels.fill(0);
    defects.length = 0;
    for (let k = 0; k < out.length; k++) out[k] = fixed(unknownAt[k]) ? 1 : 0;

    const diagonal = new Float64Array(out.length);
    const childOf = new Int32Array(fronts).fill(-1);
    const nextChild = new Int32Array(fronts).fill(-1);
    const heldAt = new Float64Array(fronts);
    let top = 0;
    for (let f = 0; f < fronts; f++) {
      const size = first[f + 1] - first[f];
      const over = boundaryStart[f + 1] - boundaryStart[f];
      const panel = this.panelStart[f];
      const left = top;
      stack.fill(0, left, left + over * over);

      for (let r = rowsStart[f]; r < rowsStart[f + 1]; r++) {
        const row = rows[r];
        if (skipped(row)) continue;
        for (let a = rowStart[row]; a < rowStart[row + 1]; a++) {
          const place = placeOf[columns[a]];
          if (out[place]) continue;
          const i = local[a];
          const weighted = weights[row] * coefficients[a];
          diagonal[place] += weighted * coefficients[a];
          for (let b = rowStart[row]; b < rowStart[row + 1]; b++) {
            const j = local[b];
            if (j > i || out[placeOf[columns[b]]]) continue;
            if (j < size) panels[panel + i * size + j] += weighted * coefficients[b];
            else stack[left + (i - size) * over + j - size] += weighted * coefficients[b];
          }
        }
      }

      let bottom = left;
      for (let child = childOf[f]; child >= 0; child = nextChild[child]) {
        const base = boundaryStart[child];
        const count = boundaryStart[child + 1] - base;
        const from = heldAt[child];
        bottom = Math.min(bottom, from);
        for (let a = 0; a < count; a++) {
          const i = inParent[base + a];
          const line = from + a * count;
          let b = 0;
          for (; b <= a && inParent[base + b] < size; b++) {
            panels[panel + i * size + inParent[base + b]] += stack[line + b];
          }
          const target = left + (i - size) * over - size;
          for (; b <= a; b++) stack[target + inParent[base + b]] += stack[line + b];
        }
      }

      this.eliminate(f, size, size + over, diagonal);
      const below = { values: panels, start: panel + size * size, stride: size };
      subtractProduct({ values: stack, start: left, stride: over }, below, below, over, over, size, true);
      if (bottom < left) stack.copyWithin(bottom, left, left + over * over);
      top = bottom + over * over;
      heldAt[f] = bottom;
      if (parent[f] >= 0) {
        nextChild[f] = childOf[parent[f]];
        childOf[parent[f]] = f;
      }
    }
  }

  /** Eliminates a front's own unknowns: its panel becomes its part of L. */
  private eliminate(f: number, size: number, rows: number, diagonal: Float64Array): void {
    const { panels, out, tree } = this;
    const panel = this.panelStart[f];
    for (let begin = 0; begin < size; begin += PANEL) {
      const end = Math.min(size, begin + PANEL);
      const at = panel + begin * size;
      if (begin > 0) {
        const done = { values: panels, start: at, stride: size };
        subtractProduct({ ...done, start: at + begin }, done, done, rows - begin, end - begin, begin);
      }
      for (let j = begin; j < end; j++) {
        const line = panel + j * size;
        const place = tree.first[f] + j;
        const pivot = panels[line + j] - dot(panels, line + begin, panels, line + begin, j - begin);
        if (!(pivot > SINGULAR_PIVOT * diagonal[place])) {
          if (!out[place]) this.defects.push(place);
          out[place] = 1;
          for (let i = j + 1; i < rows; i++) panels[panel + i * size + j] = 0;
          panels[line + j] = 1;
          continue;
        }
        const root = Math.sqrt(pivot);
        panels[line + j] = root;
        const inverse = 1 / root;
        for (let i = j + 1; i < rows; i++) {
          const other = panel + i * size;
          const product = dot(panels, line + begin, panels, other + begin, j - begin);
          panels[other + j] = (panels[other + j] - product) * inverse;
        }
      }
    }
  }

  /** Solves L y = b in place, b by place. */
  solveLower(b: Float64Array): void {
    const { tree, panels } = this;
    const { fronts, first, boundary, boundaryStart } = tree;
    for (let f = 0; f < fronts; f++) {
      const size = first[f + 1] - first[f];
      const panel = this.panelStart[f];
      const own = b.subarray(first[f], first[f + 1]);
      for (let i = 0; i < size; i++) {
        const line = panel + i * size;
        own[i] = (own[i] - dot(panels, line, own, 0, i)) / panels[line + i];
      }
      let line = panel + size * size;
      for (let e = boundaryStart[f]; e < boundaryStart[f + 1]; e++, line += size) {
        b[boundary[e]] -= dot(panels, line, own, 0, size);
      }
    }
  }

  /** Solves Lᵀ x = b in place, b by place. */
  solveUpper(b: Float64Array): void {
    const { tree, panels } = this;
    const { fronts, first, boundary, boundaryStart } = tree;
    for (let f = fronts - 1; f >= 0; f--) {
      const size = first[f + 1] - first[f];
      const panel = this.panelStart[f];
      const own = b.subarray(first[f], first[f + 1]);
      let line = panel + size * size;
      for (let e = boundaryStart[f]; e < boundaryStart[f + 1]; e++, line += size) {
        const value = b[boundary[e]];
        if (value === 0) continue;
        for (let k = 0; k < size; k++) own[k] -= panels[line + k] * value;
      }
      for (let i = size - 1; i >= 0; i--) {
        line = panel + i * size;
        own[i] /= panels[line + i];
        for (let k = 0; k < i; k++) own[k] -= panels[line + k] * own[i];
      }
    }
  }
}
