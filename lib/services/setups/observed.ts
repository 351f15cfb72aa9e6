import { and, asc, eq, type InferSelectModel, inArray } from 'drizzle-orm';
import { observations, setupChecks } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Shot } from '@/lib/compute/survey/shots';
import type { CheckRow, SetupRow } from './load';

/** A check as it came in, with its shots. */
export interface LaterCheck {
  check: CheckRow;
  shots: Shot[];
}

/** A shot as it was sent: without a name where its target was to be identified. */
export type ObservedShot = Omit<Shot, 'target'> & { target: string | null };

/** The shots of a setup and, oldest first, the checks that came later, whichever of its refits they came to. */
export async function loadObserved(
  { db }: Tenant,
  { organizationId, rootId }: Pick<SetupRow, 'organizationId' | 'rootId'>,
): Promise<{ shots: ObservedShot[]; later: LaterCheck[] }> {
  const rows = await db
    .select()
    .from(observations)
    .where(and(eq(observations.organizationId, organizationId), eq(observations.setupId, rootId)))
    .orderBy(asc(observations.seq));
  const ids = [...new Set(rows.flatMap(({ checkId }) => checkId ?? []))];
  const checks =
    ids.length === 0
      ? []
      : await db
          .select()
          .from(setupChecks)
          .where(and(eq(setupChecks.organizationId, organizationId), inArray(setupChecks.id, ids)))
          .orderBy(asc(setupChecks.observedAt), asc(setupChecks.id));
  const shotsOf = (checkId: string | null) => rows.filter((row) => row.checkId === checkId).map(asShot);
  return {
    shots: shotsOf(null),
    later: (checks as CheckRow[]).map((check) => ({ check, shots: shotsOf(check.id).filter(isNamed) })),
  };
}

export function isNamed(shot: ObservedShot): shot is Shot {
  return shot.target !== null;
}

/** An observation as the engine takes it; without the target that the hub found for it. */
export function asShot(row: InferSelectModel<typeof observations>): ObservedShot {
  return {
    id: row.clientId,
    target: row.identified ? null : row.target,
    purpose: row.purpose,
    face: row.face,
    set: row.set,
    direction: row.direction,
    zenith: row.zenith,
    distance:
      row.slopeDistance === null
        ? null
        : {
            slopeDistance: row.slopeDistance,
            prismConstantMm: row.prismConstantMm ?? 0,
            prismConstantAppliedMm: row.prismConstantAppliedMm ?? 0,
            appliedPpm: row.appliedPpm ?? 0,
          },
    targetHeight: row.targetHeight,
    targetCentringSigma: row.targetCentringSigma,
    targetHeightSigma: row.targetHeightSigma,
  };
}
