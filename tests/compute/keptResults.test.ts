import { describe, expect, it } from 'vitest';
import { judgeSetup, type SetupLimits } from '@/lib/compute/survey/verdict';
import { Lengths } from '@/lib/services/lengths';
import { computeSetup } from '@/lib/services/setups/compute';
import { presentFaceErrors, presentGeometry, presentReductions } from '@/lib/services/setups/presentDetail';
import { fitOf, readResult } from '@/lib/services/setups/result';
import * as schema from '@/openapi/schemas/setupDetail';
import { seededChance } from '@/tests/simulator/chance';
import { observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const LIMITS: SetupLimits = {
  residual: { horizontal: 0.02, vertical: 0.02 },
  work: { radius: 100, horizontal: 0.05, vertical: 0.05 },
  checkRequired: false,
};

/** A result as version 1.1 kept it: without what 1.2 tells beside. */
function asKeptBefore() {
  const chance = seededChance(61);
  const observed = observe(
    randomSite(chance),
    randomInstrument(chance),
    { faces: ['left', 'right'], sets: 2 },
    chance,
  );
  const { result } = computeSetup({ ...asEngine(observed), limits: LIMITS, notes: [] });
  const old = JSON.parse(JSON.stringify(result));
  for (const field of [
    'orientationDetermined',
    'occupied',
    'backsights',
    'danger',
    'others',
    'unusedDistances',
    'directionSets',
    'air',
  ]) {
    delete old[field];
  }
  const { twoCollimation, verticalIndex } = old.faceErrors;
  old.faceErrors = { twoCollimation, verticalIndex };
  for (const mark of old.marks) {
    delete mark.miss;
    const { horizontal, vertical } = mark.without;
    mark.without = { horizontal, vertical };
  }
  return { result, old };
}

describe('a result that version 1.1 kept', () => {
  const { result, old } = asKeptBefore();
  const read = readResult(old);

  it('is judged as before where a check comes in', () => {
    const judged = judgeSetup(fitOf(read), LIMITS, [], read.work);
    expect(judged).toEqual({ verdict: result.verdict, verdicts: result.verdicts, reasons: result.reasons });
  });

  it('is told in today’s form, with null where it did not tell', () => {
    const length = new Lengths('m');
    const geometry = schema.Geometry.parse(presentGeometry(read, length));
    expect(geometry.leaveOneOut.map(({ position, horizontal }) => [position, horizontal])).toEqual(
      result.marks.map(({ without }) => [null, without!.horizontal]),
    );
    expect(geometry).toMatchObject({ dangerCircle: null, alternatives: [] });
    expect(schema.Reductions.parse(presentReductions(read, length))).toMatchObject({ atmosphere: null });
    expect(schema.FaceErrors.parse(presentFaceErrors(read.faceErrors!))).toMatchObject({
      twoCollimationSigmaArcsec: null,
    });
  });
});
