import type * as z from 'zod';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import type { SetupWatch } from '@/openapi/schemas/setup';
import { type CheckRow, loadSetup } from './load';
import { presentCheck, statusOf } from './present';
import { watchWords } from './watchWords';

type Read = typeof contract.getSetupChecks;

/** A setup's checks over time, with what they say of it. */
export async function readSetupChecks(
  { tenant, caller, runtime }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
): Promise<z.output<typeof SetupWatch>> {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const { setup, checks } = await loadSetup(tenant, caller.organizationId, project.id, params.setupId);
  const length = new Lengths(query.length ?? project.lengthUnit);
  const status = statusOf(setup, runtime.now());
  const last = lastAgreed(checks);
  return {
    setupId: setup.id,
    station: setup.station,
    status,
    observedAt: asMoment(setup.observedAt),
    validUntil: asMomentOrNull(setup.validUntil),
    lastAgreed: last && { checkId: last.id, observedAt: asMoment(last.observedAt) },
    reasons: watchWords(setup, checks, status, length),
    checks: checks.map((check) => presentCheck(check, length)),
    units: { length: length.unit },
  };
}

/** The check that agreed last, of checks in the order that they were observed in. */
export function lastAgreed(checks: readonly CheckRow[]): CheckRow | null {
  return checks.findLast(({ agreed }) => agreed) ?? null;
}
