import { bulkInsert } from '@/db/bulk';
import { auditEntries, events } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { type Actor, callerId } from '@/lib/access/actor';
import type { Runtime } from '@/lib/runtime';
import type { EventSubject } from '@/openapi/eventSubjects';

export interface Happening {
  /** What happened, as `entity.participle`: the event's type and the audit entry's action. */
  type: `${EventSubject}.${string}`;
  /** Id or name of what it happened to. */
  subject: string;
  projectId?: string;
  /** What a reader needs beside the subject; never a secret. */
  data?: Record<string, unknown>;
}

/** Whoever signs in or is just being made has no session to act by yet. */
type Recorder = Actor | { kind: 'person'; organizationId: string; personId: string; name: string };

const insert = bulkInsert({ events, auditEntries });

/** Rows of events and audit entries of changes, for a verb that writes them with its own. */
export function recordRows(
  { runtime, requestId }: { runtime: Runtime; requestId: string | null },
  actor: Recorder,
  happenings: readonly Happening[],
) {
  const occurredAt = runtime.now().toISOString();
  const actorId = actor.kind === 'job' ? null : callerId(actor);
  const shared = ({ subject, projectId }: Happening) => ({
    organizationId: actor.organizationId,
    id: runtime.uuid(),
    subject,
    projectId: projectId ?? null,
    occurredAt,
  });
  return {
    events: happenings.map((h) => ({ ...shared(h), type: h.type, data: h.data ?? {} })),
    auditEntries: happenings.map((h) => ({
      ...shared(h),
      action: h.type,
      actorKind: actor.kind,
      actorId,
      actorName: actor.name,
      requestId,
      details: h.data ?? {},
    })),
  };
}

/** Writes event and audit entry of a change into its own transaction, behind what was sent before. */
export function record(
  context: { tenant: Tenant; runtime: Runtime; requestId: string | null },
  actor: Recorder,
  ...happenings: Happening[]
): void {
  context.tenant.defer(insert(context.tenant, recordRows(context, actor, happenings)));
}
