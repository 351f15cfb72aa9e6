import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import { judgeBacksightProof, judgeBacksights } from './backsightProof';
import type { CheckDifference, Tolerance } from './checkShots';
import { isNear } from './dangerCircle';
import { markToBlame } from './explain';
import type { ReadingKind } from './faces';
import type { DecidingShot } from './identifySettling';
import type { Place } from './loci';
import type { FittedMark, StationFit } from './stationFit';
import type { WorkAccuracy } from './workAccuracy';

export type Verdict = 'pass' | 'hold' | 'fail';
export type Axis = 'horizontal' | 'vertical';

/** What a class of work asks of a setup, m. */
export interface SetupLimits {
  residual: Tolerance;
  work: { radius: number; horizontal: number; vertical: number };
  checkRequired: boolean;
}

/** Why, in figures (SI); the words and units are put to it where it is shown. */
export type SetupReason =
  | { code: 'not_converged' }
  | { code: 'observation_outlier'; target: string; kind: ReadingKind; value: number; limit: number }
  | { code: 'target_residual_over'; axis: Axis; target: string; value: number; limit: number }
  | { code: 'check_over'; axis: Axis; target: string; value: number; limit: number; inFit: boolean }
  | { code: 'too_few_marks'; axis: Axis; count: number; limit: number }
  | { code: 'single_mark_dominates'; axis: Axis; target: string; value: number; limit: number }
  | { code: 'single_mark_needed'; axis: Axis; target: string }
  | { code: 'backsight_over'; axis: Axis; target: string; value: number; limit: number }
  | {
      code: 'backsight_unproven';
      axis: Axis;
      target: string;
      value: number;
      uncertainty: number;
      limit: number;
    }
  | { code: 'orientation_undetermined' }
  | { code: 'orientation_unproven'; target: string | null; measured: boolean }
  | { code: 'backsights_disagree'; target: string; value: number; turn: number; limit: number }
  | { code: 'occupied_unproven'; target: string }
  | { code: 'occupied_suspect'; target: string }
  | { code: 'two_stations'; stations: Place[] }
  | {
      code: 'identification_ambiguous';
      /** Of the assignment that was taken, then of the others. */
      stations: Place[];
      /** Marks too near each other to be told apart, where that is all. */
      confused: [string, string][];
      more: boolean;
      margin: number;
      deciding: DecidingShot | null;
      contradictedBy: string[];
    }
  | { code: 'near_danger_circle'; marks: string[]; value: number; radius: number; semiMajor: number }
  | { code: 'spread_too_large'; value: number; limit: number }
  | { code: 'accuracy_short'; axis: Axis; value: number; limit: number; radius: number }
  | { code: 'check_disagrees'; axis: Axis; target: string; value: number; limit: number }
  | { code: 'check_not_capable'; axis: Axis; target: string; value: number; limit: number }
  | { code: 'check_wanted'; axes: Axis[] }
  | { code: 'within_limits'; marks: number; radius: number; horizontal: number; vertical: number }
  | { code: 'not_checked'; independent: Axis[]; singleFace: boolean };

export interface SetupVerdict {
  verdict: Verdict;
  verdicts: Record<Axis, Verdict>;
  reasons: SetupReason[];
}

/** Distinct marks that a pass stands on, an occupied one among them. */
export const MARKS_WANTED: Record<Axis, number> = { horizontal: 3, vertical: 2 };
const AXES: readonly Axis[] = ['horizontal', 'vertical'];
const AXIS_OF_KIND: Record<ReadingKind, Axis> = {
  direction: 'horizontal',
  distance: 'horizontal',
  zenith: 'vertical',
};

/**
 * Whether a setup may be worked from, in easting and northing and in height. It fails on what is wrong, holds on
 * what is not proven, and passes otherwise; a setup that lacks nothing but the independent check that its class
 * requires holds with the single reason `check_wanted`.
 *
 * @param checks the latest check on each mark
 */
