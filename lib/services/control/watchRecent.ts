import { and, eq, gt } from 'drizzle-orm';
import { observations, projects, setups } from '@/db/schema';
import { tenantTransaction } from '@/db/tenant';
import { eachOrganization } from '@/lib/jobs/sweep';
import { WATCH_CONTROL } from '@/lib/jobs/tasks';
import { log } from '@/lib/log/log';
import type { Runtime } from '@/lib/runtime';
import { watchControl } from './watch';

/** Twice as long as between two looks: a setup whose transaction ends late is still met. */
const LOOKS_BACK_MS = 20 * 60_000;

/**
 * Looks at the marks of all setups that came in lately, project by project: a mark that creeps strikes in no setup for
 * itself, and two uploads at the same moment do not see each other. Doing it twice is harmless.
 */
export async function watchRecent(runtime: Runtime): Promise<void> {
  const since = new Date(runtime.now().getTime() - LOOKS_BACK_MS).toISOString();
  let suspected = 0;
  await eachOrganization(WATCH_CONTROL, async (organizationId) => {
    const recent = await tenantTransaction(organizationId, ({ db }) =>
      db
        .selectDistinct({ id: projects.id, lengthUnit: projects.lengthUnit, target: observations.target })
        .from(setups)
        .innerJoin(
          projects,
          and(eq(projects.organizationId, setups.organizationId), eq(projects.id, setups.projectId)),
        )
        .innerJoin(
          observations,
          and(eq(observations.organizationId, setups.organizationId), eq(observations.setupId, setups.id)),
        )
        .where(and(eq(setups.organizationId, organizationId), gt(setups.createdAt, since))),
    );
    for (const id of new Set(recent.map((row) => row.id))) {
      const own = recent.filter((row) => row.id === id);
      const project = { organizationId, id, lengthUnit: own[0].lengthUnit };
      const names = own.flatMap(({ target }) => target ?? []);
      const found = await tenantTransaction(organizationId, (tenant) =>
        watchControl({ tenant, runtime, requestId: null }, project, names),
      );
      suspected += found.length;
    }
  });
  log().info({ task: WATCH_CONTROL, suspected }, 'job done');
}
