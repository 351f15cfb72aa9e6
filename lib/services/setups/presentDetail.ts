import type * as z from 'zod';
import type { BacksightCheck, Comparison } from '@/lib/compute/survey/backsights';
import { outcome } from '@/lib/compute/survey/checkShots';
import { isNear } from '@/lib/compute/survey/dangerCircle';
import type { DirectionSets } from '@/lib/compute/survey/directionSets';
import type { FaceErrors } from '@/lib/compute/survey/faces';
import type { FittedOccupation } from '@/lib/compute/survey/stationFit';
import type { SetupLimits } from '@/lib/compute/survey/verdict';
import { fromKelvin, fromPascal, toArcseconds, toAzimuth, toDegrees } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import type * as schema from '@/openapi/schemas/setupDetail';
import type { SetupResult } from './result';

const arcseconds = (radians: number | null) => (radians === null ? null : toArcseconds(radians));

export function presentGeometry(result: SetupResult, length: Lengths): z.output<typeof schema.Geometry> {
  const { marks, geometry, danger, others, station } = result;
  let weakest: { target: string; shift: number } | null = null;
  for (const { name: target, without } of marks) {
    if (without && without.horizontal > (weakest?.shift ?? -1))
      weakest = { target, shift: without.horizontal };
  }
  const plan = (place: { easting: number; northing: number }) => ({
    easting: length.out(place.easting),
    northing: length.out(place.northing),
  });
  return {
    targets: marks.filter((mark) => mark.horizontal).length,
    spreadDegrees: toDegrees(geometry.spread),
    insideControl: geometry.inside,
    weakestWithout: weakest && { ...weakest, shift: length.out(weakest.shift) },
    leaveOneOut: marks.map(({ name, without }) => ({
      target: name,
      position:
        without === null || without.easting === null || without.northing === null
          ? null
          : {
              ...plan({
                easting: station.easting + without.easting,
                northing: station.northing + without.northing,
              }),
              instrumentElevation:
                without.vertical === null || !result.heightDetermined
                  ? null
                  : length.out(station.axis + without.vertical),
            },
      horizontal: length.outOrNull(without?.horizontal ?? null),
      vertical: length.outOrNull(without?.vertical ?? null),
      turnArcsec: arcseconds(without?.orientation ?? null),
    })),
    dangerCircle: danger && {
      marks: danger.marks,
      centre: plan(danger.circle),
      radius: length.out(danger.circle.radius),
      distance: length.out(danger.distance),
      ratio: Math.abs(danger.distance) / danger.circle.radius,
      near: isNear(danger),
    },
    alternatives: others.map(({ worseBy, orientation, ...place }) => ({
      ...plan(place),
      orientation: result.orientationDetermined ? toAzimuth(orientation) : null,
      worseBy,
    })),
  };
}

export function presentOccupied(
  occupied: FittedOccupation,
  length: Lengths,
): z.output<typeof schema.Occupied> {
  const { name, version, status, published, residual, standardised, without, heightWithout } = occupied;
  const place = (of: typeof published) => ({
    easting: length.out(of.easting),
    northing: length.out(of.northing),
    elevation: length.outOrNull(of.elevation),
  });
  return {
    point: name,
    version,
    status,
    published: place(published),
    residual: place(residual),
    standardised,
    without: {
      horizontal: length.outOrNull(without?.horizontal ?? null),
      vertical: length.outOrNull(heightWithout),
    },
  };
}

export function presentBacksight(
  { target, distance, height }: BacksightCheck,
  { residual }: SetupLimits,
  length: Lengths,
): z.output<typeof schema.Backsight> {
  const compared = (comparison: Comparison | null, tolerance: number) =>
    comparison && {
      measured: length.out(comparison.measured),
      published: length.out(comparison.published),
      difference: length.out(comparison.difference),
      uncertainty: length.out(comparison.uncertainty),
      tolerance: length.out(tolerance),
      outcome: outcome(comparison.difference, comparison.uncertainty, tolerance),
    };
  return {
    target,
    distance: compared(distance, residual.horizontal),
    height: compared(height, residual.vertical),
  };
}

export function presentFaceErrors(faces: FaceErrors): z.output<typeof schema.FaceErrors> {
  return {
    twoCollimationArcsec: arcseconds(faces.twoCollimation),
    twoCollimationSigmaArcsec: arcseconds(faces.twoCollimationSigma),
    twoCollimationSpreadArcsec: arcseconds(faces.twoCollimationSpread),
    // Version 1.1 did not count them.
    collimationPairs: faces.collimationPairs || null,
    verticalIndexArcsec: arcseconds(faces.verticalIndex),
    verticalIndexSigmaArcsec: arcseconds(faces.verticalIndexSigma),
    verticalIndexSpreadArcsec: arcseconds(faces.verticalIndexSpread),
    indexPairs: faces.indexPairs || null,
  };
}

export function presentDirectionSets(sets: DirectionSets): z.output<typeof schema.DirectionSets> {
  return {
    sets: sets.sets,
    directions: sets.directions.map(({ target, mean, largest }) => ({
      target,
      mean: toAzimuth(mean),
      largestArcsec: toArcseconds(largest),
    })),
    degreesOfFreedom: sets.degreesOfFreedom,
    standardDeviationArcsec: toArcseconds(sets.ofOneSet),
    ofMeanArcsec: toArcseconds(sets.ofMean),
    statedArcsec: toArcseconds(sets.stated),
    asStated: sets.asStated,
  };
}

export function presentReductions(
  { ppm, air, surroundings, station }: SetupResult,
  length: Lengths,
): z.output<typeof schema.Reductions> {
  return {
    ppm,
    atmosphere: air && {
      temperatureC: fromKelvin(air.temperature, 'C'),
      pressureHpa: fromPascal(air.pressure, 'hPa'),
      humidityPercent: 100 * air.humidity,
      humiditySource: air.humiditySource,
    },
    carrierWavelengthNm: air && air.carrierWavelength * 1e9,
    referenceRefractivity: air?.referenceRefractivity ?? null,
    combinedFactor: surroundings.combinedFactor,
    refraction: {
      coefficient: surroundings.refraction,
      sigma: surroundings.refractionSigma,
      fitted: station.refraction,
    },
    earthRadius: length.out(surroundings.earthRadius),
  };
}
