import { and, eq } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import { acknowledgements, setupReleases, setups } from '@/db/schema';
import { Problem } from '@/lib/problem';
import { presentAcknowledgement } from '@/lib/services/acknowledgements/present';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { loadSetup } from './load';
import { presentSetup } from './present';
import { nextTurn } from './release';
import { WITHDRAWAL_CAUTION } from './words';

type Withdraw = typeof contract.withdrawSetup;

const insert = bulkInsert({ setupReleases, acknowledgements });

/** Ends a setup's force and opens an acknowledgement for each machine that it was released to. */
export async function withdrawSetup(
  context: VerbContext,
  { params, query, body }: { params: ParamsOf<Withdraw>; query: QueryOf<Withdraw>; body: JsonOf<Withdraw> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const loaded = await loadSetup(tenant, organizationId, project.id, params.setupId, true);
  const { setup } = loaded;
  // A refit leaves machines on the old setup: it too can be withdrawn, as long as it was released.
  const wasReleased = setup.releasedAt !== null && setup.withdrawnAt === null;
  if (!wasReleased) throw new Problem('setup_not_in_force');
  const now = runtime.now().toISOString();
  const opened = (await machinesOf(context, setup.id)).map((machine) => ({
    organizationId,
    id: runtime.uuid(),
    projectId: project.id,
    setupId: setup.id,
    machine,
    reason: body.note ?? null,
    openedAt: now,
    acknowledgedAt: null,
    acknowledgedBy: null,
    note: null,
  }));
  await insert(tenant, {
    setupReleases: [
      {
        organizationId,
        setupId: setup.id,
        seq: await nextTurn(tenant, organizationId, setup.id),
        action: 'withdraw',
        machine: null,
        layerName: null,
        layerVersion: null,
        surfaceSha256: null,
        offset: null,
        note: body.note ?? null,
        effectiveAt: now,
        recordedAt: now,
        validUntil: null,
        personId: caller.personId,
        actorName: caller.name,
      },
    ],
    acknowledgements: opened,
  });
  const state = {
    state: setup.state === 'superseded' ? setup.state : ('withdrawn' as const),
    withdrawnAt: now,
  };
  await tenant.db
    .update(setups)
    .set(state)
    .where(and(eq(setups.organizationId, organizationId), eq(setups.id, setup.id)));
  record(context, caller, {
    type: 'setup.withdrawn',
    subject: setup.id,
    projectId: project.id,
    data: { station: setup.station, note: body.note ?? null, machines: opened.map(({ machine }) => machine) },
  });
  const length = new Lengths(query.length ?? project.lengthUnit);
  return {
    setup: presentSetup({ ...loaded, setup: { ...setup, ...state } }, length, runtime.now()),
    acknowledgements: opened.map((row) =>
      presentAcknowledgement({ row, station: setup.station, withdrawnBy: caller.name }),
    ),
    caution: WITHDRAWAL_CAUTION,
  };
}

/** Every machine that the setup was ever released to. */
async function machinesOf({ tenant, caller }: VerbContext, setupId: string): Promise<string[]> {
  const rows = await tenant.db
    .selectDistinct({ machine: setupReleases.machine })
    .from(setupReleases)
    .where(and(eq(setupReleases.organizationId, caller.organizationId), eq(setupReleases.setupId, setupId)));
  return rows.flatMap(({ machine }) => machine ?? []).sort();
}
