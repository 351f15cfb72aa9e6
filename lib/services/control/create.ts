import { and, eq } from 'drizzle-orm';
import type * as z from 'zod';
import { bulkInsert } from '@/db/bulk';
import { controlPoints, controlPointVersions, type SubmittedControl } from '@/db/schema';
import { greatMove } from '@/lib/compute/survey/controlMove';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { loadProject, type ProjectRow } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import { refusedItems } from '@/lib/services/refusedItems';
import { problemItem } from '@/openapi/problemItem';
import type { ControlReceipt } from '@/openapi/schemas/control';
import { differences } from './differences';
import type { Entries, Entry } from './entries';
import { lockedControl } from './load';
import { MOVE_FIX, moveText } from './moves';

const insert = bulkInsert({ controlPoints, controlPointVersions });

/** Brings in control: new points, and new versions of changed ones where that was asked for. */
export async function createControlPoints(
  context: VerbContext,
  projectId: string,
  readEntries: () => Entries,
  revise: boolean,
): Promise<z.output<typeof ControlReceipt>> {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, projectId);
  const { unit, unitPointer, confirmUnits, entries, refused } = readEntries();
  const foot = otherFoot(project.lengthUnit, unit, confirmUnits, unitPointer);
  if (foot) throw new Problem('invalid', foot.detail, { errors: [foot] });

  const names = [...new Set(entries.map(({ point }) => point.name))];
  const present = await lockedControl(tenant, organizationId, projectId, names);
  const known = new Map(present.map((row) => [row.point.name, row]));
  const points: z.output<typeof ControlReceipt>['points'] = [];
  const written: ReturnType<typeof versionRow>[] = [];
  const seen = new Set<string>();
  const shown = new Lengths(project.lengthUnit);
  for (const entry of entries) {
    const { pointer, point } = entry;
    if (seen.has(point.name)) {
      refused.push(
        problemItem(`${pointer}/name`, 'name_repeated', `${point.name} stands twice in this submission.`),
      );
      continue;
    }
    seen.add(point.name);
    const before = known.get(point.name);
    const row = versionRow(entry, (before?.point.currentVersion ?? 0) + 1, unit, project, context);
    const differing = before ? differences(before.version, row) : [];
    const move = before ? greatMove(before.version, row) : null;
    if (before && differing.length === 0) {
      points.push({ pointer, name: point.name, outcome: 'unchanged', version: before.point.currentVersion });
    } else if (before && !revise) {
      refused.push(
        problemItem(
          pointer,
          'control_point_exists',
          `${point.name} exists with another ${differing.join(', ')}${move ? `, and ${moveText(move, shown)}` : ''}.`,
          move ? MOVE_FIX : undefined,
        ),
      );
    } else if (move && !confirmUnits) {
      const detail = `${point.name} ${moveText(move, shown)}.`;
      refused.push(problemItem(pointer, 'control_point_moves', detail, MOVE_FIX));
    } else {
      written.push(row);
      points.push({
        pointer,
        name: point.name,
        outcome: before ? 'revised' : 'created',
        version: row.version,
      });
    }
  }
  if (points.length === 0) throw new Problem('nothing_accepted', undefined, { errors: refused });

  const now = runtime.now().toISOString();
  const created = written.filter((row) => row.version === 1);
  const revised = written.filter((row) => row.version > 1);
  await insert(tenant, {
    controlPoints: created.map(({ name }) => ({
      organizationId,
      projectId,
      name,
      currentVersion: 1,
      status: 'trusted' as const,
      updatedAt: now,
    })),
    controlPointVersions: written,
  });
  for (const { name, version } of revised) {
    tenant.defer(
      tenant.db
        .update(controlPoints)
        .set({ currentVersion: version, updatedAt: now })
        .where(
          and(
            eq(controlPoints.organizationId, organizationId),
            eq(controlPoints.projectId, projectId),
            eq(controlPoints.name, name),
          ),
        )
        .execute(),
    );
  }
  const count = (outcome: string) => points.filter((p) => p.outcome === outcome).length;
  const counts = { created: count('created'), revised: count('revised'), unchanged: count('unchanged') };
  if (written.length > 0) {
    record(
      context,
      caller,
      { type: 'control.imported', subject: projectId, projectId, data: counts },
      ...revised.map(({ name, version }) => ({
        type: 'control.revised' as const,
        subject: name,
        projectId,
        data: { version },
      })),
    );
  }
  return {
    counts: { ...counts, refused: refusedItems(refused) },
    points,
    refused,
  };
}

function versionRow(
  { point }: Entry,
  version: number,
  unit: SubmittedControl['unit'],
  project: ProjectRow,
  context: VerbContext,
) {
  const length = new Lengths(unit);
  const submitted: SubmittedControl = {
    unit,
    easting: point.easting,
    northing: point.northing,
    elevation: point.elevation ?? null,
    sigma: point.sigma ?? null,
  };
  return {
    organizationId: project.organizationId,
    projectId: project.id,
    name: point.name,
    version,
    easting: length.in(point.easting),
    northing: length.in(point.northing),
    elevation: point.elevation === undefined ? null : length.in(point.elevation),
    sigmaHorizontal: point.sigma ? length.in(point.sigma.horizontal) : project.controlSigmaHorizontal,
    sigmaVertical: point.sigma ? length.in(point.sigma.vertical) : project.controlSigmaVertical,
    kind: point.kind,
    description: point.description ?? null,
    submitted,
    createdBy: context.caller.name,
    createdAt: context.runtime.now().toISOString(),
  };
}
