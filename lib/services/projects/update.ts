import { and, eq } from 'drizzle-orm';
import { databaseFault } from '@/db/faults';
import { projects, toleranceClasses } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { limitColumns } from '@/lib/services/levelRuns/limit';
import { record } from '@/lib/services/record';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/projects';
import { classRows, loadClasses } from './classes';
import { loadProject, type ProjectRow } from './load';
import { presentProject } from './present';

/** Changes what may change of a project; results that stand keep the settings they were computed with. */
export async function updateProject(
  context: VerbContext,
  { params, body }: { params: { projectId: string }; body: JsonOf<typeof contract.updateProject> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const before = await loadProject(tenant, organizationId, params.projectId, true);
  const length = new Lengths(before.lengthUnit);
  const row: ProjectRow = {
    ...before,
    name: body.name ?? before.name,
    combinedFactor: body.combinedFactor ?? before.combinedFactor,
    siteElevation:
      body.siteElevation === undefined
        ? before.siteElevation
        : body.siteElevation === null
          ? null
          : length.in(body.siteElevation),
    refraction: body.refraction?.coefficient ?? before.refraction,
    refractionSigma: body.refraction?.sigma ?? before.refractionSigma,
    setupValidMinutes: body.setupValidMinutes ?? before.setupValidMinutes,
    displayDecimals: body.displayDecimals ?? before.displayDecimals,
    ...(body.levelLimit === undefined ? {} : limitColumns(body.levelLimit)),
    updatedAt: runtime.now().toISOString(),
  };
  if (body.controlSigma) {
    row.controlSigmaHorizontal = length.in(body.controlSigma.horizontal);
    row.controlSigmaVertical = length.in(body.controlSigma.vertical);
  }
  if (body.positionSigma !== undefined) {
    row.positionSigmaHorizontal = body.positionSigma && length.in(body.positionSigma.horizontal);
    row.positionSigmaVertical = body.positionSigma && length.in(body.positionSigma.vertical);
  }
  try {
    await tenant.db
      .update(projects)
      .set(row)
      .where(and(eq(projects.organizationId, organizationId), eq(projects.id, row.id)));
  } catch (error) {
    if (databaseFault(error)?.constraint === 'projects_name') {
      throw new Problem('name_taken', `A project named ${row.name} exists.`);
    }
    throw error;
  }
  if (body.toleranceClasses) {
    const rows = classRows(organizationId, row.id, body.toleranceClasses, row.lengthUnit);
    await tenant.db
      .delete(toleranceClasses)
      .where(
        and(eq(toleranceClasses.organizationId, organizationId), eq(toleranceClasses.projectId, row.id)),
      );
    await tenant.db.insert(toleranceClasses).values(rows);
  }
  record(context, caller, {
    type: 'project.changed',
    subject: row.id,
    projectId: row.id,
    data: { changed: Object.keys(body) },
  });
  return presentProject(row, await loadClasses(tenant, organizationId, [row.id]));
}
