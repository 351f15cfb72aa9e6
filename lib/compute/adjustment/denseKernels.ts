/**
 * Products of rows of dense blocks: the inner loops of the sparse elimination, four by two at a time, so that each
 * element that is read serves several products.
 */

/** A block of rows within a larger array: element (i, k) is values[start + i·stride + k]. */
export interface Block {
  values: Float64Array;
  start: number;
  stride: number;
}

/**
 * C[i,j] −= Σₖ A[i,k]·B[j,k] for i in [0, rows), j in [0, columns), `depth` terms each: C −= ABᵀ.
 *
 * @param lower only where j ≤ i is wanted (some others are written too)
 */
export function subtractProduct(
  { values: c, start: cStart, stride: cStride }: Block,
  { values: a, start: aStart, stride: aStride }: Block,
  { values: b, start: bStart, stride: bStride }: Block,
  rows: number,
  columns: number,
  depth: number,
  lower = false,
): void {
  const fullRows = rows & ~3;
  for (let i = 0; i < fullRows; i += 4) {
    const a0 = aStart + i * aStride;
    const a1 = a0 + aStride;
    const a2 = a1 + aStride;
    const a3 = a2 + aStride;
    const until = lower ? Math.min(columns, i + 4) : columns;
    let j = 0;
    for (; j + 1 < until; j += 2) {
      const b0 = bStart + j * bStride;
      const b1 = b0 + bStride;
      let s00 = 0;
      let s01 = 0;
      let s10 = 0;
      let s11 = 0;
      let s20 = 0;
      let s21 = 0;
      let s30 = 0;
      let s31 = 0;
      for (let k = 0; k < depth; k++) {
        const y0 = b[b0 + k];
        const y1 = b[b1 + k];
        const x0 = a[a0 + k];
        const x1 = a[a1 + k];
        const x2 = a[a2 + k];
        const x3 = a[a3 + k];
        s00 += x0 * y0;
        s01 += x0 * y1;
        s10 += x1 * y0;
        s11 += x1 * y1;
        s20 += x2 * y0;
        s21 += x2 * y1;
        s30 += x3 * y0;
        s31 += x3 * y1;
      }
      const at = cStart + i * cStride + j;
      c[at] -= s00;
      c[at + 1] -= s01;
      c[at + cStride] -= s10;
      c[at + cStride + 1] -= s11;
      c[at + 2 * cStride] -= s20;
      c[at + 2 * cStride + 1] -= s21;
      c[at + 3 * cStride] -= s30;
      c[at + 3 * cStride + 1] -= s31;
    }
    if (j < until) {
      for (let r = 0; r < 4; r++) {
        c[cStart + (i + r) * cStride + j] -= dot(a, a0 + r * aStride, b, bStart + j * bStride, depth);
      }
    }
  }
  for (let i = fullRows; i < rows; i++) {
    const until = lower ? Math.min(columns, i + 1) : columns;
    for (let j = 0; j < until; j++) {
      c[cStart + i * cStride + j] -= dot(a, aStart + i * aStride, b, bStart + j * bStride, depth);
    }
  }
}

/** Σ a[aStart + k]·b[bStart + k], n terms. */
export function dot(a: Float64Array, aStart: number, b: Float64Array, bStart: number, n: number): number {
  let sum = 0;
  for (let k = 0; k < n; k++) sum += a[aStart + k] * b[bStart + k];
  return sum;
}
