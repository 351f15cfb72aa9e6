import type { DistanceReading } from '@/lib/compute/survey/distance';
import type { Face } from '@/lib/compute/survey/shots';
import { toMetres } from '@/lib/compute/units/convert';
import { MILLIMETRE } from '@/lib/compute/units/table';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { GroundShot, Shot } from '@/openapi/schemas/shot';
import { readHorizontal, readZenith, type Units } from './units';

/** Readings of one pointing in SI units; what was not read is null. */
export interface Readings {
  face: Face;
  set: number;
  direction: number | null;
  zenith: number | null;
  distance: DistanceReading | null;
  targetHeight: number;
  targetCentringSigma: number | null;
  targetHeightSigma: number | null;
  compensator: 'on' | 'off';
  distanceMode: 'prism' | 'reflectorless';
}

/** @param pointer of the shot, for problems */
export function normaliseShot(
  shot: Shot | GroundShot,
  units: Units,
  pointer: string,
): Readings | ProblemItem[] {
  const problems: ProblemItem[] = [];
  const angle = (value: number | ProblemItem | null): number | null => {
    if (typeof value !== 'object' || value === null) return value;
    problems.push(value);
    return null;
  };
  const { horizontal, zenith, slopeDistance, face } = shot;
  const direction =
    horizontal === undefined ? null : angle(readHorizontal(horizontal, units.angle, `${pointer}/horizontal`));
  const zenithAngle =
    zenith === undefined ? null : angle(readZenith(zenith, units.angle, face, `${pointer}/zenith`));
  if (problems.length > 0) return problems;
  const millimetres = (value: number | undefined) => (value === undefined ? null : value * MILLIMETRE);
  return {
    face,
    set: shot.set,
    direction,
    zenith: zenithAngle,
    distance:
      slopeDistance === undefined
        ? null
        : {
            slopeDistance: toMetres(slopeDistance, units.length),
            prismConstantMm: shot.prismConstantMm ?? 0,
            prismConstantAppliedMm: shot.prismConstantAppliedMm ?? 0,
            appliedPpm: shot.appliedPpm ?? 0,
          },
    targetHeight: toMetres(shot.targetHeight ?? 0, units.length),
    targetCentringSigma: millimetres(shot.targetCentringSigmaMm),
    targetHeightSigma: millimetres(shot.targetHeightSigmaMm),
    compensator: shot.compensator,
    distanceMode: shot.distanceMode,
  };
}
