import { handleTransaction, type NamedStatement } from '@/db/tenant';
import { ROLE_SCOPES, type Role, type Scope } from '@/openapi/scopes';
import type { Caller } from './actor';
import { sha256 } from './secrets';

const KEY: NamedStatement = {
  name: 'identify_key',
  text: `select k.organization_id, k.id, k.name, k.scopes, k.project_ids, k.responsible_person_id, k.expires_at,
      k.revoked_at is not null as revoked, coalesce(k.expires_at <= $2, false) as expired,
      p.status = 'closed' as closed,
      k.last_used_at is null or k.last_used_at < $2::timestamptz - interval '1 minute' as stale
    from directory d
    join api_keys k on k.organization_id = d.organization_id and k.id = d.subject_id
    join people p on p.organization_id = k.organization_id and p.id = k.responsible_person_id
    where d.handle_sha256 = $1`,
};

const TOUCH: NamedStatement = {
  name: 'touch_key',
  text: 'update api_keys set last_used_at = $3 where organization_id = $1 and id = $2',
};

const SESSION: NamedStatement = {
  name: 'identify_session',
  text: `select s.organization_id, s.id, s.person_id, s.expires_at, p.name, p.role
    from directory d
    join sessions s on s.organization_id = d.organization_id and s.id = d.subject_id
    join people p on p.organization_id = s.organization_id and p.id = s.person_id
    where d.handle_sha256 = $1 and s.revoked_at is null and s.expires_at > $2 and p.status = 'active'`,
};

interface KeyRow {
  organization_id: string;
  id: string;
  name: string;
  scopes: Scope[];
  project_ids: string[] | null;
  responsible_person_id: string;
  expires_at: string | null;
  revoked: boolean;
  expired: boolean;
  closed: boolean;
  stale: boolean;
}

export type Refused = 'unknown' | 'revoked' | 'expired';

/** The key behind a secret, its state read anew, and the time of its use noted to the minute. */
export async function identifyKey(secret: string, now: Date): Promise<Caller | Refused> {
  const handle = sha256(secret);
  return handleTransaction(handle, 'apiKey', async (tenant): Promise<Caller | Refused> => {
    const { rows } = await tenant.run<KeyRow & Record<string, unknown>>(KEY, [handle, now.toISOString()]);
    const [row] = rows;
    if (!row) return 'unknown';
    if (row.revoked || row.closed) return 'revoked';
    if (row.expired) return 'expired';
    if (row.stale) tenant.defer(tenant.run(TOUCH, [row.organization_id, row.id, now.toISOString()]));
    return {
      kind: 'key',
      organizationId: row.organization_id,
      keyId: row.id,
      personId: row.responsible_person_id,
      name: row.name,
      scopes: row.scopes,
      projectIds: row.project_ids,
      expiresAt: row.expires_at,
    };
  });
}

interface SessionRow {
  organization_id: string;
  id: string;
  person_id: string;
  expires_at: string;
  name: string;
  role: Role;
}

/** The person behind a session handle; null where the session or the account has ended. */
export async function identifySession(handle: string, now: Date): Promise<Caller | null> {
  const hashed = sha256(handle);
  return handleTransaction(hashed, 'session', async (tenant): Promise<Caller | null> => {
    const { rows } = await tenant.run<SessionRow & Record<string, unknown>>(SESSION, [
      hashed,
      now.toISOString(),
    ]);
    const [row] = rows;
    if (!row) return null;
    return {
      kind: 'person',
      organizationId: row.organization_id,
      personId: row.person_id,
      name: row.name,
      role: row.role,
      scopes: ROLE_SCOPES[row.role],
      projectIds: null,
      sessionId: row.id,
      expiresAt: row.expires_at,
    };
  });
}
