import { inject } from 'vitest';
import { callerRoles } from './roles';

/** The hub of this vitest worker. */
export function ownHub() {
  const hubs = inject('hubs');
  return hubs[(Number(process.env.VITEST_POOL_ID ?? 1) - 1) % hubs.length];
}

/**
 * A new organization on this worker's hub: one a suite, so that suites do not see each other. It is written through
 * the hub's own services, since the API makes organizations on an empty hub alone.
 */
export async function newOrganization() {
  const hub = ownHub();
  return { hub, ...(await callerRoles(hub)) };
}
