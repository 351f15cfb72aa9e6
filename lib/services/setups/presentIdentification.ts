import type * as z from 'zod';
import type { Assignment, Identification } from '@/lib/compute/survey/identify';
import type { DecidingShot } from '@/lib/compute/survey/identifySettling';
import { toAzimuth, toDegrees } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import type * as schema from '@/openapi/schemas/identification';
import type { SetupTarget } from '@/openapi/schemas/setup';

/** @param instrumentHeight of the axis above the mark, m; null where no mark is occupied */
export function presentIdentification(
  identification: Identification,
  instrumentHeight: number | null,
  combinedFactor: number,
  length: Lengths,
): z.output<typeof schema.Identification> {
  const { ambiguous, margin, reflectors, best, rivals, more, strays, samePlace, deciding } = identification;
  const candidate = ({ station, marks, matched, weightedSquares, evidence }: Assignment) => ({
    position: {
      easting: length.out(station.easting),
      northing: length.out(station.northing),
      elevation:
        station.axis === null || instrumentHeight === null
          ? null
          : length.out(station.axis - instrumentHeight),
    },
    instrumentElevation: length.outOrNull(station.axis),
    orientation: toAzimuth(station.orientation),
    matched,
    weightedSquares,
    behind: best.evidence - evidence,
    targets: marks.map((target, k) => ({ target, shots: reflectors[k].shots })),
  });
  return {
    ambiguous,
    margin,
    reflectors: reflectors.length,
    matched: best.matched,
    candidates: [best, ...rivals].map(candidate),
    more,
    strays: strays.map(({ shots, nearest }) => ({
      shots,
      nearest: nearest && {
        target: nearest.target,
        horizontal: length.out(nearest.horizontal),
        vertical: length.outOrNull(nearest.vertical),
      },
    })),
    samePlace,
    deciding: deciding && presentDeciding(deciding, combinedFactor, length),
  };
}

function presentDeciding({ target, readings }: DecidingShot, combinedFactor: number, length: Lengths) {
  return {
    target,
    readings: readings.map(({ direction, zenith, slope, grid }) => ({
      horizontal: toAzimuth(direction),
      zenith: zenith === null ? null : toDegrees(zenith),
      slopeDistance: length.outOrNull(slope),
      horizontalDistance: length.out(grid / combinedFactor),
    })),
  };
}

/** Shots that hit no control point stand among the targets, nameless and unused. */
export function straysAsTargets({ strays }: Identification): z.output<typeof SetupTarget>[] {
  return strays.map(({ shots }) => ({
    target: null,
    used: false,
    shots,
    purpose: 'orient',
    status: null,
    published: null,
    residual: { easting: null, northing: null, elevation: null },
    miss: { across: null, along: null, up: null },
    without: null,
    observations: [],
  }));
}
