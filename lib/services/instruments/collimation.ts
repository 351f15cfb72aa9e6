import { and, desc, eq, isNull, sql } from 'drizzle-orm';
import type * as z from 'zod';
import { setupResults, setups } from '@/db/schema';
import { type FaceReading, faceHistory } from '@/lib/compute/survey/collimation';
import type { FaceErrors } from '@/lib/compute/survey/faces';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { VerbContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/instruments';
import type { Collimation } from '@/openapi/schemas/collimation';
import { wordsOfHistory } from './collimationWords';
import { loadInstrument } from './load';

type Read = typeof contract.getCollimation;
type Answer = z.output<typeof Collimation>;

const DAY = 24 * 60 * 60 * 1000;

/** Which of the two errors, and how its σ is kept. */
const QUANTITIES = {
  twoCollimation: { value: 'twoCollimation', sigma: 'twoCollimationSigma', faces: 2 },
  verticalIndex: { value: 'verticalIndex', sigma: 'verticalIndexSigma', faces: 1 },
} as const;

/** What two faces have shown of an instrument, setup by setup, and whether it stands still. */
export async function readCollimation(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
): Promise<Answer> {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { instrument, calibration } = await loadInstrument(
    tenant,
    organizationId,
    project.id,
    params.instrumentName,
  );
  const rows = await tenant.db
    .select({
      setupId: setups.id,
      station: setups.station,
      observedAt: setups.observedAt,
      calibration: setups.calibrationVersion,
      faces: sql<FaceErrors>`${setupResults.result} -> 'faceErrors'`,
    })
    .from(setups)
    .innerJoin(
      setupResults,
      and(
        eq(setupResults.organizationId, setups.organizationId),
        eq(setupResults.setupId, setups.id),
        eq(setupResults.version, setups.resultVersion),
      ),
    )
    .where(
      and(
        eq(setups.organizationId, organizationId),
        eq(setups.projectId, project.id),
        eq(setups.instrumentId, instrument.id),
        isNull(setups.supersededById),
        sql`json_typeof(${setupResults.result} -> 'faceErrors') = 'object'`,
      ),
    )
    .orderBy(desc(setups.observedAt), desc(setups.id))
    .limit(query.limit);
  const present = rows.filter((row) => row.calibration === calibration.version).reverse();
  const history = (quantity: keyof typeof QUANTITIES): Answer['twoCollimation'] => {
    const { value, sigma, faces } = QUANTITIES[quantity];
    const allowance = faces * calibration.collimation;
    // Results of version 1.1 kept no σ.
    const told = present.filter((row) => row.faces[value] !== null && (row.faces[sigma] ?? 0) > 0);
    const readings = told.map((row): FaceReading => {
      const day = new Date(row.observedAt).getTime() / DAY;
      return { day, value: row.faces[value]!, sigma: row.faces[sigma]! };
    });
    const found = readings.length === 0 ? null : faceHistory(readings, allowance);
    const change = found?.change ?? null;
    const since = change && told[change.since];
    return {
      ...wordsOfHistory(quantity, found, since?.station ?? null),
      currentArcsec: found && toArcseconds(found.current),
      sigmaArcsec: found && toArcseconds(found.sigma),
      allowanceArcsec: toArcseconds(allowance),
      large: found?.large ?? false,
      change:
        change && since
          ? {
              setupId: since.setupId,
              station: since.station,
              observedAt: asMoment(since.observedAt),
              fromArcsec: toArcseconds(change.before),
              toArcsec: toArcseconds(found!.current),
              standardised: change.standardised,
            }
          : null,
      driftArcsecPerDay: found?.drift ? toArcseconds(found.drift.perDay) : null,
      driftSigmaArcsecPerDay: found?.drift ? toArcseconds(found.drift.sigma) : null,
    };
  };
  const seconds = (radians: number | null | undefined) => (radians == null ? null : toArcseconds(radians));
  return {
    instrument: instrument.name,
    calibration: calibration.version,
    twoCollimation: history('twoCollimation'),
    verticalIndex: history('verticalIndex'),
    data: rows.map(({ faces, observedAt, ...row }) => ({
      ...row,
      observedAt: asMoment(observedAt),
      twoCollimationArcsec: seconds(faces.twoCollimation),
      twoCollimationSigmaArcsec: seconds(faces.twoCollimationSigma),
      collimationPairs: faces.collimationPairs ?? null,
      verticalIndexArcsec: seconds(faces.verticalIndex),
      verticalIndexSigmaArcsec: seconds(faces.verticalIndexSigma),
      indexPairs: faces.indexPairs ?? null,
    })),
  };
}
