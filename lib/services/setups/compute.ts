import { type CheckDifference, checkDifferences } from '@/lib/compute/survey/checkShots';
import { type Drift, driftOf } from '@/lib/compute/survey/drift';
import type { Explanation } from '@/lib/compute/survey/explain';
import { explainLater } from '@/lib/compute/survey/explainLater';
import type { Identification } from '@/lib/compute/survey/identify';
import { identificationAfter, judgeIdentification } from '@/lib/compute/survey/identifyVerdict';
import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import type { Occupied } from '@/lib/compute/survey/stationAdjustment';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import type { Surroundings } from '@/lib/compute/survey/surroundings';
import { judgeSetup, type SetupLimits } from '@/lib/compute/survey/verdict';
import { accuracyAtWork } from '@/lib/compute/survey/workAccuracy';
import { notesOfIdentification } from './identification';
import { type Air, type CheckResult, fitOf, keepMark, type SetupNote, type SetupResult } from './result';

export interface SetupTask {
  shots: readonly Shot[];
  /** Shots of the checks that came later, oldest check first. */
  later?: readonly (readonly Shot[])[];
  /** All marks that the shots name. */
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  ppm: number | null;
  /** What the correction is made of; null where the atmosphere is unknown. */
  air?: Air | null;
  /** The mark under the instrument, of a setup by backsights. */
  occupied?: Occupied | null;
  limits: SetupLimits;
  /** How the targets were found, where the shots did not name them. */
  identification?: Identification | null;
  /** What the caller knows and the figures do not show. */
  notes: readonly SetupNote[];
}

/** What check shots show: the difference at each mark, and how the instrument has drifted. */
export interface Compared {
  targets: CheckDifference[];
  drift: Drift | null;
}

/** The setup's own check shots of one purpose. */
export interface OwnCheck extends Compared {
  purpose: 'check' | 'closing';
}

const PURPOSES = ['check', 'closing'] as const;

/** A setup's result, and what its own and its later checks show. */
export interface ComputedSetup {
  result: SetupResult;
  checks: OwnCheck[];
  later: Compared[];
}

/**
 * A setup from its shots: fit, statistics, its own check shots and later ones, verdict.
 *
 * @throws StationError where the shots do not determine a station
 */
export function computeSetup(task: SetupTask): ComputedSetup {
  const { control, accuracy, surroundings, ppm, limits } = task;
  const orienting = task.shots.filter((shot) => shot.purpose === 'orient');
  const used = orienting.filter((shot) => !isQuarantined(shot, control));
  const fit = fitStation({ shots: used, control, accuracy, surroundings, ppm, occupied: task.occupied });
  const work = accuracyAtWork(fit.station, accuracy.zenith, limits.work.radius, surroundings);
  const own = PURPOSES.map((purpose) => task.shots.filter((shot) => shot.purpose === purpose));
  const checks = PURPOSES.flatMap((purpose, i): OwnCheck[] => {
    const compared = compare(fit, own[i], task);
    return compared.targets.length === 0 ? [] : [{ purpose, ...compared }];
  });
  const { later = [] } = task;
  const laterChecks = later.map((shots) => compare(fit, shots, task));
  const differences = latestOf([...checks, ...laterChecks].map(({ targets }) => targets));
  const last = [...own, ...later].findLast((shots) => compare(fit, shots, task).targets.length > 0);
  const unused = quarantinedIn([...task.shots, ...later.flat()], control);
  const { identification = null } = task;
  const found = identification ? notesOfIdentification(identification) : [];
  const result: SetupResult = {
    ...judgeIdentification(judgeSetup(fit, limits, differences, work), identification),
    notes: [...task.notes, ...found, ...notesOf(fit, unused, differences, limits)],
    station: { ...fit.station, covariance: Array.from(fit.station.covariance) },
    heightDetermined: fit.heightDetermined,
    orientationDetermined: fit.orientationDetermined,
    occupied: fit.occupied,
    backsights: fit.backsights,
    danger: fit.danger,
    others: fit.others,
    identification,
    unusedDistances: fit.unusedDistances,
    directionSets: fit.directionSets,
    converged: fit.converged,
    iterations: fit.iterations,
    test: fit.test,
    scale: fit.scale,
    ellipse95: fit.ellipse95,
    work,
    limits,
    geometry: fit.geometry,
    faceErrors: fit.faceErrors,
    explanations: fit.explanations,
    laterExplanations: explainCheck(fit, last ?? [], task),
    marks: fit.marks.map(keepMark),
    leftOut: quarantinedIn(orienting, control).map((name) => {
      const { version, easting, northing, elevation } = control.get(name)!;
      const shots = orienting.flatMap((shot) => (shot.target === name ? shot.id : []));
      return { name, version, published: { easting, northing, elevation }, shots };
    }),
    accuracy,
    surroundings,
    ppm,
    air: task.air ?? null,
  };
  return { result, checks, later: laterChecks };
}

/**
 * A kept setup judged again with check shots that came later. The check on each mark that was observed last counts,
 * in whatever order they came in.
 *
 * @param earlier differences of each check observed before these shots, oldest first
 * @param later those of each check observed after them, sent in before
 */
