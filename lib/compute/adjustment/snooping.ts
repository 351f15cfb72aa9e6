import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import type { Cofactors } from './cofactors';
import { CONTROLLED } from './reliability';
import type { Solution } from './solve';
import { type ErrorTest, ErrorTests, type Suspect } from './suspects';

/** Standardised residuals that differ by less than this tell nothing apart; the earlier suspect is taken. */
const ALIKE = 1e-6;
/** Squared correlation of two tests above which one error shows like the other. */
const INSEPARABLE = 0.98;

export interface Removal extends ErrorTest {
  suspect: number;
  /** Which of its errors. */
  error: number;
  /** Its rows that were taken out: all but those that alone determine something. */
  rows: number[];
  /** Suspects, tested beyond the critical value too, whose error would show in the same way. */
  alternatives: number[];
}

export interface Snooping {
  removals: Removal[];
  /** Nothing is left beyond the critical value; the most were taken out. */
  ended: 'clean' | 'too_many';
}

/**
 * Iterated data snooping (Baarda 1968; Kok 1984, "On data snooping and multiple outlier testing"): the observation of
 * the largest |w| beyond 3.29 is taken out and all tests are brought up to date, until none is beyond. An observation
 * that no other controls cannot be taken out, so that redundancy is never undercut.
 *
 * One removal costs one solution by the factored normal equations: with u = Qa of the row, r its redundancy number,
 * Q' = Q + u uᵀp/r and v' = v + (aᵀu)pv/r. That is exact for a linear model; a solution without the removed rows shows
 * what is left of the difference.
 *
 * @param most how many to take out at most
 */
export function snoop(
  solution: Solution,
  cofactors: Cofactors,
  suspects: readonly Suspect[],
  most: number,
): Snooping {
  const tests = new ErrorTests(suspects, solution, cofactors);
  const downdate = new Downdate(solution, cofactors, tests);
  const removals: Removal[] = [];
  const out = new Set<number>();
  for (;;) {
    let worst: Removal | null = null;
    for (let s = 0; s < suspects.length; s++) {
      if (out.has(s)) continue;
      for (let error = 0; error < suspects[s].errors.length; error++) {
        const test = tests.test(s, error);
        const size = Math.abs(test.standardised);
        if (!(size > CRITICAL_W)) continue;
        if (worst && size <= Math.abs(worst.standardised) * (1 + ALIKE)) continue;
        worst = { ...test, suspect: s, error, rows: [], alternatives: [] };
      }
    }
    if (!worst) return { removals, ended: 'clean' };
    if (removals.length >= most) return { removals, ended: 'too_many' };
    out.add(worst.suspect);
    const before = tests.information.slice();
    const shown = tests.shown.slice();
    worst.rows = suspects[worst.suspect].rows.filter((row) => downdate.remove(row));
    for (let s = 0; s < suspects.length; s++) {
      if (out.has(s)) continue;
      for (let at = tests.first[s]; at < tests.first[s + 1]; at++) {
        const alike = tests.information[at] < (1 - INSEPARABLE) * before[at];
        if (!alike || !(Math.abs(shown[at]) > CRITICAL_W * Math.sqrt(before[at]))) continue;
        worst.alternatives.push(s);
        break;
      }
    }
    removals.push(worst);
  }
}

/**
 * Brings residuals and the tests of all other suspects up to date as rows are taken out one by one. A row belongs to
 * one suspect only.
 */
class Downdate {
  private readonly residuals: Float64Array;
  private readonly weights: Float64Array;
  /** u and p/r of the rows that are out. */
  private readonly images: { u: Float64Array; factor: number }[] = [];

  constructor(
    private readonly solution: Solution,
    private readonly cofactors: Cofactors,
    private readonly tests: ErrorTests,
  ) {
    this.residuals = solution.residuals.slice();
    this.weights = solution.model.weights.slice();
  }

  /** Takes a row out; false where it alone determines something and stays. */
  remove(row: number): boolean {
    const { weights, residuals, images, tests } = this;
    const { model, coefficients } = this.solution;
    const { rowStart, columns, unknowns } = model;
    const a = new Float64Array(unknowns);
    for (let e = rowStart[row]; e < rowStart[row + 1]; e++) a[columns[e]] += coefficients[e];
    const u = this.cofactors.times(a);
    for (const image of images) {
      const amount = image.factor * along(image.u, row, this.solution);
      for (let i = 0; i < unknowns; i++) u[i] += amount * image.u[i];
    }
    const p = weights[row];
    const r = 1 - p * along(u, row, this.solution);
    if (!(r > CONTROLLED)) return false;
    const error = (p * residuals[row]) / r;
    const covariances = residuals.map((_, j) => along(u, j, this.solution));
    tests.suspects.forEach((suspect, s) => {
      suspect.errors.forEach((effect, k) => {
        let sum = 0;
        for (let i = 0; i < effect.length; i++) {
          sum += effect[i] * weights[suspect.rows[i]] * covariances[suspect.rows[i]];
        }
        const at = tests.first[s] + k;
        tests.information[at] -= (sum * sum * p) / r;
        tests.shown[at] += sum * error;
      });
    });
    for (let j = 0; j < residuals.length; j++) residuals[j] += covariances[j] * error;
    weights[row] = 0;
    images.push({ u, factor: p / r });
    return true;
  }
}

/** aⱼᵀu. */
function along(u: Float64Array, row: number, { model, coefficients }: Solution): number {
  let sum = 0;
  for (let e = model.rowStart[row]; e < model.rowStart[row + 1]; e++)
    sum += coefficients[e] * u[model.columns[e]];
  return sum;
}
