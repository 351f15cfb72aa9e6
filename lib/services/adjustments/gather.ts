import { and, asc, count, eq, gte, inArray, lt, notInArray, type SQL } from 'drizzle-orm';
import {
  type AdjustmentRequest,
  controlPoints,
  levelRuns as levelRunRows,
  observations,
  setupChecks,
  setupResults,
  setups,
} from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { CoordinateDatum, NetworkPoint, NetworkSetup } from '@/lib/compute/survey/networkInput';
import type { Shot } from '@/lib/compute/survey/shots';
import { Problem } from '@/lib/problem';
import { byNames, type CurrentControl, currentControl } from '@/lib/services/control/load';
import { runDifferences } from '@/lib/services/levelRuns/differences';
import { loadProject, surroundingsOf } from '@/lib/services/projects/load';
import { targetsOf } from '@/lib/services/setups/identification';
import { asShot, type ObservedShot } from '@/lib/services/setups/observed';
import { readResult } from '@/lib/services/setups/result';
import { type AdjustmentInput, TAKEN_BACK } from './result';

/**
 * Shots and levelled differences of one network, up to three readings each. `npm run bench` takes 3 s and 300 MB for
 * 12,372 readings.
 */
const MOST_OBSERVATIONS = 10_000;

interface Of {
  organizationId: string;
  projectId: string;
}

/**
 * Everything that an adjustment takes from what is stored, as it stands in one transaction.
 *
 * @throws Problem where that is more than the worker's memory is for
 */
export async function gather(tenant: Tenant, of: Of, request: AdjustmentRequest): Promise<AdjustmentInput> {
  const project = await loadProject(tenant, of.organizationId, of.projectId);
  const runs = await wantedRuns(tenant, of, request);
  requireBounded(runs.length + (await countShots(tenant, of, request)));
  const found = (await wantedSetups(tenant, of, request)).map(({ setup, result }) => ({
    setup,
    result: readResult(result),
  }));
  const rows = found.filter(({ result }) => !result.identification?.ambiguous);
  const shots = await shotsOf(tenant, of, rows);
  const networkSetups = rows.map(({ setup, result }): NetworkSetup => {
    const { accuracy, ppm, occupied, identification } = result;
    const left = new Set(setup.excluded.map(({ shot }) => shot));
    // A refit identifies anew: what the first result called the targets is not what this one did.
    const targets = identification && targetsOf(identification);
    const own = (shots.get(setup.rootId) ?? []).flatMap((shot): Shot[] => {
      const target = shot.target ?? targets?.get(shot.id);
      return target === undefined || left.has(shot.id) ? [] : [{ ...shot, target }];
    });
    return {
      id: setup.id,
      occupied: occupied?.name ?? null,
      instrumentHeight: occupied?.instrumentHeight ?? null,
      shots: own,
      accuracy,
      ppm,
    };
  });
  const shot = new Set(
    networkSetups.flatMap(({ occupied, shots }) => [
      ...(occupied === null ? [] : [occupied]),
      ...shots.map(({ target }) => target),
    ]),
  );
  const seen = [...new Set([...shot, ...runs.flatMap(({ from, to }) => [from, to])])];
  const control =
    seen.length === 0
      ? []
      : await currentControl(tenant, of.organizationId, of.projectId, byNames(seen)).orderBy(
          asc(controlPoints.name),
        );
  const named = request.datum.points && new Set(request.datum.points);
  return {
    network: {
      points: control.map((row) => networkPoint(row, request.datum.kind, named, shot.has(row.point.name))),
      setups: networkSetups,
      levelDifferences: runs.map(({ run, section, ...difference }) => difference),
      positions: [],
      baselines: [],
      surroundings: surroundingsOf(project),
      snooping: request.snooping,
    },
    control: control.map(({ point, version }) => ({
      name: point.name,
      version: version.version,
      status: point.status,
    })),
    setups: rows.map(({ setup, result }) => ({
      id: setup.id,
      clientId: setup.clientId,
      station: setup.station,
      resultVersion: setup.resultVersion,
      state: setup.state,
      verdict: setup.verdict,
      atmosphereKnown: result.ppm !== null,
    })),
    levelRuns: [...new Map(runs.map(({ run }) => [run.id, { id: run.id, clientId: run.clientId }])).values()],
    ambiguous: found
      .filter(({ result }) => result.identification?.ambiguous)
      .map(({ setup }) => setup.clientId),
    unseen: [...(named ?? [])].filter((name) => !seen.includes(name)),
  };
}

/** Differences of the level runs of a request. */
async function wantedRuns(tenant: Tenant, of: Of, { levelRuns, since, until }: AdjustmentRequest) {
  if (levelRuns === null) return [];
  const named = levelRuns === 'all' ? undefined : inArray(levelRunRows.id, [...levelRuns]);
  const differences = await runDifferences(tenant, of, named);
  return differences.filter(({ run }) => {
    const at = new Date(run.observedAt);
    return (since === null || at >= new Date(since)) && (until === null || at < new Date(until));
  });
}

