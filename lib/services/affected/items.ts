import { type SQL, sql } from 'drizzle-orm';
import * as z from 'zod';
import type { Tenant } from '@/db/tenant';
import { asMoment } from '@/lib/services/moments';
import { readCursor, writeCursor } from '@/lib/services/paging';

export type Kind = 'setup' | 'release' | 'benchCheck' | 'gradeCheck';

export interface AffectedRow extends Record<string, unknown> {
  kind: Kind;
  id: string;
  at: string;
  setup_id: string | null;
  station: string | null;
  machine: string | null;
  layer: string | null;
  verdict: 'pass' | 'hold' | 'fail' | null;
}

/** What is asked about, in words of the database. */
export interface Scope {
  organizationId: string;
  projectId: string;
  /** Condition on `setups s`: those that are no longer sure. */
  setups: SQL;
  /** Condition on `setups s`: those of them that are told as affected themselves. */
  told: SQL;
  /** Blades that were benched on this mark, from whatever setup. */
  benchmark: string | null;
  /** Last known to be good; null: never. */
  since: string | null;
}

export interface AffectedPage {
  rows: AffectedRow[];
  counts: Record<Kind, number>;
  machines: string[];
  nextCursor: string | null;
}

/** Where a page ends: instant, kind and id. */
const Place = z
  .string()
  .max(160)
  .regex(
    /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d(?:\.\d{1,6})?Z\|(?:setup|release|benchCheck|gradeCheck)\|[0-9a-f/-]+$/,
  )
  .refine((place) => !Number.isNaN(Date.parse(place.split('|')[0])));

/** A page of what hangs on setups and on a mark since an instant, oldest first, with the count of all of it. */
export async function loadAffected(
  { db }: Pick<Tenant, 'db'>,
  scope: Scope,
  list: readonly unknown[],
  { limit, cursor }: { limit: number; cursor?: string | undefined },
): Promise<AffectedPage> {
  const after = readCursor(list, cursor, Place);
  const [at, kind, id] = after?.split('|') ?? [];
  const behind = after === null ? sql`` : sql`where (at, kind, id) > (${at}::timestamptz, ${kind}, ${id})`;
  const items = itemsOf(scope);
  const { rows } = await db.execute<AffectedRow>(
    sql`${items} select kind, id, at::text, setup_id, station, machine, layer, verdict from items ${behind}
      order by items.at, kind, id limit ${limit + 1}`,
  );
  const counted = await db.execute<{ kind: Kind; count: number; machines: string[] | null }>(
    sql`${items} select kind, count(*)::int as count, array_agg(distinct machine) filter (where machine is not null) as machines
      from items group by kind`,
  );
  const counts: Record<Kind, number> = { setup: 0, release: 0, benchCheck: 0, gradeCheck: 0 };
  for (const row of counted.rows) counts[row.kind] = row.count;
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  return {
    rows: shown,
    counts,
    machines: counted.rows.find((row) => row.kind === 'release')?.machines ?? [],
    nextCursor:
      rows.length > limit && last ? writeCursor(list, `${asMoment(last.at)}|${last.kind}|${last.id}`) : null,
  };
}

function itemsOf({ organizationId, projectId, setups, told, benchmark, since }: Scope): SQL {
  const later = (column: SQL) => (since === null ? sql`true` : sql`${column} > ${since}::timestamptz`);
  return sql`with scope as (
      select s.id, s.station, s.observed_at, s.verdict, (${told}) as told from setups s
      where s.organization_id = ${organizationId} and s.project_id = ${projectId} and (${setups})),
    items as (
      select 'setup' as kind, s.id::text as id, s.observed_at as at, s.id as setup_id, s.station,
        null as machine, null as layer, s.verdict
      from scope s where s.told
      union all
      select 'release', e.setup_id::text || '/' || e.seq, e.effective_at, e.setup_id, s.station, e.machine, e.layer_name, null
      from scope s join setup_releases e on e.organization_id = ${organizationId} and e.setup_id = s.id
      where e.action = 'release' and (${later(sql`e.effective_at`)} or ${later(sql`e.valid_until`)})
      union all
      select 'benchCheck', b.id::text, b.observed_at, b.setup_id, s.station, b.machine, b.layer_name, b.verdict
      from bench_checks b left join setups s on s.organization_id = b.organization_id and s.id = b.setup_id
      where b.organization_id = ${organizationId} and b.project_id = ${projectId} and ${later(sql`b.observed_at`)}
        and (b.benchmark = ${benchmark} or b.setup_id in (select scope.id from scope))
      union all
      select 'gradeCheck', g.id::text, g.observed_at, g.setup_id, s.station, null, g.layer_name, g.verdict
      from scope s join grade_checks g on g.organization_id = ${organizationId} and g.setup_id = s.id
      where ${later(sql`g.observed_at`)})`;
}
