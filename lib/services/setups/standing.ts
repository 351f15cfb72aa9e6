import { and, eq, inArray } from 'drizzle-orm';
import { setups } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { FORCE_WORDS, voidedBy } from './force';
import type { SetupRow } from './load';
import type { Words } from './words';

/** Why nothing may be built any more on what was shot from a setup, however it stood then; null where it may. */
export function voidWords(
  setup: Pick<SetupRow, 'state' | 'verdict' | 'station' | 'withdrawnAt'>,
): Words | null {
  const fault = voidedBy(setup);
  if (fault) return FORCE_WORDS[fault];
  if (setup.withdrawnAt === null) return null;
  return {
    code: 'setup_withdrawn',
    text: `${setup.station} was withdrawn: what was shot from it is kept and does not count.`,
    action: 'Shoot again from a setup that stands.',
  };
}

/** The same for checks that name a setup, in one read. */
export async function voidOf(
  { db }: Pick<Tenant, 'db'>,
  organizationId: string,
  checks: readonly { setupId: string | null }[],
): Promise<(check: { setupId: string | null }) => Words | null> {
  const ids = [...new Set(checks.flatMap(({ setupId }) => setupId ?? []))];
  if (ids.length === 0) return () => null;
  const rows = await db
    .select({
      id: setups.id,
      state: setups.state,
      verdict: setups.verdict,
      station: setups.station,
      withdrawnAt: setups.withdrawnAt,
    })
    .from(setups)
    .where(and(eq(setups.organizationId, organizationId), inArray(setups.id, ids)));
  const words = new Map(rows.map((row) => [row.id, voidWords(row)]));
  return ({ setupId }) => (setupId === null ? null : (words.get(setupId) ?? null));
}
