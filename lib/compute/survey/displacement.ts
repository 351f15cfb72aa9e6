import { factor, inverseFromFactor, solveLower } from '@/lib/compute/adjustment/cholesky';
import type { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import { CONTROLLED } from '@/lib/compute/adjustment/reliability';
import type { Solution } from '@/lib/compute/adjustment/solve';
import type { JointMark, JointModel, Sighting, TellingRow } from './jointModel';

/** A displacement as it would be estimated beside everything else; its last axis, the height, may be missing. */
export interface Displacement {
  /** m, east, north and up. */
  estimate: Float64Array;
  /** Its covariance, row by row. */
  covariance: Float64Array;
  /** T = ∇ᵀQ⁻¹∇, by which vᵀPv would fall: χ² with as many degrees of freedom as axes where nothing has moved. */
  statistic: number;
}

/**
 * Tests of one mark against a solution without displacements: what the residuals say of a displacement in some of its
 * sightings, without solving again (Baarda 1968; Teunissen, Testing Theory, ch. 4). With C the rows' coefficients,
 *
 *   N = CᵀP Q_v P C,  b = CᵀP v,  ∇ = N⁻¹b,  T = bᵀN⁻¹b,  Q_v = P⁻¹ − A Q Aᵀ.
 */
export class DisplacementTests {
  private readonly rows: { sighting: number; row: TellingRow }[];
  /** Pᵢ Q_v,ij Pⱼ with the rows' coefficients. */
  private readonly weight: Float64Array;
  private readonly pull: Float64Array;

  constructor(
    model: JointModel,
    /** Of the model itself or of the same model with suspicions: its rows are the same. */
    private readonly solution: Solution,
    cofactors: Cofactors,
    private readonly known: JointMark,
    sightings: readonly Sighting[],
  ) {
    this.rows = sightings.flatMap(({ rows }, sighting) => rows.map((row) => ({ sighting, row })));
    const n = this.rows.length;
    const { weights } = model;
    this.weight = new Float64Array(n * n);
    this.pull = Float64Array.from(
      this.rows,
      ({ row }) => row.coefficient * weights[row.row] * solution.residuals[row.row],
    );
    for (let i = 0; i < n; i++) {
      const one = this.rows[i].row;
      for (let j = 0; j <= i; j++) {
        const other = this.rows[j].row;
        const own = one.row === other.row ? 1 / weights[one.row] : 0;
        const value =
          one.coefficient *
          other.coefficient *
          weights[one.row] *
          weights[other.row] *
          (own - this.covariance(cofactors, one.row, other.row));
        this.weight[i * n + j] = this.weight[j * n + i] = value;
      }
    }
  }

  /**
   * One displacement in all these sightings; null where they do not determine it.
   *
   * @param axes that it may lie along: a level run tells heights alone
   */
  common(sightings: ReadonlySet<number>, axes: readonly number[]): Displacement | null {
    return this.estimate(axes.length, ({ sighting, row }) =>
      sightings.has(sighting) ? axes.indexOf(row.axis) : -1,
    );
  }

  /**
   * A displacement in each of these sightings for itself, one behind the other: they have nothing in common but the
   * published place. Each is the place that the other marks give minus the published one.
   */
  each(sightings: readonly number[]): Displacement | null {
    const { axes } = this.known;
    return this.estimate(sightings.length * axes, ({ sighting, row }) => {
      const index = sightings.indexOf(sighting);
      return index < 0 ? -1 : index * axes + row.axis;
    });
  }

  private estimate(size: number, parameterOf: (row: { sighting: number; row: TellingRow }) => number) {
    const n = this.rows.length;
    const parameters = this.rows.map(parameterOf);
    const normal = new Float64Array(size * size);
    const right = new Float64Array(size);
    for (let i = 0; i < n; i++) {
      if (parameters[i] < 0) continue;
      right[parameters[i]] += this.pull[i];
      for (let j = 0; j < n; j++) {
        if (parameters[j] >= 0) normal[parameters[i] * size + parameters[j]] += this.weight[i * n + j];
      }
    }
    const diagonal = Float64Array.from({ length: size }, (_, i) => normal[i * size + i]);
    if (ifDetermined(() => factor(normal, size)) === null) return null;
    // What the others hardly control is not determined by them.
    if (diagonal.some((whole, i) => normal[i * size + i] ** 2 < CONTROLLED * whole)) return null;
    const covariance = inverseFromFactor(normal, size);
    const estimate = new Float64Array(size);
    let statistic = 0;
    for (let i = 0; i < size; i++) {
      for (let j = 0; j < size; j++) estimate[i] += covariance[i * size + j] * right[j];
      statistic += right[i] * estimate[i];
    }
    return { estimate, covariance, statistic };
  }

  /** aᵢᵀQaⱼ of two rows. */
  private covariance(cofactors: Cofactors, i: number, j: number): number {
    const { model, coefficients } = this.solution;
    let sum = 0;
    for (let e = model.rowStart[i]; e < model.rowStart[i + 1]; e++) {
      for (let f = model.rowStart[j]; f < model.rowStart[j + 1]; f++) {
        sum += coefficients[e] * coefficients[f] * cofactors.of(model.columns[e], model.columns[f]);
      }
    }
    return sum;
  }
}

/** ∇ᵀQ⁻¹∇. */
export function quadraticForm(vector: Float64Array, covariance: Float64Array): number {
  const size = vector.length;
  const matrix = covariance.slice();
  factor(matrix, size);
  const scaled = vector.slice();
  solveLower(matrix, size, scaled);
  return scaled.reduce((sum, value) => sum + value * value, 0);
}
