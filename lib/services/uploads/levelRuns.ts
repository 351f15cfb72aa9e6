import { type BookFault, faultsOfBook, type LevelSight } from '@/lib/compute/survey/levelling/book';
import { toMetres } from '@/lib/compute/units/convert';
import type { LengthUnit } from '@/lib/compute/units/table';
import type { CallerContext } from '@/lib/services/context';
import { computeLevelRun } from '@/lib/services/levelRuns/compute';
import { limitOf, projectLimit } from '@/lib/services/levelRuns/limit';
import type { LevelRunRow } from '@/lib/services/levelRuns/load';
import { LEVEL_METHOD_VERSION } from '@/lib/services/levelRuns/result';
import { utcInstant } from '@/lib/services/moments';
import type { ItemProblemCode } from '@/openapi/problemCodes';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, pointerOf } from './draft';
import { lastPegTest, levelFault } from './levels';

type RunItem = Document['levelRuns'][number];

export function draftLevelRuns(draft: Draft, context: CallerContext): void {
  draft.document.levelRuns.forEach((item, index) => {
    draft.refused.push(...draftRun(draft, context, item, pointerOf(draft, 'levelRuns', index)));
  });
}

function draftRun(draft: Draft, context: CallerContext, item: RunItem, pointer: string): ProblemItem[] {
  const { site, document } = draft;
  if (site.taken.levels.has(item.clientId)) {
    const detail = `A level run ${item.clientId} was accepted before.`;
    return [problemItem(`${pointer}/clientId`, 'client_id_taken', detail)];
  }
  const sights = item.sights.map((sight) => inMetres(sight, document.units.length));
  const instrument = item.instrument === undefined ? null : site.instruments.get(item.instrument);
  const fault =
    item.instrument === undefined
      ? null
      : levelFault(instrument ?? undefined, item.instrument, `${pointer}/instrument`);
  const problems = [
    ...endProblems(draft, item, pointer),
    ...faultsOfBook(sights).map((found) => bookProblem(found, pointer)),
    ...(fault ? [fault] : []),
  ];
  if (problems.length > 0) return problems;

  const observedAt =
    item.observedAt === undefined ? context.runtime.now().toISOString() : utcInstant(item.observedAt);
  const pegTest = instrument ? lastPegTest(site, instrument.id, observedAt) : null;
  const { verdict, result } = computeLevelRun({
    sights,
    control: site.control,
    level: instrument
      ? {
          doubleRun: instrument.levelSigma,
          pegTest,
          appliesCollimation: item.collimationApplied ?? false,
        }
      : null,
    limit: item.limit ? limitOf(item.limit, 'run') : projectLimit(site.project),
    unit: document.units.length,
    project: site.project,
    observedAt,
  });
  accept(draft, context, {
    organizationId: context.caller.organizationId,
    id: context.runtime.uuid(),
    projectId: site.project.id,
    clientId: item.clientId,
    uploadId: draft.uploadId,
    fromPoint: item.from,
    toPoint: sights[sights.length - 1].point,
    instrumentId: instrument?.id ?? null,
    instrumentName: instrument?.name ?? null,
    calibrationVersion: instrument?.version ?? null,
    pegTestId: pegTest?.id ?? null,
    staff: item.staff ?? null,
    sights,
    verdict,
    result,
    methodVersion: LEVEL_METHOD_VERSION,
    observedAt,
    createdAt: context.runtime.now().toISOString(),
  });
  return [];
}

function accept(draft: Draft, { caller }: CallerContext, row: LevelRunRow): void {
  const versions = new Map(row.result.control.map(({ name, version }) => [name, version]));
  draft.levelRows.push(row);
  draft.rows.levelRuns.push(row);
  for (const mark of row.result.passed) {
    draft.rows.levelDifferences.push({
      organizationId: caller.organizationId,
      levelRunId: row.id,
      line: mark.line,
      projectId: row.projectId,
      point: mark.point,
      pointVersion: versions.get(mark.point) ?? 1,
      role: mark.role,
      published: mark.published,
      difference: mark.difference,
      standardDeviation: mark.standardDeviation,
      agrees: mark.agrees,
      observedAt: row.observedAt,
    });
  }
  draft.site.taken.levels.add(row.clientId);
  draft.happenings.push({
    type: 'levelRun.computed',
    subject: row.id,
    projectId: row.projectId,
    data: { clientId: row.clientId, from: row.fromPoint, to: row.toPoint, verdict: row.verdict },
  });
}

function inMetres(sight: RunItem['sights'][number], unit: LengthUnit): LevelSight {
  const metres = (value: number | undefined) => (value === undefined ? null : toMetres(value, unit));
  return {
    point: sight.point,
    backsight: metres(sight.backsight),
    backsightDistance: metres(sight.backsightDistance),
    intermediate: metres(sight.intermediate),
    intermediateDistance: metres(sight.intermediateDistance),
    foresight: metres(sight.foresight),
    foresightDistance: metres(sight.foresightDistance),
    bookedElevation: metres(sight.bookedElevation),
  };
}

/** A run hangs on the elevation of its start, and its names are those of its book. */
function endProblems({ site }: Draft, item: RunItem, pointer: string): ProblemItem[] {
  const problems: ProblemItem[] = [];
  const start = site.control.get(item.from);
  if (!start) {
    const detail = `There is no control point ${item.from} in this project.`;
    problems.push(problemItem(`${pointer}/from`, 'benchmark_unknown', detail));
  } else if (start.elevation === null) {
    const detail = `${item.from} has no elevation.`;
    problems.push(problemItem(`${pointer}/from`, 'benchmark_without_elevation', detail));
  }
  const [first, last] = [item.sights[0].point, item.sights[item.sights.length - 1].point];
  if (first !== item.from) {
    const detail = `from is ${item.from}, the first line stands on ${first}.`;
    problems.push(problemItem(`${pointer}/sights/0/point`, 'level_run_ends', detail));
  }
  if (item.to !== undefined && item.to !== last) {
    const detail = `to is ${item.to}, the last line stands on ${last}.`;
    problems.push(problemItem(`${pointer}/to`, 'level_run_ends', detail));
  }
  return problems;
}

const BOOK_PROBLEMS: Record<BookFault['code'], ItemProblemCode> = {
  reading_missing: 'level_book_incomplete',
  readings_exclusive: 'level_book_conflict',
  distance_missing: 'sight_distance_missing',
  distance_alone: 'sight_distance_alone',
};

function bookProblem({ line, field, code, detail }: BookFault, pointer: string): ProblemItem {
  return problemItem(`${pointer}/sights/${line}/${field}`, BOOK_PROBLEMS[code], detail);
}
