import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { benchChecks, gradeChecks } from '@/db/schema';
import { gradeLabel } from '@/lib/compute/grade/label';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import { RELEASE_CAUTIONS } from '@/lib/services/setups/words';
import type { BenchCheck } from '@/openapi/schemas/benchCheck';
import type { GradeCheck } from '@/openapi/schemas/gradeCheck';
import { benchInstruction, offersCorrection, wordsOfBenchReason, wordsOfGradeReason } from './words';

export type GradeRow = InferSelectModel<typeof gradeChecks>;

/** What a check's layer says at the version it was checked against. */
export interface LayerFacts {
  offset: number;
  below: number;
  above: number;
  represents: 'finish' | 'subgrade' | 'base' | 'ground' | 'other';
  surfaceSha256: string;
}

export function presentGradeCheck(
  row: GradeRow,
  layer: LayerFacts,
  length: Lengths,
  decimals: number,
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
    uploadId: row.uploadId,
    units: { length: length.unit },
  };
}

export function presentBenchCheck(
  row: InferSelectModel<typeof benchChecks>,
  length: Lengths,
): z.output<typeof BenchCheck> {
  return {
    id: row.id,
    clientId: row.clientId,
    machine: row.machine,
    setupId: row.setupId,
    benchmark: row.benchmark,
    benchmarkVersion: row.benchmarkVersion,
    edge: row.edge,
    observedAt: asMoment(row.observedAt),
    knownElevation: length.out(row.knownElevation),
    readElevation: length.out(row.readElevation),
    readings: row.elevations.length,
    spread: length.outOrNull(row.spread),
    difference: length.out(row.difference),
    correction: offersCorrection(row.reasons) ? length.out(-row.difference) : null,
    tolerance: length.out(row.tolerance),
    layer: row.layerName,
    activeOffset: length.outOrNull(row.activeOffset),
    correctionAppliedFor: row.correctionAppliedFor,
    verdict: row.verdict,
    reasons: row.reasons.map(wordsOfBenchReason),
    instruction: benchInstruction(row, length),
    cautions: [...RELEASE_CAUTIONS],
    uploadId: row.uploadId,
    units: { length: length.unit },
  };
}
