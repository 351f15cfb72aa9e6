import { type CheckDifference, checkDifferences } from '@/lib/compute/survey/checkShots';
import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import type { Surroundings } from '@/lib/compute/survey/surroundings';
import { judgeSetup, type SetupLimits } from '@/lib/compute/survey/verdict';
import { accuracyAtWork } from '@/lib/compute/survey/workAccuracy';
import { type CheckResult, fitOf, keepMark, type SetupNote, type SetupResult } from './result';

export interface SetupTask {
  shots: readonly Shot[];
  /** All marks that the shots name. */
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  ppm: number | null;
  limits: SetupLimits;
  /** What the caller knows and the figures do not show. */
  notes: readonly SetupNote[];
}

/** Differences of the setup's own check shots of one purpose. */
export interface OwnCheck {
  purpose: 'check' | 'closing';
  targets: CheckDifference[];
}

const PURPOSES = ['check', 'closing'] as const;

/**
 * A setup from its shots: fit, statistics, its own check shots, verdict.
 *
 * @throws StationError where the shots do not determine a station
 */
export function computeSetup(task: SetupTask): { result: SetupResult; checks: OwnCheck[] } {
  const { control, accuracy, surroundings, ppm, limits } = task;
  const isUsed = (shot: Shot) => control.get(shot.target)?.status !== 'quarantined';
  const orienting = task.shots.filter((shot) => shot.purpose === 'orient');
  const fit = fitStation({ shots: orienting.filter(isUsed), control, accuracy, surroundings, ppm });
  const leftOut = [...new Set(orienting.filter((shot) => !isUsed(shot)).map((shot) => shot.target))];
  const work = accuracyAtWork(fit.station, accuracy.zenith, limits.work.radius, surroundings);
  const checks = PURPOSES.flatMap((purpose): OwnCheck[] => {
    const shots = task.shots.filter((shot) => shot.purpose === purpose && isUsed(shot));
    if (shots.length === 0) return [];
    const { station, heightDetermined, scale } = fit;
    const given = {
      ...task,
      shots,
      station,
      heightDetermined,
      scale,
      crossCovariance: crossCovariances(fit),
      tolerance: limits.residual,
    };
    return [{ purpose, targets: checkDifferences(given) }];
  });
  const differences = latestOf(checks.flatMap(({ targets }) => targets));
  const result: SetupResult = {
    ...judgeSetup(fit, limits, differences, work),
    notes: [...task.notes, ...notesOf(fit, leftOut, differences, limits)],
    station: { ...fit.station, covariance: Array.from(fit.station.covariance) },
    heightDetermined: fit.heightDetermined,
    converged: fit.converged,
    iterations: fit.iterations,
    test: fit.test,
    scale: fit.scale,
    ellipse95: fit.ellipse95,
    work,
    limits,
    geometry: fit.geometry,
    faceErrors: fit.faceErrors,
    marks: fit.marks.map(keepMark),
    leftOut: leftOut.map((name) => {
      const { version, easting, northing, elevation } = control.get(name)!;
      const shots = orienting.flatMap((shot) => (shot.target === name ? shot.id : []));
      return { name, version, published: { easting, northing, elevation }, shots };
    }),
    accuracy,
    surroundings,
    ppm,
  };
  return { result, checks };
}

/**
 * A kept setup judged again with check shots that came later. The check on each mark that was observed last counts,
 * in whatever order they came in.
 *
 * @param earlier differences of the checks observed before these shots, oldest first
 * @param later those of checks observed after them, sent in before
 */
export function judgeWithCheck(
  result: SetupResult,
  shots: readonly Shot[],
  control: ReadonlyMap<string, ControlMark>,
  earlier: readonly CheckDifference[],
  later: readonly CheckDifference[],
): { result: SetupResult; check: CheckResult } {
  const fit = fitOf(result);
  const targets = checkDifferences({
    shots: shots.filter((shot) => control.get(shot.target)?.status !== 'quarantined'),
    control,
    station: fit.station,
    heightDetermined: fit.heightDetermined,
    scale: fit.scale,
    crossCovariance: crossCovariances(fit),
    accuracy: result.accuracy,
    surroundings: result.surroundings,
    ppm: result.ppm,
    tolerance: result.limits.residual,
  });
  const judged = judgeSetup(fit, result.limits, latestOf([...earlier, ...targets, ...later]), result.work);
  return {
    result: { ...result, ...judged },
    check: { targets, tolerance: result.limits.residual, verdict: judged.verdict },
  };
}

/** Whether a check confirms the setup in all that it could show. */
export function isAgreed(targets: readonly CheckDifference[]): boolean {
  const fine = (outcome: string | null) => outcome === null || outcome === 'agreed';
  return (
    targets.length > 0 && targets.every(({ horizontal, vertical }) => fine(horizontal) && fine(vertical))
  );
}

/** The latest difference on each mark. */
function latestOf(differences: readonly CheckDifference[]): CheckDifference[] {
  return [...new Map(differences.map((difference) => [difference.target, difference])).values()];
}

function crossCovariances(fit: StationFit): Map<string, Float64Array> {
  return new Map(fit.marks.map((mark) => [mark.name, mark.stationCovariance]));
}

function notesOf(
  fit: StationFit,
  leftOut: readonly string[],
  checks: readonly CheckDifference[],
  limits: SetupLimits,
): SetupNote[] {
  const notes: SetupNote[] = [];
  for (const mark of fit.marks)
    if (mark.status === 'suspect') notes.push({ code: 'mark_suspect', target: mark.name });
  for (const target of leftOut) notes.push({ code: 'mark_quarantined', target });
  if (fit.test.low) notes.push({ code: 'spread_small', value: fit.test.sigma0 });
  if (fit.scale !== 1) notes.push({ code: 'spread_scaled', value: fit.scale });
  if (!fit.geometry.inside) notes.push({ code: 'outside_control' });
  if (!fit.heightDetermined) notes.push({ code: 'height_undetermined' });
  for (const { target, horizontal, vertical } of checks) {
    const telling = [horizontal, vertical].every(
      (outcome) => outcome === null || outcome === 'agreed' || outcome === 'over',
    );
    if (!limits.checkRequired && !telling) notes.push({ code: 'check_not_telling', target });
  }
  return notes;
}
