import { type AdjustmentModel, type FreeDatum, SingularError } from './model';
import { RowBuilder } from './rows';

/**
 * Solves a system of a model whose rows do not see some movements of the unknowns. As many unknowns are pinned as there
 * are movements, which changes no residual (minimal constraints), and every step is then completed by the movement that
 * leaves the corrections of the chosen unknowns with the least sum of squares: Bᵀ(x − x⁰) = 0, B the movements at x,
 * of the chosen unknowns alone (inner constraints; Meissl 1969; Baarda 1973, "S-transformations and criterion matrices").
 */
export class PinnedModel {
  /** The model with a row for each pin, behind its own rows. */
  readonly system: AdjustmentModel;
  private readonly pins: number[];
  private readonly pinWeights: number[];

  constructor(
    model: AdjustmentModel,
    private readonly datum: FreeDatum,
    start: Float64Array,
  ) {
    const diagonal = normalDiagonal(model, start);
    this.pins = pinsOf(datum.movements(start), diagonal);
    this.pinWeights = this.pins.map((pin) => diagonal[pin]);
    const rows = new RowBuilder();
    for (const [i, pin] of this.pins.entries()) rows.add([pin], 1 / Math.sqrt(this.pinWeights[i]));
    const added = rows.build();
    const [entries, count] = [model.columns.length, model.weights.length];
    this.system = {
      ...model,
      rowStart: Int32Array.from([
        ...model.rowStart.subarray(0, count),
        ...added.rowStart.map((e) => e + entries),
      ]),
      columns: Int32Array.from([...model.columns, ...added.columns]),
      weights: Float64Array.from([...model.weights, ...added.weights]),
      linearise(x, coefficients, misclosures) {
        model.linearise(x, coefficients, misclosures);
        coefficients.fill(1, entries);
        misclosures.fill(0, count);
      },
    };
  }

  /** Completes a step from x; answers the squared movement of the pins in the units of their weights. */
  place(x: Float64Array, step: Float64Array): number {
    const movements = this.datum.movements(x);
    const { chosen } = this.datum;
    const gram = gramOf(movements, chosen);
    const sums = movements.map((g) => {
      let sum = 0;
      for (const i of chosen) sum += g[i] * (x[i] + step[i] - this.datum.reference[i]);
      return sum;
    });
    const amounts = solveSmall(gram, sums);
    if (!amounts) throw new SingularError(chosen[0] ?? 0, Array.from(chosen));
    movements.forEach((g, k) => {
      for (let i = 0; i < step.length; i++) step[i] -= amounts[k] * g[i];
    });
    return this.pins.reduce((sum, pin, i) => sum + this.pinWeights[i] * step[pin] * step[pin], 0);
  }
}

/**
 * What turns cofactors by pins into those of the inner constraints: Q = S Q⁰ Sᵀ with S = I − HBᵀ and H = G(BᵀG)⁻¹, which
 * is Q⁰ − HWᵀ − WHᵀ with W = Q⁰B − ½H(BᵀQ⁰B).
 */
export class DatumTransform {
  private readonly h: Float64Array[];
  private readonly w: Float64Array[];

  /** @param times Q⁰ times a vector */
  constructor(datum: FreeDatum, x: Float64Array, times: (vector: Float64Array) => Float64Array) {
    const movements = datum.movements(x);
    const { chosen } = datum;
    const gram = gramOf(movements, chosen);
    const restricted = movements.map((g) => {
      const b = new Float64Array(g.length);
      for (const i of chosen) b[i] = g[i];
      return b;
    });
    this.h = movements.map((_, k) => {
      const unit = movements.map((_, l) => (l === k ? 1 : 0));
      return combined(movements, solveSmall(gram, unit)!);
    });
    const images = restricted.map(times);
    this.w = images.map((image, k) => {
      const half = restricted.map((b) => -0.5 * product(b, images[k]));
      const own = combined(this.h, half);
      for (let i = 0; i < own.length; i++) own[i] += image[i];
      return own;
    });
  }

  /** What is added to element (i, j) of Q⁰. */
  of(i: number, j: number): number {
    let sum = 0;
    for (let k = 0; k < this.h.length; k++) sum -= this.h[k][i] * this.w[k][j] + this.w[k][i] * this.h[k][j];
    return sum;
  }

  /** Adds to Q⁰·vector what makes it Q·vector. */
  addTimes(vector: Float64Array, image: Float64Array): void {
    for (let k = 0; k < this.h.length; k++) {
      const alongW = product(this.w[k], vector);
      const alongH = product(this.h[k], vector);
      for (let i = 0; i < image.length; i++) image[i] -= this.h[k][i] * alongW + this.w[k][i] * alongH;
    }
  }
}

function normalDiagonal(model: AdjustmentModel, x: Float64Array): Float64Array {
  const { rowStart, columns, weights, unknowns } = model;
  const coefficients = new Float64Array(columns.length);
  model.linearise(x, coefficients, new Float64Array(weights.length));
  const diagonal = new Float64Array(unknowns);
  for (let i = 0; i < weights.length; i++) {
    for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
      diagonal[columns[e]] += weights[i] * coefficients[e] * coefficients[e];
    }
  }
  return diagonal;
}

/** An unknown for each movement that stops it: the largest pivots of the movements, by elimination. */
function pinsOf(movements: readonly Float64Array[], diagonal: Float64Array): number[] {
  const rest = movements.map((g) => g.slice());
  const pins: number[] = [];
  while (rest.length > 0) {
    let [row, pin] = [0, 0];
    rest.forEach((g, k) => {
      for (let i = 0; i < g.length; i++) {
        if (diagonal[i] > 0 && Math.abs(g[i]) > Math.abs(rest[row][pin])) [row, pin] = [k, i];
      }
    });
    const [pivot] = rest.splice(row, 1);
    if (pivot[pin] === 0) throw new SingularError(pin);
    pins.push(pin);
    for (const g of rest) {
      const factor = g[pin] / pivot[pin];
      for (let i = 0; i < g.length; i++) g[i] -= factor * pivot[i];
    }
  }
  return pins;
}

/** BᵀG: products of the movements over the chosen unknowns. */
function gramOf(movements: readonly Float64Array[], chosen: Int32Array): number[][] {
  return movements.map((g) =>
    movements.map((other) => {
      let sum = 0;
      for (const i of chosen) sum += g[i] * other[i];
      return sum;
    }),
  );
}

/** Solution of a small symmetric positive definite system, null where it has none. */
function solveSmall(matrix: readonly (readonly number[])[], right: readonly number[]): number[] | null {
  const n = right.length;
  const a = matrix.map((row, i) => [...row, right[i]]);
  for (let k = 0; k < n; k++) {
    if (!(a[k][k] > 1e-12 * matrix[k][k])) return null;
    for (let i = k + 1; i < n; i++) {
      const factor = a[i][k] / a[k][k];
      for (let j = k; j <= n; j++) a[i][j] -= factor * a[k][j];
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let k = n - 1; k >= 0; k--) {
    let sum = a[k][n];
    for (let j = k + 1; j < n; j++) sum -= a[k][j] * x[j];
    x[k] = sum / a[k][k];
  }
  return x;
}

function combined(vectors: readonly Float64Array[], amounts: readonly number[]): Float64Array {
  const result = new Float64Array(vectors[0].length);
  vectors.forEach((vector, k) => {
    for (let i = 0; i < result.length; i++) result[i] += amounts[k] * vector[i];
  });
  return result;
}

function product(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
