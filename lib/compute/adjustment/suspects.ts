import type { Cofactors } from './cofactors';
import { CONTROLLED } from './reliability';
import type { Solution } from './solve';

/**
 * One observation as it may be in error: the rows that stand and fall with it, and the errors that it may bear, each by
 * its effect on those rows. An uncorrelated observation is one row and the error [1]; correlated coordinates share
 * their rows, each with an error of its own.
 */
export interface Suspect {
  readonly rows: readonly number[];
  /** How much each of `rows` changes per unit of the error. */
  readonly errors: readonly (readonly number[])[];
}

/** What an adjustment says of one error ∇ of one observation, c its effect on the rows (Teunissen, Testing Theory). */
export interface ErrorTest {
  /** ∇̂ = cᵀPv/(cᵀPQᵥPc), its standard deviation 1/√(cᵀPQᵥPc); NaN and Infinity where nothing controls it. */
  readonly estimate: number;
  readonly sigma: number;
  /** cᵀPQᵥPc/(cᵀPc): the share of the error that shows in the residuals. */
  readonly redundancy: number;
  /** ∇̂/σ, standard normal without blunders; NaN where nothing controls it. */
  readonly standardised: number;
}

/** The tests of all suspects: running sums cᵀPv and cᵀPQᵥPc, error after error. */
export class ErrorTests {
  /** Errors of suspect s are [first[s], first[s+1]). */
  readonly first: Int32Array;
  /** cᵀPv. */
  readonly shown: Float64Array;
  /** cᵀPQᵥPc. */
  readonly information: Float64Array;
  /** cᵀPc. */
  readonly whole: Float64Array;

  constructor(
    readonly suspects: readonly Suspect[],
    solution: Solution,
    cofactors: Cofactors,
  ) {
    this.first = new Int32Array(suspects.length + 1);
    suspects.forEach(({ errors }, s) => {
      this.first[s + 1] = this.first[s] + errors.length;
    });
    const count = this.first[suspects.length];
    this.shown = new Float64Array(count);
    this.information = new Float64Array(count);
    this.whole = new Float64Array(count);
    const { weights, rowStart, columns } = solution.model;
    const { residuals, coefficients } = solution;
    suspects.forEach(({ rows, errors }, s) => {
      const size = rows.length;
      const spread = rows.flatMap((row, a) =>
        rows.slice(0, a + 1).map((other) => {
          if (other === row)
            return cofactors.variance(columns, coefficients, rowStart[row], rowStart[row + 1]);
          let sum = 0;
          for (let e = rowStart[row]; e < rowStart[row + 1]; e++) {
            for (let f = rowStart[other]; f < rowStart[other + 1]; f++) {
              sum += coefficients[e] * coefficients[f] * cofactors.of(columns[e], columns[f]);
            }
          }
          return sum;
        }),
      );
      errors.forEach((effect, k) => {
        const at = this.first[s] + k;
        for (let a = 0; a < size; a++) {
          const weighted = weights[rows[a]] * effect[a];
          this.shown[at] += weighted * residuals[rows[a]];
          this.whole[at] += weighted * effect[a];
          for (let b = 0; b < size; b++) {
            const covariance = spread[a < b ? (b * (b + 1)) / 2 + a : (a * (a + 1)) / 2 + b];
            this.information[at] -= weighted * covariance * weights[rows[b]] * effect[b];
          }
        }
        this.information[at] += this.whole[at];
      });
    });
  }

  test(suspect: number, error = 0): ErrorTest {
    const at = this.first[suspect] + error;
    const information = this.information[at];
    const redundancy = Math.min(1, Math.max(0, information / this.whole[at] || 0));
    if (redundancy <= CONTROLLED) {
      return {
        estimate: Number.NaN,
        sigma: Number.POSITIVE_INFINITY,
        redundancy,
        standardised: Number.NaN,
      };
    }
    return {
      estimate: this.shown[at] / information,
      sigma: 1 / Math.sqrt(information),
      redundancy,
      standardised: this.shown[at] / Math.sqrt(information),
    };
  }
}
