import { conformance, deviationFrom } from '@/lib/compute/grade/conformance';
import type { Surface } from '@/lib/compute/grade/surface';
import { trueSlopeDistance } from '@/lib/compute/survey/distance';
import { circleSigma, distanceSigma } from '@/lib/compute/survey/instrument';
import { type Point, polarCovariance, polarPoint } from '@/lib/compute/survey/polarPoint';
import { toMetres } from '@/lib/compute/units/convert';
import type { CallerContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { forceFault, guided } from '@/lib/services/setups/force';
import type { SetupResult } from '@/lib/services/setups/result';
import { normaliseShot, type Readings } from '@/lib/services/shots/normalise';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, findSetup, pointerOf } from './draft';
import type { SiteLayer, SiteSetup } from './site';

type GradeItem = Document['gradeShots'][number];

/** Checks ground against its layers. @param surfaces of the layers, by hash */
export function draftGradeShots(
  draft: Draft,
  context: CallerContext,
  surfaces: ReadonlyMap<string, Surface>,
): void {
  const before = draft.gradeRows.length;
  draft.document.gradeShots.forEach((item, index) => {
    draft.refused.push(...draftShot(draft, context, surfaces, item, pointerOf(draft, 'gradeShots', index)));
  });
  const made = draft.gradeRows.slice(before);
  for (const layer of new Set(made.map((row) => row.layerName))) {
    const own = made.filter((row) => row.layerName === layer);
    const count = (verdict: string) => own.filter((row) => row.verdict === verdict).length;
    draft.happenings.push({
      type: 'grade.checked',
      subject: layer,
      projectId: draft.site.project.id,
      data: { uploadId: draft.uploadId, pass: count('pass'), hold: count('hold'), fail: count('fail') },
    });
  }
}

/** A place on the ground with its covariance (3 × 3; null where nothing is known of it). */
interface Place {
  point: Point;
  covariance: Float64Array | null;
  setup: SiteSetup | null;
  reading: Record<string, unknown> | null;
}

function draftShot(
  draft: Draft,
  context: CallerContext,
  surfaces: ReadonlyMap<string, Surface>,
  item: GradeItem,
  pointer: string,
): ProblemItem[] {
  const { site } = draft;
  if (site.taken.grade.has(item.clientId)) {
    return [
      problemItem(
        `${pointer}/clientId`,
        'client_id_taken',
        `A grade shot ${item.clientId} was accepted before.`,
      ),
    ];
  }
  const layer = site.layers.get(item.layer);
  if (!layer)
    return [
      problemItem(`${pointer}/layer`, 'layer_unknown', `There is no layer ${item.layer} in this project.`),
    ];
  const place = placeOf(draft, item, pointer);
  if (Array.isArray(place)) return place;

  const { caller, runtime } = context;
  const observedAt = utcInstant(item.observedAt);
  const { setup } = place;
  const fault = setup && forceFault(setup.setup, setup.releases, observedAt);
  const judged = judge(place, layer, surfaces.get(layer.surfaceSha256)!);
  const row: Draft['gradeRows'][number] = {
    organizationId: caller.organizationId,
    id: runtime.uuid(),
    projectId: site.project.id,
    clientId: item.clientId,
    uploadId: draft.uploadId,
    layerName: layer.name,
    layerVersion: layer.version,
    surfaceId: layer.surfaceId,
    setupId: setup?.setup.id ?? null,
    setupResultVersion: setup?.setup.resultVersion ?? null,
    inForce: !fault,
    independent: !setup || !guided(setup.releases, layer.name),
    ...place.point,
    designElevation: judged.designElevation,
    deviation: judged.deviation,
    deviationNormal: judged.normal,
    standardDeviation: judged.standardDeviation,
    probability: judged.probability,
    verdict: fault ? 'hold' : judged.verdict,
    reasons: [...(fault ? [fault] : []), ...judged.reasons],
    reading: place.reading,
    observedAt,
  };
  draft.gradeRows.push(row);
  draft.rows.gradeChecks.push(row);
  site.taken.grade.add(item.clientId);
  return [];
}

