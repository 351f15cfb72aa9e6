import { CRITICAL_W, NORMAL_95 } from '@/lib/compute/statistics/distributions';
import { LONG_SIGHT } from './accuracy';
import type { LevelSight } from './book';
import type { LevelRun } from './levelRun';
import type { LevelLimit } from './limit';
import { type ErrorPlace, errorPlace, misreadFigure, type PassedMark } from './passedMarks';

/** Why a run is judged as it is; figures in metres. */
export type LevelReason =
  | { code: 'misclosure_over'; value: number; limit: number; from: string; to: string }
  | { code: 'misclosure_of_marks'; value: number; limit: number; marks: number; from: string; to: string }
  | { code: 'error_placed'; place: ErrorPlace }
  | { code: 'misread_suspected'; size: number }
  | { code: 'not_closed'; point: string }
  | { code: 'mark_not_trusted'; point: string }
  | { code: 'point_differs'; point: string; value: number; allowed: number }
  | { code: 'misclosure_unlikely'; value: number; standardised: number }
  | { code: 'method_not_capable'; value: number; limit: number }
  | { code: 'lengths_unknown'; standings: number }
  | { code: 'peg_test_failed'; value: number }
  | { code: 'sights_unbalanced'; value: number; effect: number }
  | { code: 'booking_differs'; point: string; value: number }
  | { code: 'closes'; value: number; limit: number };

/** What is worth knowing of a run, though no verdict hangs on it. */
export type LevelNote =
  | { code: 'loop_proves_no_mark'; point: string }
  | { code: 'intermediate_unchecked'; points: string[] }
  | { code: 'sight_long'; points: string[]; limit: number }
  | { code: 'staff_inverted'; points: string[] }
  | { code: 'peg_test_missing'; sigma: number }
  | { code: 'peg_test_old'; days: number }
  | { code: 'accuracy_default' }
  | { code: 'instrument_unstated' }
  | { code: 'limit_default' }
  | { code: 'control_sigma_default'; points: string[]; sigma: number };

/** How the line of sight of the level is known. */
export interface SightLine {
  /** By the last test; by nothing, within what common practice leaves; or taken off by the level itself. */
  source: 'pegTest' | 'untested' | 'instrument';
  collimation: number;
  sigma: number;
  /** What the last test said, where it failed: it is not taken off then, since the level may have been adjusted since. */
  failed: number | null;
}

export interface RunCircumstances {
  sights: readonly LevelSight[];
  limit: LevelLimit;
  passed: readonly PassedMark[];
  line: SightLine;
  /** Start and end that are suspect or quarantined. */
  untrusted: readonly string[];
  /** The metre or foot of the staff, m. */
  staffUnit: number;
}

export interface LevelVerdict {
  verdict: 'pass' | 'hold' | 'fail';
  reasons: LevelReason[];
}

/** Share of the limit that an unknown collimation may take before the balance is asked for. */
const COLLIMATION_SHARE = 0.5;

/** Half of the last figure of a book, and a little for the sum: millimetres in metres, hundredths in feet; m. */
function bookRounding(staffUnit: number): number {
  return staffUnit === 1 ? 0.0006 : 0.0055 * staffUnit;
}

/**
 * Judges a run. It fails where it does not close within its limit, is held where something is not proven, and passes
 * otherwise: that it closes is proof of the levelling between two marks, and of nothing beside it. The limit is the
 * levelling's: an excess that the stated accuracy of the two marks explains does not prove the levelling wrong.
 */
export function judgeRun(run: LevelRun, around: RunCircumstances): LevelVerdict {
  const { closure } = run;
  if (closure.misclosure !== null && closure.exceeds) {
    const excess = Math.abs(closure.misclosure) - closure.allowed;
    const explained = excess <= MARKS_EXPLAIN * marksDeviation(run);
    const first = explained ? [ofMarks(run)] : failures(run, around);
    return { verdict: explained ? 'hold' : 'fail', reasons: [...first, ...doubts(run, around)] };
  }
  const reasons = doubts(run, around);
  if (closure.misclosure === null || reasons.length > 0) return { verdict: 'hold', reasons };
  return {
    verdict: 'pass',
    reasons: [{ code: 'closes', value: closure.misclosure, limit: closure.allowed }],
  };
}

/** Standard deviations of the marks that explain a misclosure, about 95 %. */
const MARKS_EXPLAIN = 2;

/** Of the published difference of both ends; 0 for a loop. */
function marksDeviation({ closure }: LevelRun): number {
  return Math.sqrt(Math.max(0, closure.standardDeviation ** 2 - closure.levellingDeviation ** 2));
}