export function judgeSetup(
  fit: StationFit,
  limits: SetupLimits,
  checks: readonly CheckDifference[],
  work: WorkAccuracy,
): SetupVerdict {
  const reasons: SetupReason[] = [];
  const verdicts: Record<Axis, Verdict> = { horizontal: 'pass', vertical: 'pass' };
  const lower: Lower = (axes, to, reason) => {
    const open = axes.filter((axis) => verdicts[axis] !== 'fail');
    for (const axis of open) verdicts[axis] = to;
    // What is wrong says enough: that the same axis is not proven either only hides it.
    if (to === 'fail' || open.length > 0) reasons.push(reason);
  };
  judgeFaults(fit, limits, checks, lower);
  judgeProof(fit, limits, checks, work, lower);

  const wanted = AXES.filter((axis) => !independent(checks, axis));
  // A check that was shot and did not confirm says itself what lacks; so does what is wrong.
  const unshot = wanted.filter((axis) => verdicts[axis] !== 'fail' && !unconfirmed(reasons, axis));
  if (limits.checkRequired && unshot.length > 0) {
    const onlyCheck = reasons.length === 0;
    lower(unshot, 'hold', { code: 'check_wanted', axes: unshot });
    if (onlyCheck) return { verdict: 'hold', verdicts, reasons };
  }
  const verdict = worst(verdicts);
  if (verdict === 'pass') {
    const marks = fit.marks.filter((mark) => mark.horizontal).length + Number(fit.occupied !== null);
    reasons.push({ code: 'within_limits', marks, radius: limits.work.radius, ...work });
  }
  const singleFace = fit.marks.some((mark) =>
    mark.readings.some((r) => r.kind !== 'distance' && r.faces !== 'both'),
  );
  // A check on a mark outside the fit that did not confirm the setup is told of itself.
  const unseen = wanted.filter((axis) => !checks.some((check) => isOutside(check) && check[axis] !== null));
  if (unseen.length > 0 || singleFace) reasons.push({ code: 'not_checked', independent: unseen, singleFace });
  return { verdict, verdicts, reasons };
}

export type Lower = (axes: readonly Axis[], to: 'hold' | 'fail', reason: SetupReason) => void;

/** What is wrong: no convergence, outliers, residuals, backsights or checks beyond the class' limits. */
function judgeFaults(
  fit: StationFit,
  limits: SetupLimits,
  checks: readonly CheckDifference[],
  lower: Lower,
): void {
  if (!fit.converged) {
    lower(AXES, 'fail', { code: 'not_converged' });
  }
  const findings = worstFirst(fit.marks).flatMap((mark) => findingsOf(mark, limits));
  // One wrong mark pulls the good ones off; where it is known, they are not to be shot again.
  const blamed = markToBlame(fit.explanations);
  const own = findings.filter(({ reason }) => reason.target === blamed);
  const all = AXES.filter((axis) => findings.some((finding) => finding.axis === axis));
  for (const [i, { axis, reason }] of (own.length > 0 ? own : findings).entries()) {
    lower(own.length > 0 && i === 0 ? all : [axis], 'fail', reason);
  }
  judgeBacksights(fit, limits, lower);
  for (const check of checks) {
    for (const axis of AXES) {
      if (check[axis] !== 'over') continue;
      const value = sizeOf(check, axis);
      const { target, inFit } = check;
      lower([axis], 'fail', { code: 'check_over', axis, target, value, limit: limits.residual[axis], inFit });
    }
  }
}

type Finding = {
  axis: Axis;
  reason: Extract<SetupReason, { code: 'observation_outlier' | 'target_residual_over' }>;
};

/** Readings of a mark that are outliers, and what it misses by beyond the class' limits. */
function findingsOf(mark: FittedMark, limits: SetupLimits): Finding[] {
  const findings: Finding[] = [];
  const target = mark.name;
  const worstReading = new Map<ReadingKind, number>();
  for (const { kind, standardised } of mark.readings) {
    const w = Math.abs(standardised);
    if (w > CRITICAL_W && w > (worstReading.get(kind) ?? 0)) worstReading.set(kind, w);
  }
  for (const [kind, value] of worstReading) {
    const reason = { code: 'observation_outlier', target, kind, value, limit: CRITICAL_W } as const;
    findings.push({ axis: AXIS_OF_KIND[kind], reason });
  }
  const { easting, northing, elevation } = mark.residual;
  const { across, along, up } = mark.miss;
  const sizes = {
    horizontal:
      easting === null || northing === null
        ? Math.max(Math.abs(across ?? 0), Math.abs(along ?? 0))
        : Math.hypot(easting, northing),
    vertical: Math.abs(elevation ?? up ?? 0),
  };
  for (const axis of AXES) {
    const [value, limit] = [sizes[axis], limits.residual[axis]];
    if (value <= limit) continue;
    findings.push({ axis, reason: { code: 'target_residual_over', axis, target, value, limit } });
  }
  return findings;
}

/**
 * A wrong mark pulls the good ones off too; the one whose readings fit worst is the one to suspect (Baarda's data
 * snooping), so its findings stand first.
 */
function worstFirst(marks: readonly FittedMark[]): FittedMark[] {
  const worst = ({ readings }: FittedMark) =>
    Math.max(0, ...readings.map(({ standardised }) => Math.abs(standardised) || 0));
  return [...marks].sort((a, b) => worst(b) - worst(a));
}