/** Shots of the setups of a request, of strays and left-out ones too: all are read. */
async function countShots(
  { db }: Tenant,
  { organizationId, projectId }: Of,
  request: AdjustmentRequest,
): Promise<number> {
  const [{ shots }] = await db
    .select({ shots: count() })
    .from(setups)
    .innerJoin(
      observations,
      and(eq(observations.organizationId, setups.organizationId), eq(observations.setupId, setups.rootId)),
    )
    .where(and(eq(setups.organizationId, organizationId), eq(setups.projectId, projectId), wanted(request)));
  return shots;
}

function requireBounded(observations: number): void {
  if (observations <= MOST_OBSERVATIONS) return;
  const detail = `${observations} shots and levelled differences fit what was asked for; ${MOST_OBSERVATIONS} are the most.`;
  throw new Problem('adjustment_too_large', detail);
}

/** Setups of a request, oldest first, each with its present result. */
function wantedSetups({ db }: Tenant, { organizationId, projectId }: Of, request: AdjustmentRequest) {
  return db
    .select({ setup: setups, result: setupResults.result })
    .from(setups)
    .innerJoin(
      setupResults,
      and(
        eq(setupResults.organizationId, setups.organizationId),
        eq(setupResults.setupId, setups.id),
        eq(setupResults.version, setups.resultVersion),
      ),
    )
    .where(and(eq(setups.organizationId, organizationId), eq(setups.projectId, projectId), wanted(request)))
    .orderBy(asc(setups.observedAt), asc(setups.id));
}

/** Named setups whatever became of them since; `all` are those that nobody has taken back. */
function wanted({ setups: which, since, until }: AdjustmentRequest): SQL | undefined {
  return and(
    which === 'all' ? notInArray(setups.state, [...TAKEN_BACK]) : inArray(setups.id, which),
    since === null ? undefined : gte(setups.observedAt, since),
    until === null ? undefined : lt(setups.observedAt, until),
  );
}

/**
 * All shots under the setups that they were sent in with. Shots of a check are sets of their own, counted on behind
 * those of the setup: meaned with them, a drift between the two would not show. Targets that the hub found are not in
 * them.
 */
async function shotsOf(
  { db }: Tenant,
  { organizationId }: Of,
  rows: readonly { setup: { rootId: string } }[],
): Promise<Map<string, ObservedShot[]>> {
  const roots = [...new Set(rows.map(({ setup }) => setup.rootId))];
  if (roots.length === 0) return new Map();
  const found = await db
    .select({ observation: observations, checkedAt: setupChecks.observedAt })
    .from(observations)
    .leftJoin(
      setupChecks,
      and(
        eq(setupChecks.organizationId, observations.organizationId),
        eq(setupChecks.id, observations.checkId),
      ),
    )
    .where(and(eq(observations.organizationId, organizationId), inArray(observations.setupId, roots)))
    .orderBy(asc(observations.setupId), asc(setupChecks.observedAt), asc(observations.seq));
  const shots = new Map<string, ObservedShot[]>();
  const sets = new Map<string, number>();
  const counts = new Map<string, number>();
  // Orientation shots first: they keep the numbers of their sets.
  const inTurn = [...found].sort((a, b) => turn(a.observation) - turn(b.observation));
  for (const { observation } of inTurn) {
    const { setupId, checkId, purpose, set } = observation;
    const key = [setupId, checkId, purpose, set].join('\n');
    let number = sets.get(key);
    if (number === undefined) {
      number = purpose === 'orient' ? set : (counts.get(setupId) ?? 0) + 1;
      sets.set(key, number);
      counts.set(setupId, Math.max(number, counts.get(setupId) ?? 0));
    }
    const shot = { ...asShot(observation), set: number };
    const own = shots.get(setupId);
    if (own) own.push(shot);
    else shots.set(setupId, [shot]);
  }
  return shots;
}

function turn({ purpose, checkId }: { purpose: string; checkId: string | null }): number {
  return purpose === 'orient' ? 0 : checkId === null ? 1 : 2;
}

/**
 * A control point in the network: part of the datum where it is named, or where it is trusted and none is.
 *
 * @param shot whether a setup saw it; a level alone says nothing of where it stands in plan
 */
function networkPoint(
  { point, version }: CurrentControl,
  kind: AdjustmentRequest['datum']['kind'],
  named: ReadonlySet<string> | null,
  shot: boolean,
): NetworkPoint {
  const takesPart = named ? named.has(point.name) : point.status === 'trusted';
  const datum: CoordinateDatum = takesPart ? kind : 'new';
  return {
    name: point.name,
    easting: version.easting,
    northing: version.northing,
    elevation: version.elevation,
    horizontalDatum: shot ? datum : 'new',
    verticalDatum: version.elevation === null ? 'new' : datum,
    horizontalSigma: version.sigmaHorizontal,
    verticalSigma: version.sigmaVertical,
  };
}