function ofMarks(run: LevelRun): LevelReason {
  const { lines, closure } = run;
  return {
    code: 'misclosure_of_marks',
    value: closure.misclosure ?? 0,
    limit: closure.allowed,
    marks: MARKS_EXPLAIN * marksDeviation(run),
    from: lines[0].point,
    to: lines[lines.length - 1].point,
  };
}

function failures(run: LevelRun, { passed, staffUnit }: RunCircumstances): LevelReason[] {
  const { lines, closure } = run;
  const misclosure = closure.misclosure ?? 0;
  const reasons: LevelReason[] = [
    {
      code: 'misclosure_over',
      value: misclosure,
      limit: closure.allowed,
      from: lines[0].point,
      to: lines[lines.length - 1].point,
    },
  ];
  const place = errorPlace(run, passed);
  if (place) reasons.push({ code: 'error_placed', place });
  const size = misreadFigure(misclosure, staffUnit, closure.standardDeviation);
  if (size !== null) reasons.push({ code: 'misread_suspected', size });
  return reasons;
}

function doubts(run: LevelRun, around: RunCircumstances): LevelReason[] {
  const { lines, closure, balance } = run;
  const { limit, line, passed, sights } = around;
  const reasons: LevelReason[] = [];
  if (closure.misclosure === null) reasons.push({ code: 'not_closed', point: lines[lines.length - 1].point });
  for (const point of around.untrusted) reasons.push({ code: 'mark_not_trusted', point });
  if (!closure.exceeds) {
    for (const mark of passed) {
      if (mark.role === 'passed' && !mark.agrees)
        reasons.push({
          code: 'point_differs',
          point: mark.point,
          value: mark.difference,
          allowed: 2 * mark.standardDeviation,
        });
    }
    if (closure.misclosure !== null) {
      const standardised = closure.misclosure / closure.standardDeviation;
      if (Math.abs(standardised) > CRITICAL_W)
        reasons.push({ code: 'misclosure_unlikely', value: closure.misclosure, standardised });
    }
  }
  const capability = NORMAL_95 * closure.levellingDeviation;
  if (capability > closure.allowed)
    reasons.push({ code: 'method_not_capable', value: capability, limit: closure.allowed });
  if (!balance.measured && limit.per === 'length')
    reasons.push({ code: 'lengths_unknown', standings: balance.standings });
  if (line.failed !== null) reasons.push({ code: 'peg_test_failed', value: line.failed });
  const imbalance = balance.largestImbalance ?? 0;
  const effect = Math.abs(2 * line.sigma * imbalance);
  if (effect > COLLIMATION_SHARE * closure.allowed)
    reasons.push({ code: 'sights_unbalanced', value: imbalance, effect });
  const wrong = lines.findIndex((reduced, i) => {
    const booked = sights[i].bookedElevation;
    return booked !== null && Math.abs(booked - reduced.bookElevation) > bookRounding(around.staffUnit);
  });
  if (wrong >= 0)
    reasons.push({
      code: 'booking_differs',
      point: lines[wrong].point,
      value: (sights[wrong].bookedElevation ?? 0) - lines[wrong].bookElevation,
    });
  return reasons;
}

/** What the book itself tells beside its figures. */
export function bookNotes(
  run: LevelRun,
  sights: readonly LevelSight[],
  passed: readonly PassedMark[],
): LevelNote[] {
  const { lines, closure } = run;
  const notes: LevelNote[] = [];
  const named = (isMeant: (sight: LevelSight) => boolean) => [
    ...new Set(sights.filter(isMeant).map(({ point }) => point)),
  ];
  if (closure.kind === 'loop') notes.push({ code: 'loop_proves_no_mark', point: lines[0].point });
  const marks = new Set(passed.map(({ point }) => point));
  const between = named(({ point, intermediate }) => intermediate !== null && !marks.has(point));
  if (between.length > 0) notes.push({ code: 'intermediate_unchecked', points: between });
  const long = named((sight) =>
    [sight.backsightDistance, sight.intermediateDistance, sight.foresightDistance].some(
      (distance) => distance !== null && distance > LONG_SIGHT,
    ),
  );
  if (long.length > 0) notes.push({ code: 'sight_long', points: long, limit: LONG_SIGHT });
  const inverted = named((sight) =>
    [sight.backsight, sight.intermediate, sight.foresight].some((reading) => reading !== null && reading < 0),
  );
  if (inverted.length > 0) notes.push({ code: 'staff_inverted', points: inverted });
  return notes;
}
