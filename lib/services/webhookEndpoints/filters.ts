import { and, eq, inArray } from 'drizzle-orm';
import { projects } from '@/db/schema';
import { getConfig } from '@/lib/config';
import { type Reach, reach } from '@/lib/notify/addresses';
import { faultOfTarget } from '@/lib/notify/target';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { problemItem } from '@/openapi/problemItem';
import type { EndpointRow } from './load';

/** Where messages of this hub may go. */
export function configuredReach(): Reach {
  const { webhookHttp: http, webhookNetworks: networks } = getConfig();
  return reach({ http, networks });
}

/** @throws Problem where no message would ever be sent to that address */
export function requireTarget(url: string): void {
  const fault = faultOfTarget(url, configuredReach());
  if (fault !== null) throw invalid('/url', 'webhook_url_refused', fault);
}

/** Nobody has others told what they may not follow themselves. */
export function requireEventScope({ caller }: VerbContext): void {
  if (caller.scopes.includes('events:read')) return;
  throw new Problem('forbidden', 'Whoever has events sent needs the scope events:read, too.');
}

export async function requireKnownProjects(
  { tenant, caller }: VerbContext,
  projectIds: readonly string[] | null,
): Promise<void> {
  if (projectIds === null) return;
  const found = await tenant.db
    .select({ id: projects.id })
    .from(projects)
    .where(and(eq(projects.organizationId, caller.organizationId), inArray(projects.id, [...projectIds])));
  const known = new Set(found.map(({ id }) => id));
  const unknown = projectIds.flatMap((id, i) =>
    known.has(id) ? [] : [problemItem(`/projectIds/${i}`, 'project_unknown')],
  );
  if (unknown.length > 0) throw invalidItems(unknown);
}

/** Whether an endpoint wants an event. */
export function wants(
  { eventTypes, projectIds }: Pick<EndpointRow, 'eventTypes' | 'projectIds'>,
  event: { type: string; projectId: string | null },
): boolean {
  const about = `${event.type.slice(0, event.type.indexOf('.'))}.*`;
  if (eventTypes !== null && !eventTypes.includes(event.type) && !eventTypes.includes(about)) return false;
  return projectIds === null || (event.projectId !== null && projectIds.includes(event.projectId));
}
