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
 * Concepts of Network and Deformation Analysis, §6). Q is inverted once; a point leaves by elimination from P, P_rr −
 * P_rp P_pp⁻¹P_pr, which is the Q⁺ of the others in theirs.
 */
export class PointsCongruence {
  private readonly information: Float64Array;
  private readonly stable: Set<number>;

  /**
   * @param placed displacements in the datum of all their points
   * @throws SingularError where Q vanishes for more than the movements
   */
  constructor(private readonly placed: Displacements) {
    const { values, covariance, movements, points } = placed;
    const n = values.length;
    this.stable = new Set(points.keys());
    // Q has the movements as its null space: filled up there, Q is regular, and Q⁺ what is over in the inverse.
    const filled = orthonormal(movements.map((g) => [...g]));
    if (n <= filled.length) {
      this.information = new Float64Array(n * n);
      return;
    }
    const q = covariance.slice();
    let mean = 0;
    for (let i = 0; i < n; i++) mean += q[i * n + i] / n;
    const fill = (matrix: Float64Array, amount: number) => {
      for (const g of filled) {
        for (let a = 0; a < n; a++) for (let b = 0; b < n; b++) matrix[a * n + b] += amount * g[a] * g[b];
      }
    };
    fill(q, mean);
    factor(q, n);
    this.information = inverseFromFactor(q, n);
    fill(this.information, -1 / mean);
  }

  /** @param values displacements in the datum of the points that have not left */
  of(values: Float64Array): Congruence & { ofPoint: Map<number, Congruence> } {
    const { information, stable, placed } = this;
    const n = values.length;
    const own = [...stable].flatMap((point) => placed.points[point]);
    const degreesOfFreedom = Math.max(0, own.length - placed.movements.length);
    // In the datum of so few points Q is zero, and d as well.
    if (degreesOfFreedom === 0) return { value: 0, degreesOfFreedom, ofPoint: new Map() };
    const pd = (i: number) => own.reduce((sum, j) => sum + information[i * n + j] * values[j], 0);
    let value = 0;
    const ofPoint = new Map<number, Congruence>();
    for (const point of stable) {
      const rows = placed.points[point];
      const part = rows.map(pd);
      // P_pp d̄ is the point's part of Pd, so that its share is (Pd)_pᵀ P_pp⁻¹ (Pd)_p.
      const block = rows.flatMap((a) => rows.map((b) => information[a * n + b]));
      ofPoint.set(point, quadratic(part, block));
      rows.forEach((i, k) => {
        value += values[i] * part[k];
      });
    }
    return { value, degreesOfFreedom, ofPoint };
  }

  leave(point: number): void {
    const { information, placed } = this;
    const n = placed.values.length;
    const rows = placed.points[point];
    const beginnings = rows.map((k) => information[k * n + k]);
    rows.forEach((k, at) => {
      const pivot = information[k * n + k];
      const row = information.slice(k * n, (k + 1) * n);
      const known = pivot > VANISHED * beginnings[at];
      for (let i = 0; i < n; i++) {
        const part = known ? row[i] / pivot : 0;
        if (part !== 0) for (let j = 0; j < n; j++) information[i * n + j] -= part * row[j];
        information[i * n + k] = 0;
        information[k * n + i] = 0;
      }
    });
    this.stable.delete(point);
  }
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

/** A pivot this small beside the diagonal element that it began as is rounding. */
const VANISHED = 1e-9;

/** vᵀM⁻¹v and the rank of M; directions in which M vanishes do not count. */
export function quadratic(vector: readonly number[], matrix: readonly number[]): Congruence {
  const n = vector.length;
  const a = Float64Array.from(matrix);
  const v = vector.slice();
  let value = 0;
  let degreesOfFreedom = 0;
  for (let k = 0; k < n; k++) {
    const pivot = a[k * n + k];
    if (!(pivot > VANISHED * matrix[k * n + k])) continue;
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
