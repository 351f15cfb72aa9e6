'use client';

import { useRead } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { endOf, type SetupEnd } from '@/app/ui/setupEnd';
import type * as recordContracts from '@/openapi/contracts/record';
import type * as contracts from '@/openapi/contracts/setups';
import type { ShownSetup } from './SetupSheet';

export interface Ending {
  kind: SetupEnd;
  /** Each null where it is not told to this reader. */
  at: string | null;
  by: string | null;
  why: string | null;
}

const ACT = { withdrawn: 'setup.withdrawn', superseded: 'setup.refitted', expired: undefined } as const;

/** When, by whom and why a setup ended; null while it stands. Whoever may not see the audit learns less. */
export function useEnding(setup: ShownSetup, projectId: string): Ending | null {
  const kind = endOf(setup);
  const action = kind ? ACT[kind] : undefined;
  const audit = useRead<typeof recordContracts.listAuditEntries>(
    '/audit-entries',
    { query: { projectId, action, limit: 200 } },
    useCan('audit:read') && action !== undefined,
  );
  const crews = useCrews(setup, projectId);
  if (!kind) return null;
  if (kind === 'expired') return { kind, at: setup.validUntil, by: null, why: null };
  const subject = kind === 'superseded' ? setup.supersededBy : setup.id;
  const entry = audit.data?.data.find((one) => one.subject === subject);
  const why = entry?.details.note ?? entry?.details.reason;
  return {
    kind,
    at: entry?.occurredAt ?? (kind === 'withdrawn' ? (crews[0]?.openedAt ?? null) : null),
    by: entry?.actor.name ?? null,
    why: typeof why === 'string' ? why : null,
  };
}

/** The crews that have to answer, where the setup was withdrawn. */
export function useCrews(setup: ShownSetup, projectId: string) {
  const { data } = useRead<typeof contracts.listAcknowledgements>(
    '/projects/{projectId}/acknowledgements',
    { params: { projectId }, query: { limit: 200 } },
    useCan('acknowledgements:read') && setup.release !== null && endOf(setup) !== null,
  );
  return data?.data.filter(({ setupId }) => setupId === setup.id) ?? [];
}
