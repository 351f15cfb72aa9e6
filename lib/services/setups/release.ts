import { and, desc, eq } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import { setupReleases, setups } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { invalid, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { currentLayer } from '@/lib/services/layers/load';
import { isSameOffset } from '@/lib/services/layers/offset';
import { Lengths } from '@/lib/services/lengths';
import { utcInstant } from '@/lib/services/moments';
import { loadProject, type ProjectRow } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { Instant } from '@/openapi/schemas/primitives';
import { CLOCK_SLACK_MS } from './force';
import { type LoadedSetup, loadSetup, type ReleaseRow, type SetupRow } from './load';
import { presentSetup } from './present';

type Release = typeof contract.releaseSetup;

const insert = bulkInsert({ setupReleases });

/**
 * Puts a setup in force. A pass may be released by whoever submitted it; a hold by another person with a note; a fail
 * never. With a machine the release binds layer, surface and offset.
 */
export async function releaseSetup(
  context: VerbContext,
  { params, query, body }: { params: ParamsOf<Release>; query: QueryOf<Release>; body: JsonOf<Release> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const loaded = await loadSetup(tenant, organizationId, project.id, params.setupId, true);
  const { setup } = loaded;
  requireReleasable(loaded, caller.personId, body.note);
  const bound = await bind(context, project, body);
  const now = runtime.now();
  const effectiveAt = effectiveFrom(body.releasedAt, setup, now);
  const minutes = body.validMinutes ?? project.setupValidMinutes;
  // A device's clock may run ahead of the hub's: the later of the two counts.
  const from = Math.max(new Date(effectiveAt).getTime(), new Date(setup.observedAt).getTime());
  const validUntil = new Date(from + minutes * 60_000).toISOString();
  const row: ReleaseRow = {
    organizationId,
    setupId: setup.id,
    seq: await nextTurn(tenant, organizationId, setup.id),
    action: 'release',
    machine: body.machine ?? null,
    ...bound,
    note: body.note ?? null,
    effectiveAt,
    recordedAt: now.toISOString(),
    validUntil,
    personId: caller.personId,
    actorName: caller.name,
  };
  await insert(tenant, { setupReleases: [row] });
  const state = {
    state: 'released' as const,
    releasedAt: effectiveAt,
    // An earlier release that runs longer stands.
    validUntil: later(setup.validUntil, validUntil),
    withdrawnAt: null,
  };
  await tenant.db
    .update(setups)
    .set(state)
    .where(and(eq(setups.organizationId, organizationId), eq(setups.id, setup.id)));
  record(context, caller, {
    type: 'setup.released',
    subject: setup.id,
    projectId: project.id,
    data: { station: setup.station, machine: row.machine, layer: row.layerName, validUntil, note: row.note },
  });
  const released = { ...loaded, setup: { ...setup, ...state }, release: row };
  return presentSetup(released, new Lengths(query.length ?? project.lengthUnit), now);
}

function later(known: string | null, instant: string): string {
  return known !== null && new Date(known) > new Date(instant) ? known : instant;
}

function requireReleasable(
  { setup, result: { result } }: LoadedSetup,
  personId: string,
  note: string | undefined,
): void {
  const refuse = (detail: string) => new Problem('setup_not_releasable', detail);
  if (setup.state === 'withdrawn') throw refuse('The setup was withdrawn: set up anew, or refit it.');
  if (setup.state === 'superseded') throw refuse('The setup is superseded: release its refit.');
  if (setup.verdict === 'fail') throw refuse('The setup fails: shoot again or refit.');
  if (!result.orientationDetermined)
    throw refuse('The setup has no orientation: nothing can be shot from it.');
  if (result.identification?.ambiguous) {
    throw refuse(
      'More than one assignment of targets fits the shots: let a shot by name decide, or name them all.',
    );
  }
  if (result.others.length > 0) throw refuse('More than one station fits the shots: shoot a further mark.');
  if (setup.verdict !== 'hold') return;
  if (!note) throw invalid('/note', 'note_required');
  if (setup.submitterPersonId === personId) throw new Problem('second_person_wanted');
}

/** The layer that a release to a machine binds, with its surface and offset. */
async function bind(context: VerbContext, project: ProjectRow, body: JsonOf<Release>) {
  const none = { layerName: null, layerVersion: null, surfaceSha256: null, offset: null };
  if (body.layer === undefined) {
    if (body.machine !== undefined)
      throw invalid('/layer', 'release_incomplete', `${body.machine} needs the layer that it will cut.`);
    for (const field of ['surfaceSha256', 'offset'] as const) {
      if (body[field] !== undefined)
        throw invalid(`/${field}`, 'release_incomplete', `${field} needs its layer.`);
    }
    return none;
  }
  const layer = await currentLayer(context.tenant, project, body.layer);
  if (!layer) throw invalid('/layer', 'layer_unknown', `There is no layer ${body.layer} in this project.`);
  const length = new Lengths(project.lengthUnit);
  if (body.offset !== undefined && !isSameOffset(length.in(body.offset), layer.offset)) {
    const detail = `${body.offset} ${length.name} is not the layer's offset of ${length.text(layer.offset)}.`;
    throw invalid('/offset', 'offset_mismatch', detail);
  }
  if (body.surfaceSha256 !== undefined && body.surfaceSha256 !== layer.surfaceSha256) {
    throw invalid('/surfaceSha256', 'surface_mismatch', `The layer's surface is ${layer.surfaceSha256}.`);
  }
  return {
    layerName: layer.name,
    layerVersion: layer.version,
    surfaceSha256: Buffer.from(layer.surfaceSha256, 'hex'),
    offset: layer.offset,
  };
}

/** When a release took force: now, or when it was given on site before the hub was told. */
function effectiveFrom(releasedAt: string | undefined, setup: SetupRow, now: Date): string {
  if (releasedAt === undefined) return now.toISOString();
  const parsed = Instant.safeParse(releasedAt);
  if (!parsed.success) throw invalid('/releasedAt', 'time_invalid');
  const at = utcInstant(releasedAt);
  const ahead = new Date(at).getTime() - now.getTime();
  if (ahead > 0 && ahead <= CLOCK_SLACK_MS) return now.toISOString();
  if (ahead > 0 || new Date(at) < new Date(setup.observedAt)) {
    throw invalid(
      '/releasedAt',
      'time_out_of_order',
      'A release lies after the observation and not after now.',
    );
  }
  return at;
}

/** The place of the next release or withdrawal in a setup's order. */
export async function nextTurn(tenant: Tenant, organizationId: string, setupId: string): Promise<number> {
  const [last] = await tenant.db
    .select({ seq: setupReleases.seq })
    .from(setupReleases)
    .where(and(eq(setupReleases.organizationId, organizationId), eq(setupReleases.setupId, setupId)))
    .orderBy(desc(setupReleases.seq))
    .limit(1);
  return (last?.seq ?? 0) + 1;
}
