import { SingularError } from './model';

/**
 * A pivot this small beside the diagonal element that it began as means that the other unknowns reproduce this
 * one. Relative, so that the units of an unknown do not matter.
 */
export const SINGULAR_PIVOT = 1e-12;

/**
 * Cholesky factor of a symmetric positive definite matrix in place: a (n × n, row by row) becomes L below and
 * on the diagonal, A = LLᵀ. Golub and Van Loan, Matrix Computations, algorithm 4.2.1.
 *
 * @param offset added to the index of the failing pivot, for the message
 * @param beginnings diagonal elements to compare the pivots with, where `a` was reduced before
 * @throws SingularError where a pivot vanishes
 */
export function factor(a: Float64Array, n: number, offset = 0, beginnings?: Float64Array): void {
  for (let j = 0; j < n; j++) {
    let pivot = a[j * n + j];
    const beginning = beginnings ? beginnings[j] : pivot;
    for (let k = 0; k < j; k++) pivot -= a[j * n + k] * a[j * n + k];
    if (!(pivot > SINGULAR_PIVOT * beginning)) throw new SingularError(offset + j);
    const root = Math.sqrt(pivot);
    a[j * n + j] = root;
    for (let i = j + 1; i < n; i++) {
      let sum = a[i * n + j];
      for (let k = 0; k < j; k++) sum -= a[i * n + k] * a[j * n + k];
      a[i * n + j] = sum / root;
    }
  }
}

/** Solves L y = b in place for `columns` right-hand sides stored row by row (n × columns). */
export function solveLower(l: Float64Array, n: number, b: Float64Array, columns = 1): void {
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < i; k++) {
      const lik = l[i * n + k];
      for (let c = 0; c < columns; c++) b[i * columns + c] -= lik * b[k * columns + c];
    }
    const inverse = 1 / l[i * n + i];
    for (let c = 0; c < columns; c++) b[i * columns + c] *= inverse;
  }
}

/** Solves Lᵀ x = b in place for `columns` right-hand sides stored row by row (n × columns). */
export function solveUpper(l: Float64Array, n: number, b: Float64Array, columns = 1): void {
  for (let i = n - 1; i >= 0; i--) {
    for (let k = i + 1; k < n; k++) {
      const lki = l[k * n + i];
      for (let c = 0; c < columns; c++) b[i * columns + c] -= lki * b[k * columns + c];
    }
    const inverse = 1 / l[i * n + i];
    for (let c = 0; c < columns; c++) b[i * columns + c] *= inverse;
  }
}

/** (LLᵀ)⁻¹ as a full symmetric matrix (n × n). */
export function inverseFromFactor(l: Float64Array, n: number): Float64Array {
  const inverse = new Float64Array(n * n);
  for (let i = 0; i < n; i++) inverse[i * n + i] = 1;
  solveLower(l, n, inverse, n);
  solveUpper(l, n, inverse, n);
  return inverse;
}
