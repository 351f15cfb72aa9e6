import type * as z from 'zod';
import { CRITICAL_W, DELTA_0 } from '@/lib/compute/statistics/distributions';
import type { Explanation } from '@/lib/compute/survey/explain';
import { toArcseconds, toAzimuth } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type {
  Setup,
  SetupCheck,
  Explanation as SetupExplanation,
  SetupStatus,
  SetupTarget,
} from '@/openapi/schemas/setup';
import { presentDrift } from './driftWords';
import { wordsOfExplanation } from './explanationWords';
import type { CheckRow, LoadedSetup, ReleaseRow, SetupRow } from './load';
import {
  presentBacksight,
  presentDirectionSets,
  presentFaceErrors,
  presentGeometry,
  presentOccupied,
  presentReductions,
} from './presentDetail';
import { presentIdentification, straysAsTargets } from './presentIdentification';
import { explanationsOf, type KeptMark, type SetupResult } from './result';
import { RELEASE_CAUTIONS, radioOfSetup, wordsOfNote, wordsOfReasons } from './words';

/** The state of a setup now: expiry is derived, never stored. */
export function statusOf(
  setup: Pick<SetupRow, 'state' | 'validUntil'>,
  now: Date,
): z.output<typeof SetupStatus> {
  const expired =
    setup.state === 'released' && setup.validUntil !== null && new Date(setup.validUntil) <= now;
  return expired ? 'expired' : setup.state;
}

export function presentSetup(loaded: LoadedSetup, length: Lengths, now: Date): z.output<typeof Setup> {
  const { setup, result: row, checks, release } = loaded;
  const { result } = row;
  const { station } = result;
  const status = statusOf(setup, now);
  const explanations = explanationsOf(result);
  const deviation = (i: number) => Math.sqrt(station.covariance[i * 6]);
  const { heightDetermined: hasHeight, orientationDetermined: oriented } = result;
  const presentedChecks = checks
    .filter((check) => check.resultVersion <= row.version)
    .map((check) => presentCheck(check, length));
  return {
    id: setup.id,
    clientId: setup.clientId,
    station: setup.station,
    method: setup.method,
    instrument: setup.instrumentName,
    toleranceClass: setup.toleranceClass,
    observedAt: asMoment(setup.observedAt),
    status,
    verdict: result.verdict,
    verdicts: result.verdicts,
    reasons: wordsOfReasons(result.reasons, explanations, length),
    notes: result.notes.map((note) => wordsOfNote(note, length)),
    radio: radioOfSetup(
      setup.station,
      result.verdict,
      result.reasons,
      explanations,
      setup.toleranceClass,
      status,
      length,
    ),
    cautions: [...RELEASE_CAUTIONS],
    units: { length: length.unit, angle: 'deg' },
    position: {
      easting: length.out(station.easting),
      northing: length.out(station.northing),
      elevation:
        hasHeight && setup.instrumentHeight !== null
          ? length.out(station.axis - setup.instrumentHeight)
          : null,
    },
    instrumentElevation: hasHeight ? length.out(station.axis) : null,
    instrumentHeight: length.outOrNull(setup.instrumentHeight),
    orientation: oriented ? toAzimuth(station.orientation) : null,
    standardDeviations: {
      easting: length.out(deviation(0)),
      northing: length.out(deviation(1)),
      elevation: hasHeight ? length.out(deviation(2)) : null,
      orientationArcsec: oriented ? toArcseconds(deviation(3)) : null,
    },
    errorEllipse: {
      semiMajor: length.out(result.ellipse95.semiMajor),
      semiMinor: length.out(result.ellipse95.semiMinor),
      azimuth: toAzimuth(result.ellipse95.azimuth),
      confidence: 0.95,
    },
    tolerance: {
      horizontal: length.out(result.limits.residual.horizontal),
      vertical: length.out(result.limits.residual.vertical),
    },
    accuracyAtWork: {
      radius: length.out(result.limits.work.radius),
      horizontal: oriented ? length.out(result.work.horizontal) : null,
      vertical: hasHeight ? length.out(result.work.vertical) : null,
      confidence: 0.95,
      limits: {
        horizontal: length.out(result.limits.work.horizontal),
        vertical: length.out(result.limits.work.vertical),
      },
    },
    fit: {
      sigma0: result.test.sigma0,
      degreesOfFreedom: result.test.degreesOfFreedom,
      chiSquare: {
        value: result.test.value,
        lower: result.test.lower,
        upper: result.test.upper,
        passed: result.test.passed,
      },
      scaled: result.scale !== 1,
      dataSnooping: { criticalW: CRITICAL_W, delta0: DELTA_0, alpha: 0.001, power: 0.8 },
      converged: result.converged,
      iterations: result.iterations,
    },
    geometry: presentGeometry(result, length),
    occupied: result.occupied && presentOccupied(result.occupied, length),
    backsights: result.backsights.map((backsight) => presentBacksight(backsight, result.limits, length)),
    reductions: presentReductions(result, length),
    faceErrors: result.faceErrors && presentFaceErrors(result.faceErrors),
    directionSets: result.directionSets && presentDirectionSets(result.directionSets),
    targets: [
      ...result.marks.map((mark) => presentMark(mark, length)),
      ...result.leftOut.map((mark) => presentLeftOut(mark, length)),
      ...(result.identification ? straysAsTargets(result.identification) : []),
      ...presentedChecks.filter((check) => check.clientId === null).flatMap(targetsOfCheck),
    ],
    checks: presentedChecks,
    explanations: explanations.map((explanation) => presentExplanation(explanation, length)),
    identification:
      result.identification &&
      presentIdentification(
        result.identification,
        setup.instrumentHeight,
        result.surroundings.combinedFactor,
        length,
      ),
    release: release && presentRelease(release, length),
    validUntil: asMomentOrNull(setup.validUntil),
    supersedes: setup.supersedesId,
    supersededBy: setup.supersededById,
    excluded: setup.excluded,
    submittedBy: setup.submittedBy,
    provenance: {
      method: row.method,
      version: row.methodVersion,
      resultVersion: row.version,
      uploadId: setup.uploadId,
      instrument: { name: setup.instrumentName, calibration: setup.calibrationVersion },
      control: [...result.marks, ...result.leftOut].map(({ name, version }) => ({ name, version })),
      computedAt: asMoment(row.computedAt),
    },
  };
}

