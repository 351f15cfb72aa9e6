import type * as z from 'zod';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import { RELEASE_CAUTIONS, type Words } from '@/lib/services/setups/words';
import type { BenchCheck } from '@/openapi/schemas/benchCheck';
import { benchInstruction, offersCorrection } from './instruction';
import type { BenchCheckRow } from './load';
import { wordsOfBenchReason } from './words';

export function presentBenchCheck(
  row: BenchCheckRow,
  length: Lengths,
  voided: Words | null = null,
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
    layerOffset: length.outOrNull(row.layerOffset),
    activeOffset: length.outOrNull(row.activeOffset),
    correctionAppliedFor: row.correctionAppliedFor,
    verdict: row.verdict,
    reasons: row.reasons.map((code) => wordsOfBenchReason(code, row, length)),
    instruction: benchInstruction(row, length),
    cautions: [...RELEASE_CAUTIONS],
    void: voided,
    uploadId: row.uploadId,
    units: { length: length.unit },
  };
}
