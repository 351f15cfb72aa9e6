import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import * as z from 'zod';
import { events, organizations } from '@/db/schema';
import { mayUseProject } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { readCursor, writeCursor } from '@/lib/services/paging';
import type { QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/record';

type List = typeof contract.listEvents;

/** Transaction and number of an event, within what their types hold. */
const Place = z.string().regex(/^\d{1,19}\/\d{1,18}$/);

/**
 * Events after a cursor in commit order. Only transactions below the oldest that still runs are read, so that a late
 * commit is never skipped; the cursor holds the epoch, which a restore raises, and the place.
 */
export async function listEvents({ tenant, caller }: VerbContext, { query }: { query: QueryOf<List> }) {
  const { organizationId } = caller;
  if (query.projectId !== undefined && !mayUseProject(caller, query.projectId))
    throw new Problem('not_found');
  const [organization] = await tenant.db
    .select({ epoch: organizations.eventEpoch })
    .from(organizations)
    .where(eq(organizations.id, organizationId));
  const list = ['events', organization.epoch, query.type, query.projectId];
  const after = readCursor(list, query.after, Place);
  const [xid, seq] = after === null ? ['0', '0'] : after.split('/');
  const rows = await tenant.db
    .select()
    .from(events)
    .where(
      and(
        eq(events.organizationId, organizationId),
        sql`${events.xid} < pg_snapshot_xmin(pg_current_snapshot())`,
        sql`(${events.xid}, ${events.seq}) > (${xid}::xid8, ${seq}::bigint)`,
        query.type ? eq(events.type, query.type) : undefined,
        query.projectId ? eq(events.projectId, query.projectId) : undefined,
        caller.projectIds === null ? undefined : inArray(events.projectId, [...caller.projectIds]),
      ),
    )
    .orderBy(asc(events.xid), asc(events.seq))
    .limit(query.limit);
  const last = rows.at(-1);
  return {
    data: rows.map((row) => ({
      id: row.id,
      type: row.type,
      subject: row.subject,
      projectId: row.projectId,
      occurredAt: asMoment(row.occurredAt),
      data: row.data as Record<string, unknown>,
    })),
    nextCursor: writeCursor(list, last ? `${last.xid}/${last.seq}` : `${xid}/${seq}`),
  };
}
