import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import * as z from 'zod';
import { events, organizations } from '@/db/schema';
import { mayUseProject } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { readCursor, writeCursor } from '@/lib/services/paging';
import type { QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/record';
import { presentEvent } from './present';

type Query = QueryOf<typeof contract.listEvents>;

/** Transaction and number of an event, within what their types hold. */
const Place = z.string().regex(/^\d{1,19}\/\d{1,18}$/);

/** In place of a cursor: from now on. */
export const LATEST = 'latest';

/**
 * Events after a cursor in commit order, each with the cursor behind it, and how far was looked: on a busy hub that is
 * further than the last event that passes the filters. Only transactions below the oldest that still
 * runs are read, so that a late commit is never skipped; the cursor holds the epoch, which a restore raises, and the
 * place.
 */
export async function eventsAfter({ tenant, caller }: Pick<VerbContext, 'tenant' | 'caller'>, query: Query) {
  const { organizationId } = caller;
  if (query.projectId !== undefined && !mayUseProject(caller, query.projectId))
    throw new Problem('not_found');
  const [{ epoch, oldest }] = await tenant.db
    .select({
      epoch: organizations.eventEpoch,
      oldest: sql<string>`pg_snapshot_xmin(pg_current_snapshot())::text`,
    })
    .from(organizations)
    .where(eq(organizations.id, organizationId));
  const list = ['events', epoch, query.type, query.projectId];
  const after = query.after === LATEST ? `${oldest}/0` : readCursor(list, query.after, Place);
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
  const told = rows.map((row) => ({
    event: presentEvent(row),
    cursor: writeCursor(list, `${row.xid}/${row.seq}`),
  }));
  const last = rows.at(-1);
  const cursor = writeCursor(list, last ? `${last.xid}/${last.seq}` : `${xid}/${seq}`);
  // Where no more are waiting, everything before the oldest transaction of a moment ago has been looked at.
  const beyond = rows.length < query.limit && BigInt(oldest) > BigInt(last?.xid ?? xid);
  return { told, cursor, reached: beyond ? writeCursor(list, `${oldest}/0`) : cursor };
}

export async function listEvents(context: VerbContext, { query }: { query: Query }) {
  const { told, cursor } = await eventsAfter(context, query);
  return { data: told.map(({ event }) => event), nextCursor: cursor };
}
