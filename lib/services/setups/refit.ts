import { and, eq, sql } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import { setupChecks, setupResults, setups, toleranceClasses } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { IdentificationError } from '@/lib/compute/survey/identify';
import { ControlIndex } from '@/lib/compute/survey/identifyControl';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { StationError } from '@/lib/compute/survey/stationAdjustment';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { asMark, byNames, currentControl } from '@/lib/services/control/load';
import { Lengths } from '@/lib/services/lengths';
import { classLimits } from '@/lib/services/projects/classes';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { problemItem } from '@/openapi/problemItem';
import { type Compared, computeSetup, isAgreed, type SetupTask } from './compute';
import { identifyTargets, wordsOfNoIdentification } from './identification';
import { type CheckRow, type LoadedSetup, loadSetup, type SetupRow } from './load';
import { isNamed, type LaterCheck, loadObserved, type ObservedShot } from './observed';
import { presentSetup } from './present';
import { METHOD_VERSION, methodOf } from './result';

type Refit = typeof contract.refitSetup;

const insert = bulkInsert({ setups, setupResults, setupChecks });

/**
 * Computes a setup anew without some of its shots; the new one supersedes, what was left out stays visible. The checks
 * that came later judge the new fit too: a refit does not talk them away.
 */
export async function refitSetup(
  context: VerbContext,
  { params, query, body }: { params: ParamsOf<Refit>; query: QueryOf<Refit>; body: JsonOf<Refit> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const before = await loadSetup(tenant, organizationId, project.id, params.setupId, true);
  if (before.setup.state === 'superseded') {
    throw new Problem('conflict', 'This setup was refitted before: refit its successor.');
  }
  const { shots, later } = await loadObserved(tenant, before.setup);
  const unknown = body.exclude.flatMap((id, i) => {
    if (shots.some((shot) => shot.id === id)) return [];
    const owner = later.find((one) => one.shots.some((shot) => shot.id === id));
    const detail = owner
      ? `${id} belongs to the check ${owner.check.clientId}, which a newer check answers, not a refit.`
      : `The setup has no shot ${id}.`;
    return [problemItem(`/exclude/${i}`, 'shot_unknown', detail)];
  });
  if (unknown.length > 0) throw invalidItems(unknown);
  const excluded = [
    ...before.setup.excluded,
    ...body.exclude
      .filter((shot) => !before.setup.excluded.some((known) => known.shot === shot))
      .map((shot) => ({ shot, reason: body.reason })),
  ];
  const kept = shots.filter((shot) => !excluded.some((out) => out.shot === shot.id));
  const { result: earlier } = before.result;
  const shot = [...shots, ...later.flatMap((one) => one.shots)].flatMap(({ target }) => target ?? []);
  const names = [...new Set([...shot, ...(earlier.occupied ? [earlier.occupied.name] : [])])];
  const among = earlier.identification ? undefined : byNames(names);
  const marks = await currentControl(tenant, organizationId, project.id, among);
  const control = new Map(marks.map((row) => [row.point.name, asMark(row)]));
  let computed: ReturnType<typeof computeSetup>;
  try {
    computed = computeSetup({
      ...withTargets(kept, later, control, earlier),
      later: later.map((one) => one.shots),
      control,
      occupied: earlier.occupied && {
        mark: occupiedMark(control, earlier.occupied.name),
        instrumentHeight: earlier.occupied.instrumentHeight,
      },
      accuracy: earlier.accuracy,
      surroundings: earlier.surroundings,
      ppm: earlier.ppm,
      air: earlier.air,
      limits: await currentLimits(context, before),
      notes: earlier.notes.filter(({ code }) => ASSUMED.has(code)),
    });
  } catch (error) {
    if (error instanceof IdentificationError) {
      throw invalid('/exclude', 'not_identified', wordsOfNoIdentification(error).detail);
    }
    if (!(error instanceof StationError)) throw error;
    throw invalid('/exclude', 'setup_not_computable', 'What is left does not determine a station.');
  }
  const made = await write(context, before.setup, computed, later, excluded);
  record(context, caller, {
    type: 'setup.refitted',
    subject: made.setup.id,
    projectId: project.id,
    data: {
      supersedes: before.setup.id,
      exclude: body.exclude,
      reason: body.reason,
      verdict: made.setup.verdict,
    },
  });
  return presentSetup(made, new Lengths(query.length ?? project.lengthUnit), runtime.now());
}

/**
 * The shots that are left with their targets. Those of a setup by `identify` are identified anew, among the control as
 * it is now; every check by name since then decides with them.
 *
 * @throws IdentificationError where nothing fits any more
 */
function withTargets(
  kept: readonly ObservedShot[],
  later: readonly LaterCheck[],
  control: ReadonlyMap<string, ControlMark>,
  earlier: LoadedSetup['result']['result'],
): Pick<SetupTask, 'shots' | 'identification'> {
  const named = kept.filter(isNamed);
  if (!earlier.identification) return { shots: named };
  const { accuracy, surroundings, ppm } = earlier;
  const { identification, names } = identifyTargets(new ControlIndex(control.values()), {
    ...{ accuracy, surroundings, ppm, control },
    shots: kept.filter((shot) => !isNamed(shot)),
    named: [...named, ...later.flatMap(({ shots }) => shots)],
  });
  const found = kept.flatMap((shot): Shot[] => {
    const target = names.get(shot.id);
    return target === undefined ? [] : [{ ...shot, target }];
  });
  return { shots: [...found, ...named], identification };
}

/** @throws Problem where the mark was quarantined meanwhile: nothing stands on it any more */
function occupiedMark(control: ReadonlyMap<string, ControlMark>, name: string): ControlMark {
  const mark = control.get(name)!;
  if (mark.status !== 'quarantined') return mark;
  throw new Problem('conflict', `${name} is quarantined: nothing can be set up on it. Set up anew.`);
}

/** Notes on what was assumed when the setup came in; the others follow from the new fit. */
const ASSUMED = new Set([
  'atmosphere_unknown',
  'accuracy_default',
  'control_sigma_default',
  'compensator_off',
]);

/** The limits of the setup's class as they are now; as they were where the class is gone. */
async function currentLimits({ tenant, caller }: VerbContext, { setup, result }: LoadedSetup) {
  const [row] = await tenant.db
    .select()
    .from(toleranceClasses)
    .where(
      and(
        eq(toleranceClasses.organizationId, caller.organizationId),
        eq(toleranceClasses.projectId, setup.projectId),
        eq(toleranceClasses.name, setup.toleranceClass),
      ),
    );
  return row ? classLimits(row) : result.result.limits;
}

async function write(
  { tenant, caller, runtime }: VerbContext,
  before: SetupRow,
  { result, checks, later }: ReturnType<typeof computeSetup>,
  carried: readonly LaterCheck[],
  excluded: SetupRow['excluded'],
): Promise<LoadedSetup> {
  const { organizationId } = caller;
  const now = runtime.now().toISOString();
  const id = runtime.uuid();
  const setup: SetupRow = {
    ...before,
    id,
    clientId: await refitName(tenant, before),
    resultVersion: 1,
    verdict: result.verdict,
    state: 'computed',
    releasedAt: null,
    validUntil: null,
    withdrawnAt: null,
    supersedesId: before.id,
    supersededById: null,
    excluded,
    submittedBy: caller.name,
    submitterPersonId: caller.personId,
    createdAt: now,
  };
  const resultRow = {
    organizationId,
    setupId: id,
    version: 1,
    method: methodOf(result),
    methodVersion: METHOD_VERSION,
    result,
    computedAt: now,
  };
  type Origin = Pick<CheckRow, 'uploadId' | 'clientId' | 'purpose' | 'observedAt' | 'carriedFromId'>;
  const judged = (origin: Origin, { targets, drift }: Compared): CheckRow => ({
    ...origin,
    organizationId,
    id: runtime.uuid(),
    projectId: setup.projectId,
    setupId: id,
    agreed: isAgreed(targets),
    result: { targets, drift, tolerance: result.limits.residual, verdict: result.verdict },
    resultVersion: 1,
  });
  const { uploadId, observedAt } = setup;
  const own = { uploadId, observedAt, clientId: null, carriedFromId: null };
  const checkRows = [
    ...checks.map((check) => judged({ ...own, purpose: check.purpose }, check)),
    ...carried.flatMap(({ check }, i) => {
      const { uploadId, clientId, purpose, observedAt } = check;
      const origin = { uploadId, clientId, purpose, observedAt, carriedFromId: check.id };
      // Its marks may be quarantined by now: then it says nothing any more.
      return later[i].targets.length === 0 ? [] : judged(origin, later[i]);
    }),
  ];
  await insert(tenant, { setups: [setup], setupResults: [resultRow], setupChecks: checkRows });
  await tenant.db
    .update(setups)
    .set({ state: 'superseded', supersededById: id })
    .where(and(eq(setups.organizationId, organizationId), eq(setups.id, before.id)));
  return { setup, result: resultRow, checks: checkRows, release: null };
}

const REFIT = /\.r(\d{1,6})$/;

/** Refits are named after the setup that they come from: st-7, st-7.r1, st-7.r2; names that clients took are left. */
async function refitName(tenant: Tenant, { organizationId, projectId, clientId }: SetupRow): Promise<string> {
  const stem = clientId.replace(REFIT, '');
  const rows = await tenant.db
    .select({ name: setups.clientId })
    .from(setups)
    .where(
      and(
        eq(setups.organizationId, organizationId),
        eq(setups.projectId, projectId),
        sql`starts_with(${setups.clientId}, ${`${stem}.r`})`,
      ),
    );
  const numbers = rows.flatMap(({ name }) =>
    name.replace(REFIT, '') === stem ? Number(REFIT.exec(name)?.[1]) : [],
  );
  return `${stem}.r${Math.max(0, ...numbers) + 1}`;
}
