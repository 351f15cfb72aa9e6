import { sql } from 'drizzle-orm';
import type * as z from 'zod';
import type { VerbContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { loadProject } from '@/lib/services/projects/load';
import { lastAgreed } from '@/lib/services/setups/checks';
import { type CheckRow, loadSetup, type SetupRow } from '@/lib/services/setups/load';
import { statusOf } from '@/lib/services/setups/present';
import type { Words } from '@/lib/services/setups/words';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import type { Affected } from '@/openapi/schemas/affected';
import { loadAffected } from './items';
import { presentAffected, type Since } from './present';

type Read = typeof contract.getSetupAffected;

/** What hangs on a setup and its refits, which stand on the same tripod, since it last agreed with a check. */
export async function readSetupAffected(
  { tenant, caller, runtime }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
): Promise<z.output<typeof Affected>> {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { setup, checks } = await loadSetup(tenant, organizationId, project.id, params.setupId);
  const since = sinceOf(setup, checks);
  const page = await loadAffected(
    tenant,
    {
      organizationId,
      projectId: project.id,
      setups: sql`s.root_id = ${setup.rootId}`,
      told: sql`s.id <> ${setup.id} and s.state <> 'superseded'`,
      benchmark: null,
      since: since.at,
    },
    ['affected-setup', project.id, setup.id],
    query,
  );
  const status = statusOf(setup, runtime.now());
  const subject = { kind: 'setup' as const, name: setup.station, status };
  return presentAffected(project.id, subject, since, standing(setup, status), page);
}

/** The last check that agreed before it was withdrawn; where there is none, nothing is sure. */
function sinceOf(setup: SetupRow, checks: readonly CheckRow[]): Since {
  const end = setup.withdrawnAt === null ? Number.POSITIVE_INFINITY : Date.parse(setup.withdrawnAt);
  const last = lastAgreed(checks.filter(({ observedAt }) => Date.parse(observedAt) <= end));
  if (!last) {
    const text = `No check has agreed since ${setup.station} was observed at ${asMoment(setup.observedAt)}: everything from it is affected.`;
    return { at: null, checkId: null, setupId: setup.id, text };
  }
  const check = last.purpose === 'closing' ? 'closing check' : 'check';
  return {
    at: last.observedAt,
    checkId: last.id,
    setupId: setup.id,
    text: `Since the ${check} at ${asMoment(last.observedAt)}, which still agreed.`,
  };
}

function standing({ station }: SetupRow, status: string): Words[] {
  if (status !== 'released' && status !== 'expired') return [];
  return [
    {
      code: 'setup_stands',
      text: `${station} is ${status} and not withdrawn: this is what would be affected.`,
      action: `Withdraw ${station} if it has moved.`,
    },
  ];
}
