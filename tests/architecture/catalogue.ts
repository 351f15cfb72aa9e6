import type pg from 'pg';

/** The app's role; it may see and write rows, and owns nothing but the queue's schema. */
export const APP_ROLE = 'hubtack_app';
/** Stands outside the organizations: it tells which one a handle belongs to. */
const OUTSIDE = ['directory'];

/** What is written once and never changed. */
export const APPEND_ONLY = [
  'raw_bodies',
  'uploads',
  'upload_refusals',
  'observations',
  'control_point_versions',
  'instrument_calibrations',
  'setup_results',
  'setup_checks',
  'setup_releases',
  'surface_data',
  'layers',
  'adjustment_results',
  'adjustment_observations',
  'grade_checks',
  'bench_checks',
  'events',
  'audit_entries',
];

const TABLES = `
  select c.relname as name, c.relrowsecurity as secured, c.relforcerowsecurity as forced,
    coalesce(array_agg(distinct p.polname::text) filter (where p.polname is not null), '{}') as policies,
    coalesce(array_agg(distinct pg_get_expr(p.polqual, c.oid)) filter (where p.polqual is not null), '{}') as seen,
    coalesce(array_agg(distinct pg_get_expr(p.polwithcheck, c.oid)) filter (where p.polwithcheck is not null), '{}')
      as written,
    array(select privilege_type::text from information_schema.role_table_grants g
      where g.table_schema = 'public' and g.table_name = c.relname and g.grantee = $1) as grants,
    array(select privilege_type::text from information_schema.column_privileges g
      where g.table_schema = 'public' and g.table_name = c.relname and g.grantee = $1
        and privilege_type = 'UPDATE') as columns,
    exists(select from information_schema.role_table_grants g
      where g.table_schema = 'public' and g.table_name = c.relname and g.grantee = 'PUBLIC') as open
  from pg_class c join pg_namespace n on n.oid = c.relnamespace left join pg_policy p on p.polrelid = c.oid
  where n.nspname = 'public' and c.relkind in ('r', 'p') group by c.oid order by c.relname`;

/** Every primary, unique and foreign key and every unique index, with its first column on either side. */
const KEYS = `
  select t.relname as table, k.conname as key, a.attname as first, f.relname as foreign, b.attname as "foreignFirst"
  from pg_constraint k join pg_class t on t.oid = k.conrelid join pg_namespace n on n.oid = t.relnamespace
    join pg_attribute a on a.attrelid = t.oid and a.attnum = k.conkey[1]
    left join pg_class f on f.oid = k.confrelid
    left join pg_attribute b on b.attrelid = f.oid and b.attnum = k.confkey[1]
  where n.nspname = 'public' and k.contype in ('p', 'u', 'f')
  union
  select t.relname, i.relname, coalesce(a.attname, '(expression)'), null, null
  from pg_index x join pg_class i on i.oid = x.indexrelid join pg_class t on t.oid = x.indrelid
    join pg_namespace n on n.oid = t.relnamespace
    left join pg_attribute a on a.attrelid = t.oid and a.attnum = x.indkey[0]
  where n.nspname = 'public' and x.indisunique`;

const OWNED = `
  select c.relkind::text || ' ' || n.nspname || '.' || c.relname as name from pg_class c
    join pg_namespace n on n.oid = c.relnamespace
    where pg_get_userbyid(c.relowner) = $1 and n.nspname <> 'graphile_worker' and n.nspname not like 'pg_toast%'
  union all select 'schema ' || nspname from pg_namespace
    where pg_get_userbyid(nspowner) = $1 and nspname <> 'graphile_worker'
  union all select 'function ' || n.nspname || '.' || p.proname from pg_proc p
    join pg_namespace n on n.oid = p.pronamespace
    where pg_get_userbyid(p.proowner) = $1 and n.nspname <> 'graphile_worker'
  union all select 'database ' || datname from pg_database where pg_get_userbyid(datdba) = $1`;

/** Functions that would run with their owner's rights: through them row security could be passed by. */
const DEFINERS = `
  select n.nspname || '.' || p.proname as name from pg_proc p join pg_namespace n on n.oid = p.pronamespace
  where p.prosecdef and n.nspname not in ('pg_catalog', 'information_schema', 'graphile_worker')`;