/** What is not proven: too few marks, one mark carrying it all, spread, accuracy at work, checks unable to tell. */
function judgeProof(
  fit: StationFit,
  limits: SetupLimits,
  checks: readonly CheckDifference[],
  work: WorkAccuracy,
  lower: Lower,
): void {
  const { occupied, others, danger, station } = fit;
  if (others.length > 0)
    lower(['horizontal'], 'hold', { code: 'two_stations', stations: [station, ...others] });
  if (!fit.orientationDetermined) lower(['horizontal'], 'hold', { code: 'orientation_undetermined' });
  if (occupied) {
    judgeBacksightProof({ ...fit, occupied }, limits, (axis) => independent(checks, axis), lower);
  } else judgeMarks(fit, limits, lower);
  if (danger && isNear(danger)) {
    const { marks, circle, distance } = danger;
    const { semiMajor } = fit.ellipse95;
    const reason = { marks, value: Math.abs(distance), radius: circle.radius, semiMajor };
    lower(['horizontal'], 'hold', { code: 'near_danger_circle', ...reason });
  }
  if (!fit.test.passed) {
    lower(AXES, 'hold', { code: 'spread_too_large', value: fit.test.sigma0, limit: 1 });
  }
  for (const axis of AXES) {
    const [value, limit] = [work[axis], limits.work[axis]];
    const determined = axis === 'horizontal' ? fit.orientationDetermined : fit.heightDetermined;
    if (determined && value > limit) {
      lower([axis], 'hold', { code: 'accuracy_short', axis, value, limit, radius: limits.work.radius });
    }
  }
  if (!limits.checkRequired) return;
  for (const check of checks) {
    if (!isOutside(check)) continue;
    for (const axis of AXES) {
      if (independent(checks, axis)) continue;
      const { target } = check;
      if (check[axis] === 'disagrees') {
        const limit = 2 * (check.uncertainty[axis] ?? 0);
        lower([axis], 'hold', { code: 'check_disagrees', axis, target, value: sizeOf(check, axis), limit });
      } else if (check[axis] === 'notCapable') {
        const value = 2 * (check.uncertainty[axis] ?? 0);
        lower([axis], 'hold', {
          code: 'check_not_capable',
          axis,
          target,
          value,
          limit: limits.residual[axis],
        });
      }
    }
  }
}

/** A free station stands on enough trusted marks, and on no single one of them. */
function judgeMarks(fit: StationFit, limits: SetupLimits, lower: Lower): void {
  for (const axis of AXES) {
    const count = fit.marks.filter((mark) => mark[axis] && mark.status === 'trusted').length;
    if (count < MARKS_WANTED[axis]) {
      lower([axis], 'hold', { code: 'too_few_marks', axis, count, limit: MARKS_WANTED[axis] });
    } else judgeLeaveOneOut(fit, axis, limits.residual[axis], lower);
  }
}

function judgeLeaveOneOut(fit: StationFit, axis: Axis, limit: number, lower: Lower): void {
  const inAxis = fit.marks.filter((mark) => mark[axis]);
  const needed = inAxis.find((mark) => mark.without === null || mark.without[axis] === null);
  if (needed) lower([axis], 'hold', { code: 'single_mark_needed', axis, target: needed.name });
  let weakest: { target: string; value: number } | null = null;
  for (const { name, without } of inAxis) {
    const value = Math.abs(without?.[axis] ?? 0);
    if (value > limit && value > (weakest?.value ?? 0)) weakest = { target: name, value };
  }
  if (weakest) lower([axis], 'hold', { code: 'single_mark_dominates', axis, ...weakest, limit });
}

/** An agreed check on a trusted mark that took no part in the fit. */
function independent(checks: readonly CheckDifference[], axis: Axis): boolean {
  return checks.some((check) => isOutside(check) && check[axis] === 'agreed');
}

function isOutside({ inFit, status }: CheckDifference): boolean {
  return !inFit && status === 'trusted';
}

function unconfirmed(reasons: readonly SetupReason[], axis: Axis): boolean {
  return reasons.some(
    (reason) =>
      (reason.code === 'check_disagrees' || reason.code === 'check_not_capable') && reason.axis === axis,
  );
}

function sizeOf({ difference }: CheckDifference, axis: Axis): number {
  if (axis === 'horizontal') return Math.hypot(difference.easting, difference.northing);
  return Math.abs(difference.elevation ?? 0);
}

function worst(verdicts: Record<Axis, Verdict>): Verdict {
  const both = Object.values(verdicts);
  return both.includes('fail') ? 'fail' : both.includes('hold') ? 'hold' : 'pass';
}
