import type { NamedStatement, Tenant } from '@/db/tenant';
import { type Actor, callerId } from '@/lib/access/actor';
import type { Runtime } from '@/lib/runtime';

const RECORD: NamedStatement = {
  name: 'record',
  text: `with event as (
      insert into events (organization_id, id, type, subject, project_id, data, occurred_at)
      values ($1, $2, $4, $5, $6, $7, $8))
    insert into audit_entries
      (organization_id, id, action, subject, project_id, actor_kind, actor_id, actor_name, request_id, details, occurred_at)
    values ($1, $3, $4, $5, $6, $9, $10, $11, $12, $7, $8)`,
};

export interface Happening {
  /** What happened, as `entity.participle`: the event's type and the audit entry's action. */
  type: `${string}.${string}`;
  /** Id or name of what it happened to. */
  subject: string;
  projectId?: string;
  /** What a reader needs beside the subject; never a secret. */
  data?: Record<string, unknown>;
}

/** Writes event and audit entry of a change into its own transaction, behind what was sent before. */
export function record(
  context: { tenant: Tenant; runtime: Runtime; requestId: string | null },
  actor: Actor | { kind: 'system'; organizationId: string; name: string },
  { type, subject, projectId, data }: Happening,
): void {
  const { tenant, runtime, requestId } = context;
  const actorId = actor.kind === 'person' || actor.kind === 'key' ? callerId(actor) : null;
  tenant.defer(
    tenant.run(RECORD, [
      actor.organizationId,
      runtime.uuid(),
      runtime.uuid(),
      type,
      subject,
      projectId ?? null,
      JSON.stringify(data ?? {}),
      runtime.now().toISOString(),
      actor.kind,
      actorId,
      actor.name,
      requestId,
    ]),
  );
}