function presentExplanation(explanation: Explanation, length: Lengths): z.output<typeof SetupExplanation> {
  const { size, unit, text, confirm } = wordsOfExplanation(explanation, length);
  const { fault, subject, weight } = explanation;
  return {
    fault,
    subject: subject.length > 0 ? subject.join(', ') : null,
    size,
    unit,
    weight,
    text,
    confirm,
  };
}

function presentMark(mark: KeptMark, length: Lengths): z.output<typeof SetupTarget> {
  return {
    target: mark.name,
    used: true,
    shots: mark.shots,
    purpose: 'orient',
    status: mark.status,
    published: presentPlace(mark.published, length),
    residual: {
      easting: length.outOrNull(mark.residual.easting),
      northing: length.outOrNull(mark.residual.northing),
      elevation: length.outOrNull(mark.residual.elevation),
    },
    miss: {
      across: length.outOrNull(mark.miss.across),
      along: length.outOrNull(mark.miss.along),
      up: length.outOrNull(mark.miss.up),
    },
    without: mark.without && {
      horizontal: length.out(mark.without.horizontal),
      vertical: length.outOrNull(mark.without.vertical),
    },
    observations: mark.readings.map(
      ({ kind, set, faces, residual, standardised, redundancy, minimalDetectable }) => {
        const out = kind === 'distance' ? (value: number) => length.out(value) : toArcseconds;
        return {
          kind,
          set,
          faces,
          residual: out(residual),
          unit: kind === 'distance' ? length.unit : ('arcsec' as const),
          standardised,
          redundancy,
          minimalDetectable: minimalDetectable === null ? null : out(minimalDetectable),
        };
      },
    ),
  };
}

const NO_MISS = { across: null, along: null, up: null };

function presentPlace(place: KeptMark['published'], length: Lengths) {
  return {
    easting: length.out(place.easting),
    northing: length.out(place.northing),
    elevation: length.outOrNull(place.elevation),
  };
}

function presentLeftOut(
  { name, published, shots }: SetupResult['leftOut'][number],
  length: Lengths,
): z.output<typeof SetupTarget> {
  return {
    target: name,
    used: false,
    shots,
    purpose: 'orient',
    status: 'quarantined',
    published: presentPlace(published, length),
    residual: { easting: null, northing: null, elevation: null },
    miss: NO_MISS,
    without: null,
    observations: [],
  };
}

/** Check shots of the setup's own upload stand among its targets too, unused. */
function targetsOfCheck({ purpose, targets }: z.output<typeof SetupCheck>): z.output<typeof SetupTarget>[] {
  return targets.map(({ target, status, published, shots, difference }) => ({
    target,
    used: false,
    shots,
    purpose,
    status,
    published,
    residual: difference,
    miss: NO_MISS,
    without: null,
    observations: [],
  }));
}

export function presentCheck(row: CheckRow, length: Lengths): z.output<typeof SetupCheck> {
  const { result } = row;
  return {
    id: row.id,
    clientId: row.clientId,
    setupId: row.setupId,
    purpose: row.purpose,
    observedAt: asMoment(row.observedAt),
    agreed: row.agreed,
    targets: result.targets.map((t) => ({
      target: t.target,
      role: t.inFit ? ('drift' as const) : ('independent' as const),
      status: t.status,
      published: presentPlace(t.published, length),
      shots: t.shots,
      difference: {
        easting: length.out(t.difference.easting),
        northing: length.out(t.difference.northing),
        elevation: length.outOrNull(t.difference.elevation),
      },
      uncertainty: {
        horizontal: length.out(t.uncertainty.horizontal),
        vertical: length.outOrNull(t.uncertainty.vertical),
      },
      tolerance: {
        horizontal: length.out(result.tolerance.horizontal),
        vertical: length.out(result.tolerance.vertical),
      },
      horizontal: t.horizontal,
      vertical: t.vertical,
    })),
    drift: result.drift ? presentDrift(result.drift, length) : null,
    setupVerdict: result.verdict,
    carriedFrom: row.carriedFromId,
    units: { length: length.unit },
  };
}

function presentRelease(release: ReleaseRow, length: Lengths) {
  return {
    machine: release.machine,
    layer: release.layerName,
    layerVersion: release.layerVersion,
    surfaceSha256: release.surfaceSha256?.toString('hex') ?? null,
    offset: length.outOrNull(release.offset),
    note: release.note,
    releasedAt: asMoment(release.effectiveAt),
    releasedBy: release.actorName,
    validUntil: asMoment(release.validUntil!),
  };
}