function judge({ point, covariance }: Place, layer: SiteLayer, surface: Surface) {
  const design = surface.at(point.easting, point.northing);
  if (!design) {
    return {
      designElevation: null,
      deviation: null,
      normal: null,
      standardDeviation: null,
      probability: null,
      verdict: 'hold' as const,
      reasons: ['outside_surface'],
    };
  }
  const { deviation, normal, standardDeviation } = deviationFrom(
    design,
    layer.offset,
    point.elevation,
    covariance,
  );
  const { probability, verdict, notCapable } = conformance(deviation, standardDeviation, layer);
  const reasons: string[] = [];
  if (notCapable) reasons.push('method_not_capable');
  else if (verdict === 'hold') reasons.push('too_close_to_call');
  if (verdict === 'fail') reasons.push(deviation > 0 ? 'ground_high' : 'ground_low');
  if (standardDeviation === null) reasons.push('judged_as_read');
  return {
    designElevation: design.elevation,
    deviation,
    normal,
    standardDeviation,
    probability,
    verdict,
    reasons,
  };
}

function placeOf(draft: Draft, item: GradeItem, pointer: string): Place | ProblemItem[] {
  const { length } = draft.document.units;
  if (item.geodetic) {
    const detail = 'The project’s frame is a local grid without a datum.';
    return [problemItem(`${pointer}/geodetic`, 'frame_unsupported', detail)];
  }
  const setup = item.setup === undefined ? null : findSetup(draft, item.setup);
  if (item.setup !== undefined && !setup) {
    return [
      problemItem(`${pointer}/setup`, 'setup_unknown', `There is no setup ${item.setup} in this project.`),
    ];
  }
  if (item.shot && setup) return placeOfShot(draft, item, setup, pointer);
  const { easting, northing, elevation } = item.position!;
  return {
    point: {
      easting: toMetres(easting, length),
      northing: toMetres(northing, length),
      elevation: toMetres(elevation, length),
    },
    covariance: positionCovariance(draft, item),
    setup,
    reading: null,
  };
}

function positionCovariance(draft: Draft, { sigma }: GradeItem): Float64Array | null {
  const { positionSigmaHorizontal, positionSigmaVertical } = draft.site.project;
  const { length } = draft.document.units;
  const horizontal = sigma ? toMetres(sigma.horizontal, length) : positionSigmaHorizontal;
  const vertical = sigma ? toMetres(sigma.vertical, length) : positionSigmaVertical;
  if (horizontal === null || vertical === null) return null;
  return Float64Array.of(horizontal ** 2, 0, 0, 0, horizontal ** 2, 0, 0, 0, vertical ** 2);
}

function placeOfShot(
  draft: Draft,
  item: GradeItem,
  setup: SiteSetup,
  pointer: string,
): Place | ProblemItem[] {
  const at = `${pointer}/shot`;
  const readings = normaliseShot(item.shot!, draft.document.units, at);
  if (Array.isArray(readings)) return readings;
  const { direction, zenith, distance } = readings;
  if (direction === null || zenith === null || distance === null) {
    const detail = 'A point needs horizontal, zenith and slopeDistance.';
    return [problemItem(at, 'reading_incomplete', detail)];
  }
  const { result } = setup;
  if (!result.orientationDetermined) {
    const detail = `No direction was read in ${item.setup}.`;
    return [problemItem(`${pointer}/setup`, 'setup_without_orientation', detail)];
  }
  if (!result.heightDetermined)
    return [problemItem(`${pointer}/setup`, 'setup_without_height', `${item.setup} has no height.`)];
  const polar = {
    direction: readings.face === 'left' ? direction : direction - Math.PI,
    zenith: readings.face === 'left' ? zenith : 2 * Math.PI - zenith,
    distance: trueSlopeDistance(distance, result.ppm),
  };
  const { targetHeight } = readings;
  return {
    point: polarPoint(result.station, { ...polar, targetHeight }, result.surroundings),
    covariance: polarCovariance(
      result.station,
      polar,
      sigmasOf(readings, polar, result),
      result.surroundings,
    ),
    setup,
    reading: { ...readings },
  };
}

/** A point of ground is read in one face: √2 of the stated accuracy, and collimation and index remain. */
function sigmasOf(
  readings: Readings,
  polar: { zenith: number; distance: number },
  { accuracy, surroundings, ppm }: SetupResult,
) {
  const single = (stated: number, remaining: number) => Math.hypot(circleSigma(stated, 1, 0), remaining);
  const scale = ppm === null ? surroundings.unknownAtmospherePpm * 1e-6 * polar.distance : 0;
  return {
    direction: single(accuracy.direction, accuracy.collimation / Math.sin(polar.zenith)),
    zenith: single(accuracy.zenith, accuracy.collimation),
    distance: Math.hypot(distanceSigma(accuracy, polar.distance), scale),
    targetHeight: readings.targetHeightSigma ?? accuracy.targetHeight,
    centring: readings.targetCentringSigma ?? accuracy.targetCentring,
  };
}
