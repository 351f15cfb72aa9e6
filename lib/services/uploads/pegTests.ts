import { curvatureOf, DEFAULT_LEVEL_SIGMA, oneWaySigma } from '@/lib/compute/survey/levelling/accuracy';
import { LEAST_ARM, pegArm, pegTest } from '@/lib/compute/survey/levelling/pegTest';
import { toMetres } from '@/lib/compute/units/convert';
import { MILLIMETRE } from '@/lib/compute/units/table';
import type { CallerContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { PEG_TEST_VERSION, type PegTestResult } from '@/lib/services/pegTests/result';
import { surroundingsOf } from '@/lib/services/projects/load';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, pointerOf } from './draft';
import { levelFault } from './levels';

type PegItem = Document['pegTests'][number];

/** Tests the levels of the upload before its runs, which take what the last test said. */
export function draftPegTests(draft: Draft, context: CallerContext): void {
  draft.document.pegTests.forEach((item, index) => {
    draft.refused.push(...draftPegTest(draft, context, item, pointerOf(draft, 'pegTests', index)));
  });
}

function draftPegTest(draft: Draft, context: CallerContext, item: PegItem, pointer: string): ProblemItem[] {
  const { site } = draft;
  const { caller, runtime } = context;
  const { length } = draft.document.units;
  if (site.taken.pegs.has(item.clientId)) {
    const detail = `A two-peg test ${item.clientId} was accepted before.`;
    return [problemItem(`${pointer}/clientId`, 'client_id_taken', detail)];
  }
  const instrument = site.instruments.get(item.instrument);
  const fault = levelFault(instrument, item.instrument, `${pointer}/instrument`);
  const standings = item.setups.map((standing) => ({
    readingA: toMetres(standing.readingA, length),
    distanceA: toMetres(standing.distanceA, length),
    readingB: toMetres(standing.readingB, length),
    distanceB: toMetres(standing.distanceB, length),
  }));
  const flat = pegArm(standings) < LEAST_ARM ? [problemItem(`${pointer}/setups`, 'peg_test_geometry')] : [];
  if (fault || flat.length > 0 || !instrument) return [...(fault ? [fault] : []), ...flat];

  const doubleRun = instrument.levelSigma ?? DEFAULT_LEVEL_SIGMA;
  const { refraction, earthRadius } = surroundingsOf(site.project);
  const curvature = curvatureOf(refraction, earthRadius);
  const limit = item.limitMmPerM === undefined ? undefined : item.limitMmPerM * MILLIMETRE;
  const tested = pegTest(standings, oneWaySigma(doubleRun), curvature, limit);
  const result: PegTestResult = { ...tested, standings, doubleRun, curvature, note: item.note ?? null };
  const row = {
    organizationId: caller.organizationId,
    id: runtime.uuid(),
    projectId: site.project.id,
    clientId: item.clientId,
    uploadId: draft.uploadId,
    instrumentId: instrument.id,
    calibrationVersion: instrument.version,
    collimation: tested.collimation,
    collimationSigma: tested.standardDeviation,
    verdict: tested.verdict,
    result,
    methodVersion: PEG_TEST_VERSION,
    observedAt: utcInstant(item.observedAt),
  };
  draft.pegRows.push({ ...row, instrumentName: instrument.name });
  draft.rows.pegTests.push(row);
  site.pegTests.push(row);
  site.taken.pegs.add(item.clientId);
  draft.happenings.push({
    type: 'pegTest.computed',
    subject: row.id,
    projectId: row.projectId,
    data: { instrument: instrument.name, verdict: row.verdict },
  });
  return [];
}