/** The policy's words, as PostgreSQL writes them back. */
function isOwn(expression: string, column: string): boolean {
  const setting = `NULLIF\\(current_setting\\('app.organization_id'::text, true\\), ''::text\\)\\)::uuid`;
  return new RegExp(`^\\(${column} = \\( SELECT \\(${setting} AS "?\\w+"?\\)\\)$`).test(expression);
}

interface TableRow {
  name: string;
  secured: boolean;
  forced: boolean;
  policies: string[];
  seen: string[];
  written: string[];
  grants: string[];
  columns: string[];
  open: boolean;
}

/** What in a database's catalogue would let one organization see, change or guess at another's rows. */
export async function findings(client: pg.Client): Promise<string[]> {
  const found: string[] = [];
  const { rows: tables } = await client.query<TableRow>(TABLES, [APP_ROLE]);
  for (const table of tables) {
    const say = (what: string) => found.push(`${table.name}: ${what}`);
    if (table.open) say('granted to everybody');
    if (table.grants.length === 0) say('no grant to the app');
    const changes = [...table.grants, ...table.columns].filter((right) =>
      /UPDATE|DELETE|TRUNCATE/.test(right),
    );
    if (APPEND_ONLY.includes(table.name) && changes.length > 0) say(`append-only, but ${changes.join(', ')}`);
    const excess = table.grants.filter((right) => !['SELECT', 'INSERT', 'UPDATE', 'DELETE'].includes(right));
    if (excess.length > 0) say(`granted ${excess.join(', ')}`);
    if (OUTSIDE.includes(table.name)) continue;
    if (!table.secured) say('row security is off');
    if (!table.forced) say('row security does not bind its owner');
    if (table.policies.length === 0) say('no policy');
    const column = table.name === 'organizations' ? 'id' : 'organization_id';
    for (const expression of [...table.seen, ...table.written])
      if (!isOwn(expression, column)) say(`a policy lets through ${expression}`);
    if (table.policies.length > 0 && table.written.length === 0) say('no policy on what is written');
  }
  for (const name of APPEND_ONLY)
    if (!tables.some((table) => table.name === name)) found.push(`${name}: not there`);
  return [...found, ...(await findingsOfKeys(client)), ...(await findingsOfRole(client))];
}

async function findingsOfKeys(client: pg.Client): Promise<string[]> {
  const { rows } =
    await client.query<Record<'table' | 'key' | 'first' | 'foreign' | 'foreignFirst', string>>(KEYS);
  return rows.flatMap(({ table, key, first, foreign, foreignFirst }) => {
    if (OUTSIDE.includes(table)) return [];
    const wanted = table === 'organizations' ? 'id' : 'organization_id';
    const foreignWanted = foreign === 'organizations' ? 'id' : 'organization_id';
    if (first !== wanted) return [`${table}: key ${key} is led by ${first}`];
    if (foreign && foreignFirst !== foreignWanted)
      return [`${table}: key ${key} points at ${foreign}.${foreignFirst}`];
    return [];
  });
}

async function findingsOfRole(client: pg.Client): Promise<string[]> {
  const { rows: roles } = await client.query(
    `select rolname, rolsuper, rolbypassrls, rolcreaterole, rolcreatedb, rolreplication from pg_roles
      where rolname in ($1, 'hubtack_owner')`,
    [APP_ROLE],
  );
  const powers = roles.flatMap(({ rolname, ...rights }) =>
    Object.entries(rights)
      .filter(([right, given]) => given && !(rolname === 'hubtack_owner' && right === 'rolcreatedb'))
      .map(([right]) => `${rolname}: has ${right}`),
  );
  const { rows: members } = await client.query(
    `select r.rolname as name from pg_auth_members m join pg_roles r on r.oid = m.roleid
      join pg_roles u on u.oid = m.member where u.rolname = $1`,
    [APP_ROLE],
  );
  const { rows: owned } = await client.query(OWNED, [APP_ROLE]);
  const { rows: definers } = await client.query(DEFINERS);
  return [
    ...powers,
    ...(roles.length === 2 ? [] : ['the two roles are not there']),
    ...members.map(({ name }) => `${APP_ROLE}: is a member of ${name}`),
    ...owned.map(({ name }) => `${APP_ROLE}: owns ${name}`),
    ...definers.map(({ name }) => `${name}: runs with its owner's rights`),
  ];
}
