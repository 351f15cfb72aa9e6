import { identifiedTransaction, type NamedStatement, type Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import { ROLE_SCOPES, type Role, type Scope } from '@/openapi/scopes';
import type { Caller } from './actor';
import { sha256 } from './secrets';

/** What somebody shows to be let in: the hash of an API key, or of a session's handle. */
export interface Credential {
  kind: 'key' | 'session';
  handleSha256: Buffer;
}

export function credential(kind: Credential['kind'], secret: string): Credential {
  return { kind, handleSha256: sha256(secret) };
}

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

interface SessionRow {
  organization_id: string;
  id: string;
  person_id: string;
  expires_at: string;
  name: string;
  role: Role;
}

/**
 * Runs `work` in one transaction of the organization that a credential belongs to. Who it is, is read anew each time
 * by the first statement; what `work` reads before it knows is confined to that organization and must not be looked
 * at until then. The use of a key is noted to the minute.
 *
 * `identified` fails with a problem where nobody, or nobody any more, has that credential.
 */
export function callerTransaction<T>(
  { kind, handleSha256 }: Credential,
  now: Date,
  work: (tenant: Tenant, identified: Promise<Caller>) => Promise<T>,
): Promise<T> {
  const at = now.toISOString();
  if (kind === 'session') {
    return identifiedTransaction<SessionRow, T>(SESSION, [handleSha256, at], (tenant, rows) =>
      work(tenant, rows.then(personOf)),
    );
  }
  return identifiedTransaction<KeyRow, T>(KEY, [handleSha256, at], (tenant, rows) =>
    work(
      tenant,
      rows.then(([row]) => {
        const caller = keyOf(row);
        if (row.stale) tenant.defer(tenant.run(TOUCH, [row.organization_id, row.id, at]));
        return caller;
      }),
    ),
  );
}

function keyOf(row: KeyRow | undefined): Caller {
  if (!row) throw new Problem('unauthenticated', 'The hub does not know this API key.');
  if (row.revoked || row.closed) throw new Problem('key_revoked');
  if (row.expired) throw new Problem('key_expired');
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

function personOf([row]: SessionRow[]): Caller {
  if (!row) throw new Problem('session_ended');
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
