import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import type { Removal } from '@/lib/compute/adjustment/snooping';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import type { ModelObservation, NetworkModel } from './networkModel';

/** Residuals beyond so many standard deviations lose weight, so that sums of squares become sums of sizes. */
const LARGE = 3;
/** Beyond so many after that, an observation is taken out before anything is tested. */
const GROSS = 10;
const ROUNDS = 20;

/**
 * A place to begin with that gross errors do not pull away: least squares, the weight of large residuals lowered in
 * inverse proportion, round by round (Huber 1964; iteratively reweighted, Björck, Numerical Methods for Least Squares
 * Problems, §4.5). Where targets are swapped, plain least squares would not converge. Null where a round leads to a place
 * at which something is not determined.
 */
export function robustStart(model: NetworkModel): Float64Array | null {
  const coefficients = new Float64Array(model.columns.length);
  const misclosures = new Float64Array(model.weights.length);
  let x = model.start;
  for (let round = 0; round < ROUNDS; round++) {
    model.linearise(x, coefficients, misclosures);
    const weights = model.weights.map(
      (p, i) => p / Math.max(1, (Math.abs(misclosures[i]) * Math.sqrt(p)) / LARGE),
    );
    const from = x;
    const solution = ifDetermined(() => solve({ ...model, weights }, from, { maxIterations: 1 }));
    if (!solution) return null;
    x = solution.unknowns;
  }
  return x;
}

/** Suspects, of those observed or published, that miss by more than any error of theirs at x. */
export function grossSuspects(model: NetworkModel, x: Float64Array): number[] {
  const misclosures = new Float64Array(model.weights.length);
  model.linearise(x, new Float64Array(model.columns.length), misclosures);
  const gross = new Set<number>();
  for (const { name, suspect } of model.observations) {
    if (name.kind !== 'control' && !isObserved(name)) continue;
    const { rows } = model.suspects[suspect];
    if (rows.some((row) => Math.abs(misclosures[row]) * Math.sqrt(model.weights[row]) > GROSS))
      gross.add(suspect);
  }
  return [...gross];
}

const UNSHOT = new Set(['levelDifference', 'position', 'baseline']);

/** Observed by somebody, neither published nor assumed. */
export function isObserved({ shots, kind }: ModelObservation['name']): boolean {
  return shots.length > 0 || UNSHOT.has(kind);
}

/**
 * What a solution without them says of suspects: the error of each, beside the spread of the observation and of what the
 * others make of it.
 */
export function judgedByOthers(
  model: NetworkModel,
  solution: Solution,
  suspects: readonly number[],
): Removal[] {
  const cofactors = new Cofactors(solution);
  const asked = new Set(suspects);
  const worst = new Map<number, Removal>();
  for (const { suspect, error, factors, sigma: own } of model.observations) {
    if (!asked.has(suspect)) continue;
    const { rows } = model.suspects[suspect];
    const columns: number[] = [];
    const entries: number[] = [];
    let estimate = 0;
    rows.forEach((row, i) => {
      estimate += factors[i] * solution.residuals[row];
      for (let e = model.rowStart[row]; e < model.rowStart[row + 1]; e++) {
        columns.push(model.columns[e]);
        entries.push(factors[i] * solution.coefficients[e]);
      }
    });
    const variance = own * own + cofactors.variance(columns, entries);
    const sigma = Math.sqrt(variance);
    const standardised = estimate / sigma;
    const known = worst.get(suspect);
    if (known && Math.abs(known.standardised) >= Math.abs(standardised)) continue;
    const redundancy = (own * own) / variance;
    const test = { estimate, sigma, redundancy, standardised };
    worst.set(suspect, { ...test, suspect, error, rows: [...rows], alternatives: [] });
  }
  return [...worst.values()].sort((a, b) => Math.abs(b.standardised) - Math.abs(a.standardised));
}

/** Of those judged, the ones that the others do not contradict. */
export function acquitted(judged: readonly Removal[]): Removal[] {
  return judged.filter(({ standardised }) => Math.abs(standardised) <= CRITICAL_W);
}
