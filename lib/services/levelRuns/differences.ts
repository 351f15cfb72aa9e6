import { and, asc, eq, inArray, type SQL } from 'drizzle-orm';
import { levelRuns } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { HeightDifference } from '@/lib/compute/survey/levelling/heightDifferences';
import type { SightLine } from '@/lib/compute/survey/levelling/runVerdict';
import type { LevelDifference } from '@/lib/compute/survey/networkInput';
import type { LevelRunRow } from './load';

/** Of a difference: the readings, and what is unknown of the collimation times the imbalance of the sights. */
export function sectionDeviation({ sigma, arm }: HeightDifference, line: SightLine): number {
  return Math.hypot(sigma, line.sigma * arm);
}

/** A levelled difference as an observation of a network, and where it stands. */
export interface RunDifference extends LevelDifference {
  run: Pick<LevelRunRow, 'id' | 'clientId' | 'verdict' | 'observedAt' | 'createdAt'>;
  /** Versions of the control points that it touched. */
  control: readonly { name: string; version: number }[];
  section: HeightDifference;
}

/**
 * Level runs as observations of a network, each cut at the control points that it turned on. A run that does not
 * close holds a gross error and takes no part; a loop that turned on no mark says nothing of any height.
 *
 * @param further condition on the runs; without it all runs of the project
 */
export async function runDifferences(
  tenant: Tenant,
  of: { organizationId: string; projectId: string },
  further?: SQL,
): Promise<RunDifference[]> {
  const rows = (await tenant.db
    .select({
      id: levelRuns.id,
      clientId: levelRuns.clientId,
      verdict: levelRuns.verdict,
      observedAt: levelRuns.observedAt,
      createdAt: levelRuns.createdAt,
      result: levelRuns.result,
    })
    .from(levelRuns)
    .where(
      and(
        eq(levelRuns.organizationId, of.organizationId),
        eq(levelRuns.projectId, of.projectId),
        inArray(levelRuns.verdict, ['pass', 'hold']),
        further,
      ),
    )
    .orderBy(asc(levelRuns.id))) as (RunDifference['run'] & Pick<LevelRunRow, 'result'>)[];
  return rows.flatMap((row) =>
    row.result.differences
      .filter(({ from, to }) => from !== to)
      .map((section): RunDifference => {
        const { id, clientId, verdict, observedAt, createdAt } = row;
        return {
          id: `${id}/${section.lines[0]}-${section.lines[1]}`,
          from: section.from,
          to: section.to,
          difference: section.difference,
          weight: { by: 'sigma', sigma: sectionDeviation(section, row.result.line) },
          run: { id, clientId, verdict, observedAt, createdAt },
          control: row.result.control,
          section,
        };
      }),
  );
}
