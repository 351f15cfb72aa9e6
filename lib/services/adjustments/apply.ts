import { and, asc, eq, inArray } from 'drizzle-orm';
import type * as z from 'zod';
import { bulkInsert } from '@/db/bulk';
import { adjustments, controlPoints, controlPointVersions, setups } from '@/db/schema';
import { standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { greatMove } from '@/lib/compute/survey/controlMove';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { differences } from '@/lib/services/control/differences';
import { type CurrentControl, lockedControl } from '@/lib/services/control/load';
import { moveText } from '@/lib/services/control/moves';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import { problemItem } from '@/openapi/problemItem';
import type { AdjustmentApplied } from '@/openapi/schemas/adjustment';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { type AdjustmentResultRow, type LoadedResult, loadResult } from './load';
import { presentCoordinates } from './present';
import { type KeptPoint, TAKEN_BACK, type UsedSetup } from './result';
import { APPLY_CAUTIONS } from './words';

type Apply = typeof contract.applyAdjustment;
type Body = NonNullable<JsonOf<Apply>>;

const insert = bulkInsert({ controlPointVersions });

/** A version never claims to be better than that, m: what is held by nothing but figures is still a mark. */
const LEAST_SIGMA = 1e-5;

/** Makes the adjusted coordinates new versions of the control, once. */
export async function applyAdjustment(
  context: VerbContext,
  { params, query, body = {} }: { params: ParamsOf<Apply>; query: QueryOf<Apply>; body: JsonOf<Apply> },
): Promise<z.output<typeof AdjustmentApplied>> {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const loaded = await loadResult(tenant, organizationId, project.id, params.adjustmentId, true);
  const { adjustment, result } = loaded;
  requireApplicable(loaded, caller.personId, body);
  // Setups before control, as uploads lock them.
  const changedSetups = await setupsChanged(context, result);
  const names = result.input.control.map(({ name }) => name);
  const locked = await lockedControl(tenant, organizationId, project.id, names);
  const present = new Map(locked.map((row) => [row.point.name, row]));
  requireCurrent([...changedSetups, ...controlChanged(result, present)]);
  const length = new Lengths(query.length ?? project.lengthUnit);
  const points = chosenPoints(result, body.points);
  const now = runtime.now().toISOString();
  const rows = points.map((point) => {
    const control = present.get(point.name)!;
    return { point, before: control.version, row: versionRow(point, control, project.lengthUnit) };
  });
  const changed = rows.filter(({ before, row }) =>
    differences(before, row).some((field) => field !== 'sigma'),
  );
  requireMovesMeant(changed, body, length);

  await insert(tenant, {
    controlPointVersions: changed.map(({ row }) => ({
      ...row,
      adjustmentId: adjustment.id,
      createdBy: caller.name,
      createdAt: now,
    })),
  });
  for (const { row } of changed) {
    tenant.defer(
      tenant.db
        .update(controlPoints)
        .set({ currentVersion: row.version, updatedAt: now })
        .where(
          and(
            eq(controlPoints.organizationId, organizationId),
            eq(controlPoints.projectId, project.id),
            eq(controlPoints.name, row.name),
          ),
        )
        .execute(),
    );
  }
  await tenant.db
    .update(adjustments)
    .set({ appliedAt: now, appliedBy: caller.name, appliedNote: body.note ?? null })
    .where(and(eq(adjustments.organizationId, organizationId), eq(adjustments.id, adjustment.id)));
  record(
    context,
    caller,
    {
      type: 'adjustment.applied',
      subject: adjustment.id,
      projectId: project.id,
      data: { name: adjustment.name, points: changed.length, note: body.note },
    },
    ...changed.map(({ row }) => ({
      type: 'control.revised' as const,
      subject: row.name,
      projectId: project.id,
      data: { version: row.version, adjustmentId: adjustment.id },
    })),
  );
  const written = new Set(changed.map(({ row }) => row.name));
  return {
    adjustmentId: adjustment.id,
    points: changed.map(({ point, row }) => ({
      name: row.name,
      version: row.version,
      shift: presentCoordinates(point.shift, length),
    })),
    unchanged: result.input.control.flatMap(({ name }) => (written.has(name) ? [] : name)),
    cautions: [...APPLY_CAUTIONS],
    units: { length: length.unit },
  };
}

/** A pass may be applied by whoever asked for it; a hold by another person with a note; a fail never; all once. */
function requireApplicable({ adjustment, result }: LoadedResult, personId: string, { note }: Body): void {
  const refuse = (detail: string) => new Problem('adjustment_not_applicable', detail);
  if (adjustment.appliedAt !== null) throw refuse(`${adjustment.appliedBy} has applied it already.`);
  if (result.verdict === 'fail' || !result.result.converged) throw refuse('The adjustment fails.');
  if (result.verdict !== 'hold') return;
  if (!note) throw invalid('/note', 'note_required');
  if (adjustment.createdByPersonId === personId) {
    const detail = 'An adjustment on hold is applied with a note by somebody other than who asked for it.';
    throw new Problem('second_person_wanted', detail);
  }
}

/** Setups that were used and do not stand as they did; they are locked. Level runs never change. */
async function setupsChanged(
  { tenant, caller }: VerbContext,
  { input }: AdjustmentResultRow,
): Promise<ProblemItem[]> {
  if (input.setups.length === 0) return [];
  const rows = await tenant.db
    .select({
      id: setups.id,
      resultVersion: setups.resultVersion,
      state: setups.state,
      verdict: setups.verdict,
    })
    .from(setups)
    .where(
      and(
        eq(setups.organizationId, caller.organizationId),
        inArray(
          setups.id,
          input.setups.map(({ id }) => id),
        ),
      ),
    )
    .orderBy(asc(setups.id))
    .for('share');
  const present = new Map(rows.map((row) => [row.id, row]));
  return input.setups.flatMap((used) => {
    const change = changeOf(used, present.get(used.id)!);
    return change ? problemItem(`/setups/${used.id}`, 'setup_changed', `${used.clientId} ${change}`) : [];
  });
}

function changeOf(
  used: UsedSetup,
  { state, resultVersion, verdict }: Pick<UsedSetup, 'state' | 'resultVersion' | 'verdict'>,
): string | null {
  if (state !== used.state && TAKEN_BACK.has(state))
    return state === 'withdrawn' ? 'was withdrawn since.' : 'was refitted since.';
  if (resultVersion !== used.resultVersion)
    return `was checked since: its verdict was ${used.verdict} and is ${verdict} now.`;
  return null;
}

/** Control that was used and has another version or status now. */
function controlChanged(
  { input }: AdjustmentResultRow,
  present: ReadonlyMap<string, CurrentControl>,
): ProblemItem[] {
  return input.control.flatMap(({ name, version, status }) => {
    const { point } = present.get(name)!;
    const says = (detail: string) => problemItem(`/points/${name}`, 'control_point_changed', detail);
    if (point.currentVersion !== version)
      return says(
        `${name} has version ${point.currentVersion}; the adjustment started from version ${version}.`,
      );
    if (point.status !== status) return says(`${name} was ${status} and is ${point.status} now.`);
    return [];
  });
}

function requireCurrent(errors: readonly ProblemItem[]): void {
  if (errors.length === 0) return;
  const details = errors.map(({ detail }) => detail).join(' ');
  throw new Problem('adjustment_outdated', details, { errors: [...errors] });
}

/** Points of the control that were found, all or those named. */
function chosenPoints(
  { result, input }: AdjustmentResultRow,
  names: readonly string[] | undefined,
): KeptPoint[] {
  const control = new Set(input.control.map(({ name }) => name));
  const found = result.points.filter(
    (point) =>
      control.has(point.name) &&
      ((point.easting !== null && point.horizontalDatum !== 'held') ||
        (point.elevation !== null && point.verticalDatum !== 'held')),
  );
  if (names === undefined) return found;
  const byName = new Map(found.map((point) => [point.name, point]));
  const missing = names.flatMap((name, i) =>
    byName.has(name)
      ? []
      : problemItem(`/points/${i}`, 'point_unknown', `The adjustment found nothing new for ${name}.`),
  );
  if (missing.length > 0) throw invalidItems(missing);
  return [...new Set(names)].map((name) => byName.get(name)!);
}

/** The next version: what was found anew, the rest as it was. */
function versionRow(
  { covariance, ...point }: KeptPoint,
  { version: before }: CurrentControl,
  unit: Lengths['unit'],
) {
  const inPlan = point.easting !== null && point.horizontalDatum !== 'held';
  const inHeight = point.elevation !== null && point.verticalDatum !== 'held';
  const axes = standardEllipse(covariance[0], covariance[4], covariance[1]);
  const easting = inPlan ? point.easting! : before.easting;
  const northing = inPlan ? point.northing! : before.northing;
  const elevation = inHeight ? point.elevation : before.elevation;
  const sigmaHorizontal = inPlan ? Math.max(LEAST_SIGMA, axes.semiMajor) : before.sigmaHorizontal;
  const sigmaVertical = inHeight ? Math.max(LEAST_SIGMA, point.elevationSigma) : before.sigmaVertical;
  const length = new Lengths(unit);
  return {
    ...before,
    version: before.version + 1,
    easting,
    northing,
    elevation,
    sigmaHorizontal,
    sigmaVertical,
    submitted: {
      unit,
      easting: length.out(easting),
      northing: length.out(northing),
      elevation: length.outOrNull(elevation),
      sigma: { horizontal: length.out(sigmaHorizontal), vertical: length.out(sigmaVertical) },
    },
  };
}

/** A mark that would move by more than a metre is nearly always another mark, or another unit. */
function requireMovesMeant(
  changed: readonly { before: CurrentControl['version']; row: ReturnType<typeof versionRow> }[],
  { confirmMoves }: Body,
  length: Lengths,
): void {
  if (confirmMoves) return;
  const errors = changed.flatMap(({ before, row }) => {
    const move = greatMove(before, row);
    const fix = 'Look for a misnamed target first. Where the move is meant, repeat with confirmMoves true.';
    return move
      ? problemItem(
          `/points/${row.name}`,
          'control_point_moves',
          `${row.name} ${moveText(move, length)}.`,
          fix,
        )
      : [];
  });
  if (errors.length > 0) throw invalidItems(errors);
}
