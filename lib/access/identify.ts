import { identify, type NamedStatement, tenantTransaction } from '@/db/tenant';
import { ROLE_SCOPES, type Role, type Scope } from '@/openapi/scopes';
import type { Caller } from './actor';
import { sha256 } from './secrets';

const KEY: NamedStatement = { name: 'identify_key', text: 'select * from identify_key($1, $2)' };
const SESSION: NamedStatement = { name: 'identify_session', text: 'select * from identify_session($1, $2)' };
const TOUCH: NamedStatement = {
  name: 'touch_key',
  text: 'update api_keys set last_used_at = $3 where organization_id = $1 and id = $2',
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
  const [row] = await identify<KeyRow>(KEY, [sha256(secret), now.toISOString()]);
  if (!row) return 'unknown';
  if (row.revoked || row.closed) return 'revoked';
  if (row.expired) return 'expired';
  if (row.stale) {
    await tenantTransaction(row.organization_id, async (tenant) => {
      tenant.defer(tenant.run(TOUCH, [row.organization_id, row.id, now.toISOString()]));
    });
  }
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
  const [row] = await identify<SessionRow>(SESSION, [sha256(handle), now.toISOString()]);
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
}
