import type { AdjustmentRequest } from '@/db/schema';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import type { AdjustedPoint, NetworkObservation, NetworkResult } from '@/lib/compute/survey/networkResult';
import type { Axis, Verdict } from '@/lib/compute/survey/verdict';
import { type AdjustmentInput, TAKEN_BACK } from './result';

/** Why the verdict is what it is: codes with figures in SI units. */
export type AdjustmentReason =
  | { code: 'not_converged' }
  | { code: 'too_many_removed'; removed: number; observations: number }
  | { code: 'observation_outlier'; observation: number; value: number; limit: number; alone: boolean }
  | { code: 'spread_too_large'; value: number; limit: number }
  | { code: 'control_disagrees'; points: string[] }
  | { code: 'nothing_redundant' }
  | { code: 'points_unchecked'; points: string[]; axis: Axis }
  | { code: 'network_fits'; observations: number; redundancy: number };

/** What is worth knowing, though no verdict hangs on it. */
export type AdjustmentNote =
  | { code: 'observations_removed'; removed: number; observations: number }
  | { code: 'held_not_tested'; points: number }
  | { code: 'datum_free'; free: NetworkResult['datum']['free'] }
  | { code: 'datum_point_unseen'; points: string[] }
  | { code: 'points_not_trusted'; points: string[] }
  | { code: 'points_not_determined'; points: string[]; axis: Axis }
  | { code: 'setups_failed'; setups: string[] }
  | { code: 'setups_taken_back'; setups: string[] }
  | { code: 'setups_ambiguous'; setups: string[] }
  | { code: 'atmosphere_unknown'; setups: string[] }
  | { code: 'spread_small'; value: number }
  | { code: 'spread_scaled'; value: number };

/** Whether an error in what reaches a point would show; null where it is held, not determined or not observed. */
export type PointChecks = Record<Axis, boolean | null>;

const FAILING: ReadonlySet<AdjustmentReason['code']> = new Set([
  'not_converged',
  'too_many_removed',
  'observation_outlier',
]);

const AXES = ['horizontal', 'vertical'] as const;

/** Observations that reach a point in plan and in height. */
const REACHING: Record<Axis, readonly NetworkObservation['kind'][]> = {
  horizontal: ['direction', 'distance', 'position', 'baseline', 'control'],
  vertical: ['zenith', 'levelDifference', 'position', 'baseline', 'control'],
};

/** What was observed or published; centrings, heights of targets and the like are assumed. */
const OBSERVED: ReadonlySet<NetworkObservation['kind']> = new Set([
  ...REACHING.horizontal,
  ...REACHING.vertical,
]);

