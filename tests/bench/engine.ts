import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { fitStation } from '@/lib/compute/survey/stationFit';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { computeSetup, type SetupTask } from '@/lib/services/setups/compute';
import { ACCURACY, ARCSECOND, MARK_SIGMA, MARKS, pointings, TARGET_HEIGHT } from './fieldwork';

const VARIANTS = 200;
const accuracy = {
  ...DEFAULT_ACCURACY,
  direction: ACCURACY.directionArcsec * ARCSECOND,
  zenith: ACCURACY.zenithArcsec * ARCSECOND,
  distance: ACCURACY.distanceMm / 1000,
  distancePpm: ACCURACY.distancePpm,
};
const control = new Map(
  MARKS.map((mark): [string, ControlMark] => [
    mark.name,
    { ...mark, version: 1, horizontalSigma: MARK_SIGMA, verticalSigma: MARK_SIGMA, status: 'trusted' },
  ]),
);
const limits = {
  residual: { horizontal: 0.01, vertical: 0.01 },
  work: { radius: 150, horizontal: 0.03, vertical: 0.015 },
  checkRequired: false,
};

/** Setups of four targets in both faces, as the engine gets them: radians and metres. */
export const tasks: SetupTask[] = Array.from({ length: VARIANTS }, (_, seed) => ({
  shots: pointings(seed + 1).map(
    (pointing, i): Shot => ({
      id: `st-7/${i + 1}`,
      target: pointing.target,
      purpose: 'orient',
      face: pointing.face,
      set: 1,
      direction: pointing.horizontal,
      zenith: pointing.zenith,
      distance: {
        slopeDistance: pointing.slopeDistance,
        prismConstantMm: -30,
        prismConstantAppliedMm: -30,
        appliedPpm: 0,
      },
      targetHeight: TARGET_HEIGHT,
      targetCentringSigma: null,
      targetHeightSigma: null,
    }),
  ),
  control,
  accuracy,
  surroundings: DEFAULT_SURROUNDINGS,
  ppm: 0,
  limits,
  notes: [],
}));

/** Runs `work` on one task after the other for a while; how many a second. */
function perSecond(seconds: number, work: (task: SetupTask) => void): number {
  const began = performance.now();
  let done = 0;
  while (performance.now() - began < seconds * 1000) work(tasks[done++ % VARIANTS]);
  return done / ((performance.now() - began) / 1000);
}

/** Station, statistics, every mark left out in turn, and the verdict. */
export function setupsPerSecond(seconds: number): number {
  return perSecond(seconds, computeSetup);
}

/** The same without the verdict. */
export function fitsPerSecond(seconds: number): number {
  return perSecond(seconds, fitStation);
}
