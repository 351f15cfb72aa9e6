import { factor, inverseFromFactor } from '@/lib/compute/adjustment/cholesky';

/** Displacements of common points between two epochs, coordinate after coordinate. */
export interface Displacements {
  /** Later minus earlier. */
  values: Float64Array;
  /** Their covariance, row by row. */
  covariance: Float64Array;
  /** Which coordinates belong to each point. */
  points: readonly (readonly number[])[];
  /** Axis of each of a point's coordinates: 0 easting, 1 northing, 2 elevation. */
  axes: readonly (readonly number[])[];
  /** Movements of the whole that neither epoch determines, a change of every coordinate each. */
  movements: readonly Float64Array[];
}

/** dᵀQ⁺d over the points of a datum, and how many independent coordinates that is. */
export interface Congruence {
  value: number;
  degreesOfFreedom: number;
}

/**
 * Brings displacements into the datum of some of the points: the movements are taken out so that those points keep
 * still as a whole (S-transformation, Baarda 1973): d' = Sd, Q' = SQSᵀ, S = I − G(BᵀG)⁻¹Bᵀ. Null where the points do
 * not settle the movements.
 */
export function inDatumOf(all: Displacements, stable: ReadonlySet<number>): Displacements | null {
  const { values, covariance, points, movements } = all;
  const n = values.length;
  const m = movements.length;
  if (m === 0) return all;
  const chosen = [...stable].flatMap((point) => points[point]);
  const gram = new Float64Array(m * m);
  for (let k = 0; k < m; k++) {
    for (let l = 0; l < m; l++) for (const i of chosen) gram[k * m + l] += movements[k][i] * movements[l][i];
  }
  try {
    factor(gram, m);
  } catch {
    return null;
  }
  const inverse = inverseFromFactor(gram, m);
  /** G(BᵀG)⁻¹, coordinate by coordinate. */
  const h = new Float64Array(n * m);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < m; k++) {
      for (let l = 0; l < m; l++) h[i * m + k] += movements[l][i] * inverse[l * m + k];
    }
  }
  const placed = values.slice();
  const once = covariance.slice();
  for (let k = 0; k < m; k++) {
    let sum = 0;
    for (const i of chosen) sum += movements[k][i] * values[i];
    for (let i = 0; i < n; i++) placed[i] -= h[i * m + k] * sum;
    for (let j = 0; j < n; j++) {
      let column = 0;
      for (const i of chosen) column += movements[k][i] * covariance[i * n + j];
      for (let i = 0; i < n; i++) once[i * n + j] -= h[i * m + k] * column;
    }
  }
  const twice = once.slice();
  for (let k = 0; k < m; k++) {
    for (let i = 0; i < n; i++) {
      let row = 0;
      for (const j of chosen) row += once[i * n + j] * movements[k][j];
      for (let j = 0; j < n; j++) twice[i * n + j] -= row * h[j * m + k];
    }
  }
  return { ...all, values: placed, covariance: twice };
}

/**
 * Congruence of the points of a datum (Pelzer 1971), and how much of it each point brings in, d̄ᵀP_pp d̄ with P = Q⁺ and
 * d̄ = d_p + P_pp⁻¹P_pr d_r: what is left without a point is the congruence of the others in their own datum (Caspary,
 * Concepts of Network and Deformation Analysis, §6).
 *
 * @param placed displacements in the datum of these points
 */
export function congruence(
  placed: Displacements,
  stable: ReadonlySet<number>,
): Congruence & { ofPoint: Map<number, Congruence> } {
  const own = [...stable].flatMap((point) => placed.points[point]);
  const size = own.length;
  const n = placed.values.length;
  const q = new Float64Array(size * size);
  let mean = 0;
  own.forEach((i, a) => {
    own.forEach((j, b) => {
      q[a * size + b] = placed.covariance[i * n + j];
    });
    mean += q[a * size + a] / size;
  });
  // Q has the movements as its null space: filled up there, Q is regular, and Q⁺ what is over in the inverse.
  const filled = orthonormal(placed.movements.map((g) => own.map((i) => g[i])));
  const fill = (matrix: Float64Array, amount: number) => {
    for (const g of filled) {
      for (let a = 0; a < size; a++)
        for (let b = 0; b < size; b++) matrix[a * size + b] += amount * g[a] * g[b];
    }
  };
  fill(q, mean);
  factor(q, size);
  const p = inverseFromFactor(q, size);
  fill(p, -1 / mean);
  const d = own.map((i) => placed.values[i]);
  const pd = d.map((_, a) => {
    let sum = 0;
    for (let b = 0; b < size; b++) sum += p[a * size + b] * d[b];
    return sum;
  });
  const ofPoint = new Map<number, Congruence>();
  const at = new Map(own.map((i, a) => [i, a]));
  for (const point of stable) {
    const rows = placed.points[point].map((i) => at.get(i)!);
    // P_pp d̄ is the point's part of Pd, so that its share is (Pd)_pᵀ P_pp⁻¹ (Pd)_p.
    const block = rows.flatMap((a) => rows.map((b) => p[a * size + b]));
    ofPoint.set(
      point,
      quadratic(
        rows.map((a) => pd[a]),
        block,
      ),
    );
  }
  return {
    value: d.reduce((sum, value, a) => sum + value * pd[a], 0),
    degreesOfFreedom: size - filled.length,
    ofPoint,
  };
}

/** The same span in vectors of length one across each other (Gram and Schmidt). */
function orthonormal(vectors: readonly (readonly number[])[]): number[][] {
  const product = (a: readonly number[], b: readonly number[]) =>
    a.reduce((sum, value, i) => sum + value * b[i], 0);
  const result: number[][] = [];
  for (const vector of vectors) {
    let rest = vector.slice();
    for (const done of result) {
      const along = product(rest, done);
      rest = rest.map((value, i) => value - along * done[i]);
    }
    const length = Math.sqrt(product(rest, rest));
    result.push(rest.map((value) => value / length));
  }
  return result;
}

/** vᵀM⁻¹v and the rank of M; directions in which M vanishes do not count. */
export function quadratic(vector: readonly number[], matrix: readonly number[]): Congruence {
  const n = vector.length;
  const a = Float64Array.from(matrix);
  const v = vector.slice();
  let value = 0;
  let degreesOfFreedom = 0;
  for (let k = 0; k < n; k++) {
    const pivot = a[k * n + k];
    if (!(pivot > 1e-9 * matrix[k * n + k])) continue;
    degreesOfFreedom++;
    value += (v[k] * v[k]) / pivot;
    for (let i = k + 1; i < n; i++) {
      const factor = a[i * n + k] / pivot;
      v[i] -= factor * v[k];
      for (let j = k + 1; j < n; j++) a[i * n + j] -= factor * a[k * n + j];
    }
  }
  return { value, degreesOfFreedom };
}