/** A verdict on a network, with what decided it and what did not. */
export function judgeAdjustment(
  { network, setups, control, ambiguous, unseen }: AdjustmentInput,
  { datum, snooping }: AdjustmentRequest,
  result: NetworkResult,
): {
  verdict: Verdict;
  reasons: AdjustmentReason[];
  notes: AdjustmentNote[];
  checks: Record<string, PointChecks>;
} {
  const { observations, removed, test } = result;
  const reaching = byPoint(observations);
  const observed = observations.filter(({ kind }) => OBSERVED.has(kind));
  const checks = Object.fromEntries(
    result.points.map((point) => [point.name, checksOf(point, reaching.get(point.name) ?? [])]),
  );
  const reasons: AdjustmentReason[] = [];
  if (!result.converged) reasons.push({ code: 'not_converged' });
  if (result.snoopingEnded === 'too_many')
    reasons.push({ code: 'too_many_removed', removed: removed.length, observations: observed.length });
  else {
    const worst = worstOf(observations);
    if (worst !== null) {
      const value = Math.abs(observations[worst].standardised!);
      reasons.push({
        code: 'observation_outlier',
        observation: worst,
        value,
        limit: CRITICAL_W,
        alone: snooping,
      });
    }
  }
  if (test.degreesOfFreedom === 0) reasons.push({ code: 'nothing_redundant' });
  else if (!test.passed) {
    const limit = Math.sqrt(test.upper / test.degreesOfFreedom);
    reasons.push({ code: 'spread_too_large', value: test.sigma0, limit });
  }
  const disagreeing = removed.map(({ observation }) => observations[observation]);
  const points = disagreeing.flatMap(({ kind, source }) => (kind === 'control' ? source : []));
  if (points.length > 0) reasons.push({ code: 'control_disagrees', points: [...new Set(points)] });
  for (const axis of AXES) {
    const open = Object.keys(checks).filter((name) => checks[name][axis] === false);
    if (open.length > 0) reasons.push({ code: 'points_unchecked', points: open, axis });
  }
  const verdict = reasons.some(({ code }) => FAILING.has(code))
    ? 'fail'
    : reasons.length > 0
      ? 'hold'
      : 'pass';
  if (verdict === 'pass')
    reasons.push({
      code: 'network_fits',
      observations: observed.filter((observation) => !observation.removed).length,
      redundancy: test.degreesOfFreedom,
    });

  const notes: AdjustmentNote[] = [];
  const list = <C extends AdjustmentNote['code']>(code: C, names: string[], key: 'points' | 'setups') => {
    if (names.length > 0) notes.push({ code, [key]: names } as unknown as AdjustmentNote);
  };
  if (removed.length > 0 && result.snoopingEnded !== 'too_many')
    notes.push({ code: 'observations_removed', removed: removed.length, observations: observed.length });
  if (datum.kind === 'held') {
    const held = network.points.filter((p) => p.horizontalDatum === 'held' || p.verticalDatum === 'held');
    notes.push({ code: 'held_not_tested', points: held.length });
  }
  if (result.datum.free.length > 0) notes.push({ code: 'datum_free', free: result.datum.free });
  list('datum_point_unseen', unseen, 'points');
  const distrusted = control.filter(({ status }) => status !== 'trusted').map(({ name }) => name);
  list(
    'points_not_trusted',
    distrusted.filter((name) => datum.points === null || !datum.points.includes(name)),
    'points',
  );
  const lost = {
    horizontal: result.points.filter(({ easting }) => easting === null),
    vertical: result.points.filter(({ elevation }) => elevation === null),
  };
  for (const axis of AXES) {
    const names = lost[axis].map(({ name }) => name);
    if (names.length > 0) notes.push({ code: 'points_not_determined', points: names, axis });
  }
  list(
    'setups_failed',
    setups.filter((s) => s.verdict === 'fail').map((s) => s.clientId),
    'setups',
  );
  list(
    'setups_taken_back',
    setups.filter(({ state }) => TAKEN_BACK.has(state)).map((s) => s.clientId),
    'setups',
  );
  list('setups_ambiguous', ambiguous, 'setups');
  list(
    'atmosphere_unknown',
    setups.filter((s) => !s.atmosphereKnown).map((s) => s.clientId),
    'setups',
  );
  if (test.low) notes.push({ code: 'spread_small', value: test.sigma0 });
  if (result.scale !== 1) notes.push({ code: 'spread_scaled', value: result.scale });
  return { verdict, reasons, notes, checks };
}

/** The observation that fits worst among those left, where it fits too ill. */
function worstOf(observations: readonly NetworkObservation[]): number | null {
  let worst: number | null = null;
  let largest = CRITICAL_W;
  observations.forEach(({ standardised }, i) => {
    if (standardised === null || Math.abs(standardised) <= largest) return;
    largest = Math.abs(standardised);
    worst = i;
  });
  return worst;
}

/** The observations left that touch each point, its own coordinates among them. */
function byPoint(observations: readonly NetworkObservation[]): Map<string, NetworkObservation[]> {
  const touching = new Map<string, NetworkObservation[]>();
  for (const observation of observations) {
    const { removed, kind, source, from, to } = observation;
    if (removed) continue;
    for (const name of new Set([from, to, kind === 'control' ? source : null])) {
      if (name === null) continue;
      const own = touching.get(name);
      if (own) own.push(observation);
      else touching.set(name, [observation]);
    }
  }
  return touching;
}

/**
 * A point is checked where observations of two sources reach it (two setups, a setup and a level line, its own weighted
 * coordinates) and at least one of them is controlled: sets and faces from one setup would all carry the same error of
 * its target.
 */
function checksOf(point: AdjustedPoint, touching: readonly NetworkObservation[]): PointChecks {
  const checked = (axis: Axis) => {
    const own = touching.filter(({ kind, component }) => {
      const height = component === 'elevation';
      return REACHING[axis].includes(kind) && (component === null || height === (axis === 'vertical'));
    });
    const sources = new Set(
      own.map(({ kind, source }) => (kind === 'control' ? 'control' : source.split('/')[0])),
    );
    if (sources.size === 0 || (sources.size === 1 && sources.has('control'))) return null;
    return sources.size >= 2 && own.some(({ minimalDetectable }) => minimalDetectable !== null);
  };
  return {
    horizontal: point.horizontalDatum === 'held' || point.easting === null ? null : checked('horizontal'),
    vertical: point.verticalDatum === 'held' || point.elevation === null ? null : checked('vertical'),
  };
}
