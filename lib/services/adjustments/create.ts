import { and, eq, inArray, sql } from 'drizzle-orm';
import { type AdjustmentRequest, adjustments, levelRuns, setupResults, setups } from '@/db/schema';
import { invalid, invalidItems } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { byNames, currentControl } from '@/lib/services/control/load';
import { presentJob } from '@/lib/services/jobs/present';
import { startJob } from '@/lib/services/jobs/start';
import { asMoment, utcInstant } from '@/lib/services/moments';
import { loadProject, type ProjectRow } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

type Create = typeof contract.createAdjustment;

/** Checks what is asked for and leaves the work to a job. */
export async function createAdjustment(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Create>; body: JsonOf<Create> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const problems = [
    ...unavailable(body),
    ...(await unfitSetups(context, project, body.setups)),
    ...(await unfitRuns(context, project, body.levelRuns)),
    ...(await unfitPoints(context, project, body.datum.points)),
  ];
  if (problems.length > 0) throw invalidItems(problems);
  const request: AdjustmentRequest = {
    setups: unique(body.setups),
    levelRuns: body.levelRuns === undefined ? null : unique(body.levelRuns),
    datum: { kind: body.datum.kind, points: body.datum.points ? [...new Set(body.datum.points)] : null },
    snooping: body.snooping,
    since: body.since === undefined ? null : utcInstant(body.since),
    until: body.until === undefined ? null : utcInstant(body.until),
  };
  if (request.since !== null && request.until !== null && new Date(request.since) >= new Date(request.until))
    throw invalid('/until', 'time_out_of_order', '`until` must lie after `since`.');

  const id = runtime.uuid();
  const createdAt = runtime.now().toISOString();
  const job = await startJob(context, { kind: 'adjustment', projectId: project.id, subjectId: id });
  const name = body.name ?? `Adjustment of ${asMoment(createdAt)}`;
  await tenant.db.insert(adjustments).values({
    organizationId,
    id,
    projectId: project.id,
    jobId: job.id,
    name,
    request,
    createdBy: caller.name,
    createdByPersonId: caller.personId,
    createdAt,
  });
  record(context, caller, {
    type: 'adjustment.requested',
    subject: id,
    projectId: project.id,
    data: { name, jobId: job.id },
  });
  return presentJob(job);
}

function unique(ids: 'all' | readonly string[]): 'all' | string[] {
  return ids === 'all' ? 'all' : [...new Set(ids)];
}

/** What the hub does not keep in a form that can be adjusted, and a request for nothing at all. */
function unavailable({ setups, levelRuns, roverPoints }: JsonOf<Create>): ProblemItem[] {
  const nothing = setups.length === 0 && (levelRuns === undefined || levelRuns.length === 0);
  return [
    ...(nothing
      ? [problemItem('/setups', 'one_of_required', 'Neither a setup nor a level run is named.')]
      : []),
    ...(roverPoints === undefined
      ? []
      : [
          problemItem(
            '/roverPoints',
            'observations_not_available',
            'Rover points cannot be adjusted in a network yet.',
          ),
        ]),
  ];
}

/** Setups that do not exist, share their shots with one named before, or whose targets are not known. */
async function unfitSetups(
  { tenant, caller }: VerbContext,
  project: ProjectRow,
  ids: JsonOf<Create>['setups'],
): Promise<ProblemItem[]> {
  if (ids === 'all' || ids.length === 0) return [];
  const rows = await tenant.db
    .select({
      id: setups.id,
      rootId: setups.rootId,
      clientId: setups.clientId,
      ambiguous: sql<boolean>`coalesce((${setupResults.result} #>> '{identification,ambiguous}')::boolean, false)`,
    })
    .from(setups)
    .innerJoin(
      setupResults,
      and(
        eq(setupResults.organizationId, setups.organizationId),
        eq(setupResults.setupId, setups.id),
        eq(setupResults.version, setups.resultVersion),
      ),
    )
    .where(
      and(
        eq(setups.organizationId, caller.organizationId),
        eq(setups.projectId, project.id),
        inArray(setups.id, ids),
      ),
    );
  const known = new Map(rows.map((row) => [row.id, row]));
  const byRoot = new Map<string, (typeof rows)[number]>();
  return ids.flatMap((id, i) => {
    const pointer = `/setups/${i}`;
    const setup = known.get(id.toLowerCase());
    if (!setup) return problemItem(pointer, 'setup_unknown', `There is no setup ${id} in this project.`);
    const { rootId, clientId } = setup;
    const other = byRoot.get(rootId) ?? setup;
    byRoot.set(rootId, other);
    if (other !== setup) {
      const detail = `${clientId} has the same shots as ${other.clientId}: one is a refit of the other, and they would seem to check each other.`;
      return problemItem(pointer, 'setup_repeated', detail);
    }
    return setup.ambiguous
      ? problemItem(pointer, 'setup_ambiguous', `More than one assignment of targets fits ${clientId}.`)
      : [];
  });
}

/** Level runs that do not exist, or do not close and so hold a gross error. */
async function unfitRuns(
  { tenant, caller }: VerbContext,
  project: ProjectRow,
  ids: JsonOf<Create>['levelRuns'],
): Promise<ProblemItem[]> {
  if (ids === undefined || ids === 'all' || ids.length === 0) return [];
  const rows = await tenant.db
    .select({ id: levelRuns.id, verdict: levelRuns.verdict })
    .from(levelRuns)
    .where(
      and(
        eq(levelRuns.organizationId, caller.organizationId),
        eq(levelRuns.projectId, project.id),
        inArray(levelRuns.id, ids),
      ),
    );
  const verdicts = new Map(rows.map(({ id, verdict }) => [id, verdict]));
  return ids.flatMap((id, i) => {
    const verdict = verdicts.get(id.toLowerCase());
    if (verdict === undefined)
      return problemItem(
        `/levelRuns/${i}`,
        'level_run_unknown',
        `There is no level run ${id} in this project.`,
      );
    return verdict === 'fail'
      ? problemItem(
          `/levelRuns/${i}`,
          'level_run_fails',
          `The level run ${id} fails: it holds a gross error.`,
        )
      : [];
  });
}

/** Points named for the datum that do not exist, or lend nothing because they are quarantined. */
async function unfitPoints(
  { tenant, caller }: VerbContext,
  project: ProjectRow,
  names: readonly string[] | undefined,
): Promise<ProblemItem[]> {
  if (names === undefined) return [];
  const rows = await currentControl(tenant, caller.organizationId, project.id, byNames(names));
  const status = new Map(rows.map(({ point }) => [point.name, point.status]));
  return names.flatMap((name, i) => {
    const pointer = `/datum/points/${i}`;
    if (!status.has(name))
      return problemItem(pointer, 'point_unknown', `There is no control point ${name} in this project.`);
    if (status.get(name) === 'quarantined')
      return problemItem(pointer, 'point_quarantined', `${name} is quarantined: it places no network.`);
    return [];
  });
}