export function judgeWithCheck(
  result: SetupResult,
  shots: readonly Shot[],
  control: ReadonlyMap<string, ControlMark>,
  earlier: readonly CheckDifference[][],
  later: readonly CheckDifference[][],
): { result: SetupResult; check: CheckResult } {
  const fit = fitOf(result);
  const compared = compare(fit, shots, { ...result, control });
  const { targets } = compared;
  const identification = identificationAfter(result.identification, shots, targets, result);
  const judged = judgeIdentification(
    judgeSetup(fit, result.limits, latestOf([...earlier, targets, ...later]), result.work),
    identification,
  );
  const noted = result.notes.flatMap((note) => (note.code === 'mark_quarantined' ? note.target : []));
  const unused = quarantinedIn(shots, control).filter((target) => !noted.includes(target));
  const notes = [
    ...result.notes,
    ...unused.map((target): SetupNote => ({ code: 'mark_quarantined', target })),
  ];
  // The check that was observed last tells how the setup stands now.
  const laterExplanations =
    later.length > 0 ? result.laterExplanations : explainCheck(fit, shots, { ...result, control });
  return {
    result: { ...result, ...judged, identification, notes, laterExplanations },
    check: { ...compared, tolerance: result.limits.residual, verdict: judged.verdict },
  };
}

type Compares = Pick<SetupTask, 'control' | 'accuracy' | 'surroundings' | 'ppm' | 'limits'>;

/** Check shots against a fit; shots to quarantined marks take no part. */
function compare(fit: StationFit, shots: readonly Shot[], task: Compares): Compared {
  // Without an orientation nothing can be said of a direction.
  if (!fit.orientationDetermined) return { targets: [], drift: null };
  const input = laterInput(fit, shots, task);
  return {
    targets: checkDifferences({ ...input, tolerance: task.limits.residual }),
    drift: driftOf(input),
  };
}

/** What would explain a check that does not agree with a setup whose own shots do; empty where it agrees. */
function explainCheck(fit: StationFit, shots: readonly Shot[], task: Compares): Explanation[] {
  if (!fit.orientationDetermined) return [];
  const explanations = explainLater(laterInput(fit, shots, task));
  return explanations.length === 1 ? [] : explanations;
}

function laterInput(
  fit: StationFit,
  shots: readonly Shot[],
  { control, accuracy, surroundings, ppm }: Compares,
) {
  return {
    shots: shots.filter((shot) => !isQuarantined(shot, control)),
    control,
    station: fit.station,
    heightDetermined: fit.heightDetermined,
    scale: fit.scale,
    crossCovariance: crossCovariances(fit),
    accuracy,
    surroundings,
    ppm,
  };
}

function isQuarantined({ target }: Shot, control: ReadonlyMap<string, ControlMark>): boolean {
  return control.get(target)?.status === 'quarantined';
}

function quarantinedIn(shots: readonly Shot[], control: ReadonlyMap<string, ControlMark>): string[] {
  return [...new Set(shots.filter((shot) => isQuarantined(shot, control)).map(({ target }) => target))];
}

/** Whether a check confirms the setup in all that it could show. */
export function isAgreed(targets: readonly CheckDifference[]): boolean {
  const fine = (outcome: string | null) => outcome === null || outcome === 'agreed';
  return (
    targets.length > 0 && targets.every(({ horizontal, vertical }) => fine(horizontal) && fine(vertical))
  );
}

/** Of each mark, all differences of the check that shot it last: two erections in one check both count. */
function latestOf(checks: readonly (readonly CheckDifference[])[]): CheckDifference[] {
  const latest = new Map<string, CheckDifference[]>();
  for (const targets of checks) {
    for (const [target, own] of byMark(targets)) latest.set(target, own);
  }
  return [...latest.values()].flat();
}

function byMark(differences: readonly CheckDifference[]): Map<string, CheckDifference[]> {
  const marks = new Map<string, CheckDifference[]>();
  for (const difference of differences) {
    const own = marks.get(difference.target);
    if (own) own.push(difference);
    else marks.set(difference.target, [difference]);
  }
  return marks;
}

function crossCovariances(fit: StationFit): Map<string, Float64Array> {
  return new Map(fit.marks.map((mark) => [mark.name, mark.stationCovariance]));
}

function notesOf(
  fit: StationFit,
  unused: readonly string[],
  checks: readonly CheckDifference[],
  limits: SetupLimits,
): SetupNote[] {
  const notes: SetupNote[] = [];
  for (const mark of fit.marks)
    if (mark.status === 'suspect') notes.push({ code: 'mark_suspect', target: mark.name });
  for (const target of unused) notes.push({ code: 'mark_quarantined', target });
  if (fit.test.low) notes.push({ code: 'spread_small', value: fit.test.sigma0 });
  if (fit.scale !== 1) notes.push({ code: 'spread_scaled', value: fit.scale });
  if (!fit.geometry.inside && !fit.occupied) notes.push({ code: 'outside_control' });
  if (fit.unusedDistances.length > 0) notes.push({ code: 'distance_unused', targets: fit.unusedDistances });
  if (fit.directionSets && !fit.directionSets.asStated) {
    const { ofOneSet: value, stated: limit } = fit.directionSets;
    notes.push({ code: 'directions_scatter', value, limit });
  }
  if (!fit.heightDetermined) notes.push({ code: 'height_undetermined' });
  for (const { target, horizontal, vertical } of checks) {
    const telling = [horizontal, vertical].every(
      (outcome) => outcome === null || outcome === 'agreed' || outcome === 'over',
    );
    if (!limits.checkRequired && !telling) notes.push({ code: 'check_not_telling', target });
  }
  return notes;
}
