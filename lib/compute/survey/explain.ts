import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { globalTest } from '@/lib/compute/adjustment/globalTest';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { suspiciousStart, withSuspicions } from '@/lib/compute/adjustment/suspicions';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import {
  logEvidence,
  logEvidenceOfFaults,
  logEvidenceOfSpread,
  shares,
} from '@/lib/compute/statistics/evidence';
import { exchangesOf } from './exchanges';
import type { Fault } from './fault';
import type { AdjustedStation } from './stationAdjustment';
import { EASTING, NORTHING, type StationModel } from './stationModel';
import { type Suspicion, suspicionsOf } from './suspicions';

/** One thing that would explain what does not fit, with its share of the belief. */
export interface Explanation {
  fault: Fault;
  /** Marks that it concerns. */
  subject: string[];
  /** m of distances, shifts and heights (as shot minus as published), ratio of a scale, rad of a face; null without. */
  size: number | null;
  /** Only a part of the fault shows in the shots: it may be larger. */
  atLeast?: boolean;
  /** Turn of an instrument that moved, rad; `size` is null where it has only turned. */
  turn?: number;
  weight: number;
}

/**
 * How often each kind of fault is met, set against each other before anything is read: common practice at best, and
 * the figures outweigh it soon. A kind shares its odds among all that it might concern.
 */
export const ODDS: Record<Fault, number> = {
  none: 0.9,
  targetMoved: 0.03,
  heightOfTargetOrMark: 0.03,
  distanceConstant: 0.02,
  targetsSwapped: 0.01,
  distanceScale: 0.005,
  wrongFoot: 0.005,
  instrumentMoved: 0.03,
  singleFace: 0.005,
  stationMoved: 0.02,
  instrumentHeight: 0.03,
  unexplained: 0.005,
};
/** Lighter explanations are not named; what they weigh goes to `unexplained`. */
export const WORTH_NAMING = 0.01;

/** Above this share one explanation is worth acting on before any other. */
export const SURE = 0.9;
/** Faults that sit in one mark and pull the others off with it. */
const OF_ONE_MARK: ReadonlySet<Fault> = new Set(['targetMoved', 'heightOfTargetOrMark', 'wrongFoot']);

/** The one mark behind everything that does not fit; null where no explanation stands out, or it is no mark's. */
export function markToBlame([first]: readonly Explanation[]): string | null {
  return first && first.weight >= SURE && OF_ONE_MARK.has(first.fault) ? first.subject[0] : null;
}

/** What common faults move a station by they move the start by as well, m. */
const DRAGGED = 0.1;

export interface Candidate extends Omit<Explanation, 'weight'> {
  evidence: number;
}

/** The only explanation where everything fits. */
export const NOTHING_TO_EXPLAIN: readonly Explanation[] = [
  { fault: 'none', subject: [], size: null, weight: 1 },
];

/**
 * What would explain residuals that do not fit: single faults, each tried as further unknowns of the same adjustment
 * or as the same shots to other marks, weighed by how well they fit and how much freedom they took for it. Where
 * everything fits, nothing needs explaining.
 *
 * @param standardised w of every row; NaN where not controlled
 */
export function explain(adjusted: AdjustedStation, standardised: Float64Array): Explanation[] {
  const { solution } = adjusted;
  const { weightedSquares, degreesOfFreedom } = solution;
  const outlying = standardised.some((w) => Math.abs(w) > CRITICAL_W);
  const fits = solution.converged && !outlying && globalTest(weightedSquares, degreesOfFreedom).passed;
  if (fits) return [...NOTHING_TO_EXPLAIN];

  return weighed([
    ...noSingleFault(weightedSquares, degreesOfFreedom),
    ...suspicionsOf(adjusted).flatMap((suspicion) => tried(adjusted, suspicion) ?? []),
    ...exchangesOf(adjusted).map(({ weightedSquares: squares, ...exchange }) => ({
      ...exchange,
      size: null,
      evidence: logEvidence(squares),
    })),
  ]);
}

/** Nothing but chance, and nothing in particular. */
export function noSingleFault(weightedSquares: number, degreesOfFreedom: number): Candidate[] {
  const bare = { subject: [], size: null };
  return [
    { ...bare, fault: 'none', evidence: logEvidence(weightedSquares) },
    { ...bare, fault: 'unexplained', evidence: logEvidenceOfSpread(weightedSquares, degreesOfFreedom) },
  ];
}

/** Candidates with their shares of the belief, the weighty ones named. */
export function weighed(candidates: readonly Candidate[]): Explanation[] {
  const countOf = (fault: Fault) => candidates.filter((candidate) => candidate.fault === fault).length;
  const weights = shares(
    candidates.map(({ fault, evidence }) => ({ evidence, odds: ODDS[fault] / countOf(fault) })),
  );
  return named(candidates.map(({ evidence: _, ...candidate }, i) => ({ ...candidate, weight: weights[i] })));
}

/** The adjustment with a suspected fault among its unknowns; null where the shots do not determine it. */
function tried({ model, solution }: AdjustedStation, suspicion: Suspicion): Candidate | null {
  const { fault, subject, entries, usual, sizeOf, atLeast } = suspicion;
  const suspicious = withSuspicions(model, usual.length, entries);
  const attempts = beginnings(model, solution).flatMap((from) => {
    const attempt = ifDetermined(() => solve(suspicious, suspiciousStart(model, from, usual.length)));
    return attempt?.converged ? attempt : [];
  });
  if (attempts.length === 0) return null;
  const attempt = attempts.reduce((a, b) => (b.weightedSquares < a.weightedSquares ? b : a));
  const estimate = usual.map((_, i) => attempt.unknowns[model.shared + i]);
  const covariance = covarianceOfFaults(attempt, model.shared, usual.length);
  const evidence = ifDetermined(() =>
    logEvidenceOfFaults(attempt.weightedSquares, { estimate, covariance, usual }),
  );
  return evidence === null ? null : { fault, subject, size: sizeOf(estimate), atLeast, evidence };
}

/** A wrong mark drags the solution far off; the start is free of it. */
function beginnings(model: StationModel, { converged, unknowns }: Solution): Float64Array[] {
  if (!converged) return [model.start];
  // The model counts its places from the start.
  const dragged = Math.hypot(unknowns[EASTING], unknowns[NORTHING]) > DRAGGED;
  return dragged ? [unknowns, model.start] : [unknowns];
}

function covarianceOfFaults(solution: Solution, first: number, count: number): Float64Array {
  const cofactors = new Cofactors(solution);
  return Float64Array.from({ length: count * count }, (_, i) =>
    cofactors.of(first + Math.floor(i / count), first + (i % count)),
  );
}

/** The weighty ones, heaviest first; `none` and `unexplained` always, with what the light ones weigh. */
function named(explanations: readonly Explanation[]): Explanation[] {
  const light = explanations.filter(
    ({ fault, weight }) => weight < WORTH_NAMING && fault !== 'none' && fault !== 'unexplained',
  );
  const rest = light.reduce((sum, { weight }) => sum + weight, 0);
  return explanations
    .filter((explanation) => !light.includes(explanation))
    .map((e) => (e.fault === 'unexplained' ? { ...e, weight: e.weight + rest } : e))
    .sort((a, b) => b.weight - a.weight);
}
