/** What clients know of their uploads, kept outside the hub: sent, and answered 201 or 200. */
export class Ledger {
  readonly sent = new Set<string>();
  readonly acknowledged = new Set<string>();

  send(clientId: string): void {
    this.sent.add(clientId);
  }

  /** Notes an answer; a refusal acknowledges nothing. */
  answer(status: number, body: string): void {
    if (status !== 201 && status !== 200) return;
    const { upload } = JSON.parse(body) as { upload: { clientId: string } };
    this.acknowledged.add(upload.clientId);
  }
}

/** What stands of one upload of a setup with eight shots. */
interface Standing {
  clientId: string;
  uploads: number;
  raw: number;
  setups: number;
  results: number;
  observations: number;
  events: number;
  audit: number;
}

const WHOLE: Omit<Standing, 'clientId'> = {
  uploads: 1,
  raw: 1,
  setups: 1,
  results: 1,
  observations: 8,
  events: 2,
  audit: 2,
};

const STANDING = `
  with up as (select organization_id o, id, client_id, raw_body_id from uploads
      where project_id = $1 and status = 'processed'),
    made as (select s.organization_id o, s.id, s.upload_id from setups s where s.project_id = $1),
    subjects as (select id::text as subject, id as upload_id from up
      union all select id::text, upload_id from made),
    n_raw as (select up.id, count(*) n from up join raw_bodies r on r.organization_id = o and r.id = raw_body_id
      where r.sha256 = sha256(r.bytes) group by 1),
    n_setups as (select upload_id id, count(*) n from made group by 1),
    n_results as (select upload_id id, count(*) n from made
      join setup_results r on r.organization_id = o and r.setup_id = made.id group by 1),
    n_observations as (select upload_id id, count(*) n from made
      join observations b on b.organization_id = o and b.setup_id = made.id group by 1),
    n_events as (select upload_id id, count(*) n from subjects
      join events e using (subject) where e.project_id = $1 group by 1),
    n_audit as (select upload_id id, count(*) n from subjects
      join audit_entries a using (subject) where a.project_id = $1 group by 1)
  select client_id as "clientId", count(*)::int as uploads, sum(n_raw.n)::int as raw, sum(n_setups.n)::int as setups,
    sum(n_results.n)::int as results, sum(n_observations.n)::int as observations, sum(n_events.n)::int as events,
    sum(n_audit.n)::int as audit
  from up left join n_raw using (id) left join n_setups using (id) left join n_results using (id)
    left join n_observations using (id) left join n_events using (id) left join n_audit using (id)
  group by client_id`;

/** Rows of the project that belong to no upload of it. */
const STRAYS = `
  select (select count(*) from setups where project_id = $1)
      - (select count(*) from setups s join uploads u on u.organization_id = s.organization_id and u.id = s.upload_id
        where s.project_id = $1 and u.status = 'processed')
    + (select count(*) from raw_bodies r where organization_id = (select organization_id from projects where id = $1)
        and not exists (select from uploads u where u.organization_id = r.organization_id and u.raw_body_id = r.id))
    + (select count(*) from events e where project_id = $1 and type in ('upload.processed', 'setup.computed')
        and not exists (select from uploads u where u.id::text = e.subject)
        and not exists (select from setups s where s.id::text = e.subject)) as strays`;

type Sql = <R extends Record<string, unknown>>(text: string, values: unknown[]) => Promise<R[]>;

export interface Reckoning {
  acknowledged: number;
  /** Acknowledged and not there. */
  lost: string[];
  /** There, but not with every row exactly once. */
  broken: string[];
  /** There though the answer did not reach the client: whole, as the sender will find when it asks again. */
  unacknowledged: number;
  strays: number;
}

/** Holds the ledger against the rows of a project that took nothing but uploads of one setup with eight shots. */
export async function reckon(ledger: Ledger, projectId: string, sql: Sql): Promise<Reckoning> {
  const standing = await sql<Standing & Record<string, unknown>>(STANDING, [projectId]);
  const [{ strays }] = await sql<{ strays: string }>(STRAYS, [projectId]);
  const there = new Set(standing.map(({ clientId }) => clientId));
  const isWhole = (row: Standing) =>
    ledger.sent.has(row.clientId) &&
    (Object.keys(WHOLE) as (keyof typeof WHOLE)[]).every((part) => row[part] === WHOLE[part]);
  return {
    acknowledged: ledger.acknowledged.size,
    lost: [...ledger.acknowledged].filter((id) => !there.has(id)),
    broken: standing.filter((row) => !isWhole(row)).map(({ clientId }) => clientId),
    unacknowledged: [...there].filter((id) => !ledger.acknowledged.has(id)).length,
    strays: Number(strays),
  };
}
