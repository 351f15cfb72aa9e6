import { type ForecastTask, forecastSetup } from '@/lib/compute/survey/forecast';
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

/** Eight marks around a field of cells 6 m apart, as a forecast of 2,500 cells has them. */
const forecast: ForecastTask = {
  targets: Array.from({ length: 8 }, (_, i): ControlMark => {
    const azimuth = (i * Math.PI) / 4;
    return {
      name: `HT-${i + 1}`,
      version: 1,
      easting: 150 + 180 * Math.sin(azimuth),
      northing: 150 + 180 * Math.cos(azimuth),
      elevation: 100 + i,
      horizontalSigma: MARK_SIGMA,
      verticalSigma: MARK_SIGMA,
      status: 'trusted',
    };
  }),
  plan: { faces: ['left', 'right'], sets: 1, kinds: ['direction', 'zenith', 'distance'], targetHeight: 0 },
  sight: { shortest: 2, longest: 1000 },
  accuracy,
  surroundings: DEFAULT_SURROUNDINGS,
  atmosphereKnown: true,
  limits,
};
const CELLS_A_SIDE = 50;

/** Runs `work` on one number after the other for a while; how many a second. */
function perSecond(seconds: number, work: (number: number) => void): number {
  const began = performance.now();
  let done = 0;
  while (performance.now() - began < seconds * 1000) work(done++);
  return done / ((performance.now() - began) / 1000);
}

/** Station, statistics, every mark left out in turn, and the verdict. */
export function setupsPerSecond(seconds: number): number {
  return perSecond(seconds, (i) => computeSetup(tasks[i % VARIANTS]));
}

/** The same without the verdict. */
export function fitsPerSecond(seconds: number): number {
  return perSecond(seconds, (i) => fitStation(tasks[i % VARIANTS]));
}

/** Cells of a forecast's map, eight targets in both faces. */
export function forecastCellsPerSecond(seconds: number): number {
  return perSecond(seconds, (i) => {
    const [column, row] = [i % CELLS_A_SIDE, Math.floor(i / CELLS_A_SIDE) % CELLS_A_SIDE];
    forecastSetup({ easting: 6 * column, northing: 6 * row, axis: 101.6 }, forecast);
  });
}
