import { and, eq } from 'drizzle-orm';
import { acknowledgements, setupReleases, setups } from '@/db/schema';
import type { Tenant } from '@/db/tenant';

/** Acknowledgements with the setup and the withdrawal that opened them. */
export function selectAcknowledgements({ db }: Pick<Tenant, 'db'>) {
  return db
    .select({
      row: acknowledgements,
      station: setups.station,
      withdrawnBy: setupReleases.actorName,
    })
    .from(acknowledgements)
    .innerJoin(
      setups,
      and(
        eq(setups.organizationId, acknowledgements.organizationId),
        eq(setups.id, acknowledgements.setupId),
      ),
    )
    .innerJoin(
      setupReleases,
      and(
        eq(setupReleases.organizationId, acknowledgements.organizationId),
        eq(setupReleases.setupId, acknowledgements.setupId),
        eq(setupReleases.action, 'withdraw'),
        // Both were written with the same instant, and a setup is withdrawn once at a time.
        eq(setupReleases.recordedAt, acknowledgements.openedAt),
      ),
    );
}
