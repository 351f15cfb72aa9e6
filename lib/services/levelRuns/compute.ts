import {
  curvatureOf,
  DEFAULT_LEVEL_SIGMA,
  oneWaySigma,
  UNTESTED_COLLIMATION,
} from '@/lib/compute/survey/levelling/accuracy';
import type { LevelSight } from '@/lib/compute/survey/levelling/book';
import { heightDifferences } from '@/lib/compute/survey/levelling/heightDifferences';
import { type KnownHeight, levelRun } from '@/lib/compute/survey/levelling/levelRun';
import { passedMarks } from '@/lib/compute/survey/levelling/passedMarks';
import {
  bookNotes,
  judgeRun,
  type LevelNote,
  type SightLine,
} from '@/lib/compute/survey/levelling/runVerdict';
import { LENGTH, type LengthUnit } from '@/lib/compute/units/table';
import { surroundingsOf } from '@/lib/services/projects/load';
import type { CitedLimit } from './limit';
import type { LevelRunResult } from './result';

/** A control point as a run meets it; its elevation may be wanting. */
export interface MetMark {
  name: string;
  version: number;
  elevation: number | null;
  verticalSigma: number;
  status: string;
  sigmaStated: boolean;
}

/** The last test of a level before a run. */
export interface LastPegTest {
  id: string;
  collimation: number;
  collimationSigma: number;
  verdict: 'pass' | 'hold' | 'fail';
  observedAt: string;
}

export interface LevelRunParts {
  sights: readonly LevelSight[];
  /** Control points of the project, by the names in the book at least. */
  control: ReadonlyMap<string, MetMark>;
  /** Null where the run names no level. */
  level: { doubleRun: number | null; pegTest: LastPegTest | null; appliesCollimation: boolean } | null;
  limit: CitedLimit;
  /** Metre or foot of the staff. */
  unit: LengthUnit;
  project: Parameters<typeof surroundingsOf>[0];
  observedAt: string;
}

/** A test is good for this long; monthly and after every transport (common practice). */
const PEG_TEST_DAYS = 30;
const DAY_MS = 86_400_000;

/** A level run with its verdict; it starts from a mark that has an elevation. */
export function computeLevelRun(parts: LevelRunParts): {
  verdict: 'pass' | 'hold' | 'fail';
  result: LevelRunResult;
} {
  const { sights, control, level, limit } = parts;
  const known = knownHeights(control);
  const start = known.get(sights[0].point);
  if (!start) throw new Error('A level run starts from a mark with an elevation.');
  const end = known.get(sights[sights.length - 1].point) ?? null;
  const line = sightLine(level);
  const doubleRun = level?.doubleRun ?? DEFAULT_LEVEL_SIGMA;
  const { refraction, earthRadius } = surroundingsOf(parts.project);
  const curvature = curvatureOf(refraction, earthRadius);
  const reduction = { sigma: oneWaySigma(doubleRun), collimation: line.collimation, curvature };
  const run = levelRun({ sights, start, end, ...reduction, collimationSigma: line.sigma, limit });
  const passed = passedMarks(run, known);
  const met = [...new Set(sights.map(({ point }) => point))].flatMap((name) => control.get(name) ?? []);
  const ends = [start.name, ...(end && end.name !== start.name ? [end.name] : [])];
  const { verdict, reasons } = judgeRun(run, {
    sights,
    limit,
    passed,
    line,
    untrusted: ends.filter((name) => control.get(name)?.status !== 'trusted'),
    staffUnit: LENGTH[parts.unit],
  });
  return {
    verdict,
    result: {
      ...run,
      reasons,
      notes: [...bookNotes(run, sights, passed), ...assumptions(parts, met, line)],
      passed,
      differences: heightDifferences(sights, reduction, (name) => control.has(name)),
      line,
      limit,
      doubleRun,
      curvature,
      start,
      end,
      control: met.map(({ name, version }) => ({ name, version })),
    },
  };
}

function knownHeights(control: ReadonlyMap<string, MetMark>): Map<string, KnownHeight> {
  const known = new Map<string, KnownHeight>();
  for (const { name, elevation, verticalSigma } of control.values()) {
    if (elevation !== null) known.set(name, { name, elevation, sigma: verticalSigma });
  }
  return known;
}

/** A collimation that failed its test is not taken off: whether the level was adjusted since, nobody said. */
function sightLine(level: LevelRunParts['level']): SightLine {
  const test = level?.pegTest ?? null;
  const failed = test?.verdict === 'fail' ? test.collimation : null;
  if (level?.appliesCollimation) {
    const sigma = test && failed === null ? test.collimationSigma : UNTESTED_COLLIMATION;
    return { source: 'instrument', collimation: 0, sigma, failed };
  }
  if (test && failed === null)
    return { source: 'pegTest', collimation: test.collimation, sigma: test.collimationSigma, failed };
  const sigma = Math.max(UNTESTED_COLLIMATION, Math.abs(failed ?? 0));
  return { source: 'untested', collimation: 0, sigma, failed };
}

/** What was taken for granted, to be said in the answer. */
function assumptions(parts: LevelRunParts, met: readonly MetMark[], line: SightLine): LevelNote[] {
  const { level, limit, observedAt } = parts;
  const notes: LevelNote[] = [];
  if (level === null) notes.push({ code: 'instrument_unstated' });
  else if (level.doubleRun === null) notes.push({ code: 'accuracy_default' });
  if (level && level.pegTest === null) notes.push({ code: 'peg_test_missing', sigma: line.sigma });
  if (level?.pegTest) {
    const days = (Date.parse(observedAt) - Date.parse(level.pegTest.observedAt)) / DAY_MS;
    if (days > PEG_TEST_DAYS) notes.push({ code: 'peg_test_old', days: Math.floor(days) });
  }
  if (limit.source === 'default') notes.push({ code: 'limit_default' });
  const unstated = met.filter((mark) => mark.elevation !== null && !mark.sigmaStated);
  if (unstated.length > 0)
    notes.push({
      code: 'control_sigma_default',
      points: unstated.map(({ name }) => name),
      sigma: unstated[0].verticalSigma,
    });
  return notes;
}
