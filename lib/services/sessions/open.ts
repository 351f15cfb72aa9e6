import { eq } from 'drizzle-orm';
import type * as z from 'zod';
import { directory, organizations, sessions } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Caller } from '@/lib/access/actor';
import { sha256 } from '@/lib/access/secrets';
import { SESSION_DAYS } from '@/lib/access/sessionToken';
import type { Runtime } from '@/lib/runtime';
import { asMomentOrNull } from '@/lib/services/moments';
import type { PersonRow } from '@/lib/services/people/present';
import type { Whoami } from '@/openapi/schemas/access';
import { ROLE_SCOPES, type Role } from '@/openapi/scopes';

export interface OpenedSession {
  whoami: z.output<typeof Whoami>;
  /** Random; signed into the cookie and kept as a hash only. */
  handle: string;
  expiresAt: Date;
}

/** Opens a session for a person in the transaction of their organization. */
export async function openSession(
  { tenant, runtime }: { tenant: Tenant; runtime: Runtime },
  person: PersonRow,
): Promise<OpenedSession> {
  const { organizationId } = person;
  const handle = runtime.random(32).toString('base64url');
  const handleSha256 = sha256(handle);
  const now = runtime.now();
  const expiresAt = new Date(now.getTime() + SESSION_DAYS * 86_400_000);
  const id = runtime.uuid();
  await tenant.db.insert(sessions).values({
    organizationId,
    id,
    personId: person.id,
    handleSha256,
    createdAt: now.toISOString(),
    expiresAt: expiresAt.toISOString(),
  });
  await tenant.db.insert(directory).values({ handleSha256, organizationId, kind: 'session', subjectId: id });
  const caller: Caller = {
    kind: 'person',
    organizationId,
    personId: person.id,
    name: person.name,
    role: person.role,
    scopes: ROLE_SCOPES[person.role],
    projectIds: null,
    sessionId: id,
    expiresAt: expiresAt.toISOString(),
  };
  return { whoami: await presentCaller(tenant, caller), handle, expiresAt };
}

export async function presentCaller(tenant: Tenant, caller: Caller): Promise<z.output<typeof Whoami>> {
  const [organization] = await tenant.db
    .select({ id: organizations.id, name: organizations.name })
    .from(organizations)
    .where(eq(organizations.id, caller.organizationId));
  const role: Role | null = caller.kind === 'person' ? caller.role : null;
  return {
    kind: caller.kind,
    name: caller.name,
    organization,
    personId: caller.personId,
    role,
    scopes: [...caller.scopes],
    projectIds: caller.projectIds && [...caller.projectIds],
    expiresAt: asMomentOrNull(caller.expiresAt),
  };
}
