import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { apiKeys } from '@/db/schema';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { ApiKey } from '@/openapi/schemas/access';
import type { Scope } from '@/openapi/scopes';

export type ApiKeyRow = InferSelectModel<typeof apiKeys>;

export function presentApiKey(row: ApiKeyRow, now: Date): z.output<typeof ApiKey> {
  const expired = row.expiresAt !== null && new Date(row.expiresAt) <= now;
  return {
    id: row.id,
    name: row.name,
    prefix: row.prefix,
    scopes: row.scopes as Scope[],
    projectIds: row.projectIds,
    responsiblePersonId: row.responsiblePersonId,
    status: row.revokedAt !== null ? 'revoked' : expired ? 'expired' : 'active',
    createdAt: asMoment(row.createdAt),
    expiresAt: asMomentOrNull(row.expiresAt),
    revokedAt: asMomentOrNull(row.revokedAt),
    lastUsedAt: asMomentOrNull(row.lastUsedAt),
    successorId: row.successorId,
  };
}
