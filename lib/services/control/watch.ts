import { and, eq } from 'drizzle-orm';
import { controlPoints, type StatusAct } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { controlHealth, type MarkHealth } from '@/lib/compute/survey/controlHealth';
import type { Runtime } from '@/lib/runtime';
import { Lengths } from '@/lib/services/lengths';
import type { ProjectRow } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { SetupResult } from '@/lib/services/setups/result';
import { movedText } from './healthWords';
import { asMark, type CurrentControl, lockedControl } from './load';
import { loadWitnesses, type Witnesses } from './witnesses';

/** Who acts where nobody asked. */
export const HUB = 'Hubtack';

/** A reading that one in eighty good ones reaches makes the hub look at the marks of its setup. */
const STRIKING = 2.5;

/** Whether a setup makes it worth while to look at its marks over all setups. */
export function isStriking({ test, converged, marks }: SetupResult): boolean {
  const stands = marks.some(({ readings }) =>
    readings.some(({ standardised }) => Math.abs(standardised ?? 0) > STRIKING),
  );
  return converged && (!test.passed || stands);
}

/**
 * Looks at marks over all setups that saw them, and suspects those that have moved: as the hub's own act, with event and
 * audit. It suspects what is trusted, and never against a person: after somebody has said how far a mark is to be
 * trusted, only a move that was sent in since counts.
 *
 * @returns names of the marks that are suspect now and were not
 */
export async function watchControl(
  context: { tenant: Tenant; runtime: Runtime; requestId: string | null },
  project: Pick<ProjectRow, 'organizationId' | 'id' | 'lengthUnit'>,
  names: readonly string[],
): Promise<string[]> {
  if (names.length === 0) return [];
  const { tenant, runtime } = context;
  const { organizationId } = project;
  const witnesses = await loadWitnesses(tenant, organizationId, project.id, names);
  const moved = controlHealth(witnesses.setups, witnesses.levels).filter(
    ({ movedSince }) => movedSince !== null,
  );
  if (moved.length === 0) return [];
  // What somebody says meanwhile is waited for, and heard.
  const rows = await lockedControl(
    tenant,
    organizationId,
    project.id,
    moved.map(({ name }) => name),
  );
  const suspected: string[] = [];
  for (const row of rows) {
    const health = moved.find((one) => one.name === row.point.name && one.version === asMark(row).version);
    if (!health || !maySuspect(row, health, witnesses)) continue;
    const at = runtime.now().toISOString();
    const statusAct = actOf(health, witnesses, at, new Lengths(project.lengthUnit));
    await tenant.db
      .update(controlPoints)
      .set({ status: 'suspect', statusAct, updatedAt: at })
      .where(
        and(
          eq(controlPoints.organizationId, organizationId),
          eq(controlPoints.projectId, project.id),
          eq(controlPoints.name, row.point.name),
        ),
      );
    suspected.push(row.point.name);
    record(
      context,
      { kind: 'job', organizationId, name: HUB },
      {
        type: 'control.suspect',
        subject: row.point.name,
        projectId: project.id,
        data: { from: 'trusted', to: 'suspect', note: statusAct.note, setups: statusAct.seen!.setups },
      },
    );
  }
  return suspected;
}

/** Trusted, and, where somebody has said so, moved by nothing that the hub had already then. */
function maySuspect(
  { point }: CurrentControl,
  { movedSince, sightings }: MarkHealth,
  { facts }: Witnesses,
): boolean {
  if (point.status !== 'trusted') return false;
  const act = point.statusAct;
  if (!act || act.by.kind === 'job') return true;
  return sightings
    .slice(movedSince!)
    .every(({ source }) => Date.parse(facts.get(source)!.receivedAt) > Date.parse(act.at));
}

function actOf(health: MarkHealth, { facts }: Witnesses, at: string, length: Lengths): StatusAct {
  const { version, movedSince, lastInPlace, sightings, displacement, covariance, test } = health;
  const since = sightings.slice(movedSince!);
  const lastGood = lastInPlace === null ? null : sightings[lastInPlace];
  return {
    by: { kind: 'job', name: HUB },
    at,
    note: movedText(health, facts, length),
    seen: {
      version,
      ...displacement!,
      covariance: [...covariance!],
      statistic: test!.statistic,
      critical: test!.critical,
      setups: since.map(({ source }) => source),
      lastGoodAt: lastGood ? new Date(lastGood.observedAt).toISOString() : null,
    },
  };
}
