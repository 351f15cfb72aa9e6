import { databaseFault } from '@/db/faults';
import { projects, toleranceClasses } from '@/db/schema';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { invalid, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { limitColumns } from '@/lib/services/levelRuns/limit';
import { record } from '@/lib/services/record';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/projects';
import { classRows, loadClasses } from './classes';
import { presentProject } from './present';

/** Control without a stated accuracy: 1.5 mm, 0.005 ft, an axis, a site's own tight network (common practice). */
const CONTROL_SIGMA = 0.0015;
/** A shift (common practice). */
const VALID_MINUTES = 720;

/** Opens a project: its unit and frame stand for good. */
export async function createProject(
  context: VerbContext,
  { body }: { body: JsonOf<typeof contract.createProject> },
) {
  const { tenant, caller, runtime } = context;
  if (body.frame.kind !== 'local') {
    throw invalid(
      '/frame/kind',
      'frame_unsupported',
      `Frames of kind ${body.frame.kind} are not computed yet.`,
    );
  }
  const length = new Lengths(body.lengthUnit);
  const now = runtime.now().toISOString();
  const id = runtime.uuid();
  const row = {
    organizationId: caller.organizationId,
    id,
    name: body.name,
    lengthUnit: body.lengthUnit,
    frame: body.frame,
    combinedFactor: body.combinedFactor ?? 1,
    siteElevation: body.siteElevation == null ? null : length.in(body.siteElevation),
    refraction: body.refraction?.coefficient ?? DEFAULT_SURROUNDINGS.refraction,
    refractionSigma: body.refraction?.sigma ?? DEFAULT_SURROUNDINGS.refractionSigma,
    controlSigmaHorizontal: body.controlSigma ? length.in(body.controlSigma.horizontal) : CONTROL_SIGMA,
    controlSigmaVertical: body.controlSigma ? length.in(body.controlSigma.vertical) : CONTROL_SIGMA,
    positionSigmaHorizontal: body.positionSigma ? length.in(body.positionSigma.horizontal) : null,
    positionSigmaVertical: body.positionSigma ? length.in(body.positionSigma.vertical) : null,
    setupValidMinutes: body.setupValidMinutes ?? VALID_MINUTES,
    displayDecimals: body.displayDecimals ?? (body.lengthUnit === 'm' ? 3 : 2),
    ...limitColumns(body.levelLimit ?? null),
    createdAt: now,
    updatedAt: now,
  };
  try {
    await tenant.db.insert(projects).values(row);
  } catch (error) {
    if (databaseFault(error)?.constraint === 'projects_name') {
      throw new Problem('name_taken', `A project named ${body.name} exists.`);
    }
    throw error;
  }
  await tenant.db
    .insert(toleranceClasses)
    .values(classRows(caller.organizationId, id, body.toleranceClasses, body.lengthUnit));
  record(context, caller, { type: 'project.created', subject: id, projectId: id, data: { name: body.name } });
  return presentProject(row, await loadClasses(tenant, caller.organizationId, [id]));
}
