import type * as z from 'zod';
import type { PegReason } from '@/lib/compute/survey/levelling/pegTest';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { asMmPerM } from '@/lib/services/levelRuns/present';
import { asMoment } from '@/lib/services/moments';
import type { Words } from '@/lib/services/setups/words';
import type { PegTest } from '@/openapi/schemas/pegTest';
import type { PegTestResult, PegTestRow } from './result';

export function presentPegTest(row: PegTestRow, length: Lengths): z.output<typeof PegTest> {
  const { result } = row;
  const { staff, read, wanted } = result.adjustTo;
  return {
    id: row.id,
    clientId: row.clientId,
    instrument: row.instrumentName,
    observedAt: asMoment(row.observedAt),
    verdict: row.verdict,
    reasons: result.reasons.map((code) => wordsOf(code, result, length)),
    heightDifference: length.out(result.heightDifference),
    collimation: {
      mmPerM: asMmPerM(result.collimation),
      arcsec: toArcseconds(result.collimation),
      sigmaMmPerM: asMmPerM(result.standardDeviation),
      sigmaArcsec: toArcseconds(result.standardDeviation),
    },
    limitMmPerM: asMmPerM(result.limit),
    fit: {
      sigma0: result.test.sigma0,
      degreesOfFreedom: result.test.degreesOfFreedom,
      passed: result.test.passed,
    },
    adjustTo: { staff, read: length.out(read), wanted: length.out(wanted) },
    setups: result.standings.map((standing) => ({
      readingA: length.out(standing.readingA),
      distanceA: length.out(standing.distanceA),
      readingB: length.out(standing.readingB),
      distanceB: length.out(standing.distanceB),
    })),
    note: result.note,
    uploadId: row.uploadId,
    units: { length: length.unit },
  };
}

/** A tilt over 50 m is how the trade pictures it. */
const PICTURED = 50;

function wordsOf(code: PegReason, result: PegTestResult, length: Lengths): Words {
  const { collimation, standardDeviation, limit, adjustTo } = result;
  const tilt = (radians: number) => length.text(Math.abs(radians) * PICTURED, length.unit === 'm' ? 4 : 3);
  const over = `over ${length.text(PICTURED, 0)}`;
  const way = collimation < 0 ? 'down' : 'up';
  const reading = length.text(adjustTo.wanted, length.unit === 'm' ? 4 : 3);
  switch (code) {
    case 'collimation_within':
      return {
        code,
        text: `The line of sight points ${way} by ${tilt(collimation)} ± ${tilt(standardDeviation)} ${over}; ${tilt(limit)} is allowed.`,
      };
    case 'collimation_over':
      return {
        code,
        text: `The line of sight points ${way} by ${tilt(collimation)} ± ${tilt(standardDeviation)} ${over}; ${tilt(limit)} is allowed.`,
        action: `Adjust the level: from the last standing staff ${adjustTo.staff} should read ${reading}. Then test it again.`,
      };
    case 'collimation_unclear':
      return {
        code,
        text: `Too close to call: the line of sight points ${way} by ${tilt(collimation)} ± ${tilt(standardDeviation)} ${over}; ${tilt(limit)} is allowed.`,
        action: 'Repeat both standings, or set the pegs farther apart.',
      };
    case 'method_not_capable':
      return {
        code,
        text: `The test tells the line of sight to ± ${tilt(standardDeviation)} ${over} only; ${tilt(limit)} is allowed.`,
        action: 'Stand nearer to one peg and set the other 40 to 50 m away; repeat the readings.',
      };
    case 'standings_disagree':
      return {
        code,
        text: `The standings do not agree among themselves: σ₀ = ${result.test.sigma0.toFixed(1)}.`,
        action: 'A peg has settled or a reading is wrong: repeat the test.',
      };
  }
}
