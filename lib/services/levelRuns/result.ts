import type { LevelSight } from '@/lib/compute/survey/levelling/book';
import type { HeightDifference } from '@/lib/compute/survey/levelling/heightDifferences';
import type { KnownHeight, LevelRun } from '@/lib/compute/survey/levelling/levelRun';
import type { PassedMark } from '@/lib/compute/survey/levelling/passedMarks';
import type { LevelNote, LevelReason, SightLine } from '@/lib/compute/survey/levelling/runVerdict';
import type { CitedLimit } from './limit';

/** Name and version of the computation; a change of figures raises the version. */
export const LEVEL_METHOD = 'level run, heights of collimation';
export const LEVEL_METHOD_VERSION = '1.0.0';

/** A result of a level run as it is kept, in SI units. */
export interface LevelRunResult extends LevelRun {
  reasons: LevelReason[];
  notes: LevelNote[];
  passed: PassedMark[];
  /** Between the control points that it turned on, and its ends. */
  differences: HeightDifference[];
  line: SightLine;
  limit: CitedLimit;
  /** What it was computed with: of double-run levelling, m per √m; of curvature and refraction, per m². */
  doubleRun: number;
  curvature: number;
  start: KnownHeight;
  end: KnownHeight | null;
  /** Versions of all control points that it touches. */
  control: { name: string; version: number }[];
}

/** The book of a level run as it is kept. */
export type KeptSights = LevelSight[];
