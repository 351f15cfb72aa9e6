import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { gradeChecks } from '@/db/schema';
import { gradeLabel } from '@/lib/compute/grade/label';
import type { LayerFacts } from '@/lib/services/layers/facts';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { Words } from '@/lib/services/setups/words';
import type { GradeCheck } from '@/openapi/schemas/gradeCheck';
import { wordsOfGradeReason } from './words';

export type GradeRow = InferSelectModel<typeof gradeChecks>;

export function presentGradeCheck(
  row: GradeRow,
  layer: LayerFacts,
  length: Lengths,
  decimals: number,
  voided: Words | null = null,
): z.output<typeof GradeCheck> {
  const design = row.designElevation;
  return {
    id: row.id,
    clientId: row.clientId,
    layer: row.layerName,
    layerVersion: row.layerVersion,
    observedAt: asMoment(row.observedAt),
    point: {
      easting: length.out(row.easting),
      northing: length.out(row.northing),
      elevation: length.out(row.elevation),
    },
    designElevation: length.outOrNull(design),
    layerElevation: design === null ? null : length.out(design + layer.offset),
    finishElevation: layer.represents === 'finish' ? length.outOrNull(design) : null,
    deviation: length.outOrNull(row.deviation),
    deviationNormal: length.outOrNull(row.deviationNormal),
    label: row.deviation === null ? null : gradeLabel(length.out(row.deviation), decimals),
    standardDeviation: length.outOrNull(row.standardDeviation),
    verdict: row.verdict,
    reasons: row.reasons.map(wordsOfGradeReason),
    conformanceProbability: row.probability,
    independent: row.independent,
    tolerance: { below: length.out(layer.below), above: length.out(layer.above) },
    station: null,
    offset: null,
    surface: { id: row.surfaceId, sha256: layer.surfaceSha256 },
    setupId: row.setupId,
    void: voided,
    uploadId: row.uploadId,
    units: { length: length.unit },
  };
}
