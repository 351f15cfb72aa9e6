import type * as z from 'zod';
import type { Ellipse } from '@/lib/compute/adjustment/ellipse';
import type { NetworkObservation } from '@/lib/compute/survey/networkResult';
import { toAzimuth } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type {
  Adjustment,
  AdjustmentObservation,
  AdjustmentPoint,
  AdjustmentResult,
} from '@/openapi/schemas/adjustment';
import type { AdjustmentRow, LoadedAdjustment, Sources } from './load';
import { unitOf } from './observationUnits';
import type { AdjustmentInput, KeptPoint, KeptResult } from './result';
import { APPLY_CAUTIONS, wordsOfLeftOut, wordsOfNote, wordsOfReason, wordsOfRemoved } from './words';

/** What a list shows of an adjustment. */
export function presentSummary(
  adjustment: AdjustmentRow,
  status: LoadedAdjustment['jobStatus'],
  verdict: KeptResult['verdict'] | null,
) {
  const { appliedAt, appliedBy, appliedNote } = adjustment;
  return {
    id: adjustment.id,
    name: adjustment.name,
    job: { id: adjustment.jobId, status },
    verdict,
    applied: appliedAt === null ? null : { at: asMoment(appliedAt), by: appliedBy!, note: appliedNote },
    createdBy: adjustment.createdBy,
    createdAt: asMoment(adjustment.createdAt),
  };
}

/** @param named observations that the result speaks of, by their numbers */
export function presentAdjustment(
  { adjustment, jobStatus, result: row }: LoadedAdjustment,
  named: ReadonlyMap<number, NetworkObservation>,
  length: Lengths,
): z.output<typeof Adjustment> {
  const { request } = adjustment;
  return {
    ...presentSummary(adjustment, jobStatus, row?.verdict ?? null),
    request: { ...request, since: asMomentOrNull(request.since), until: asMomentOrNull(request.until) },
    result: row && {
      ...presentResult(row.result, row.input, request.datum.kind, named, length),
      provenance: {
        method: row.method,
        version: row.methodVersion,
        computedAt: asMoment(row.computedAt),
        control: row.input.control.map(({ name, version }) => ({ name, version })),
        setups: row.input.setups.map(({ id, resultVersion }) => ({ id, resultVersion })),
        levelRuns: row.input.levelRuns.map(({ id }) => id),
      },
    },
    cautions: [...APPLY_CAUTIONS],
    units: { length: length.unit, angle: 'deg' },
  };
}

function presentResult(
  result: KeptResult,
  input: AdjustmentInput,
  datumKind: z.output<typeof AdjustmentResult>['datum']['kind'],
  named: ReadonlyMap<number, NetworkObservation>,
  length: Lengths,
): Omit<z.output<typeof AdjustmentResult>, 'provenance'> {
  const { test } = result;
  const control = new Map(input.control.map((point) => [point.name, point]));
  const setups = new Map(input.setups.map((setup) => [setup.id, setup]));
  return {
    verdict: result.verdict,
    reasons: result.reasons.map((reason) => wordsOfReason(reason, named, input)),
    notes: result.notes.map(wordsOfNote),
    fit: {
      sigma0: test.sigma0,
      degreesOfFreedom: test.degreesOfFreedom,
      unknowns: result.unknowns,
      observations: result.observations,
      chiSquare: { value: test.value, lower: test.lower, upper: test.upper, passed: test.passed },
      scaled: result.scale !== 1,
      converged: result.converged,
      iterations: result.iterations,
    },
    datum: {
      kind: datumKind,
      free: [...result.datum.free],
      held: result.datum.held,
      weighted: result.datum.weighted,
    },
    points: result.points.map((point) => presentPoint(point, control.get(point.name), result, length)),
    setups: result.setups.map((setup) => ({
      id: setup.id,
      clientId: setups.get(setup.id)!.clientId,
      station: setups.get(setup.id)!.station,
      easting: length.out(setup.easting),
      northing: length.out(setup.northing),
      elevation: length.outOrNull(setup.axis),
      orientation: setup.orientation === null ? null : toAzimuth(setup.orientation),
      errorEllipse: presentEllipse(setup.ellipse95, length),
    })),
    removed: result.removed.map((removed) => {
      const observation = named.get(removed.observation)!;
      const { unit, out } = unitOf(observation.kind, length);
      return {
        observation: removed.observation + 1,
        standardised: removed.standardised,
        error: out(removed.error),
        errorSigma: out(removed.errorSigma),
        alternatives: removed.alternatives.map((number) => number + 1),
        unit,
        text: wordsOfRemoved(observation, removed, named, input, length),
      };
    }),
    leftOut: result.leftOut.map((left) => ({
      setupId: setups.has(left.source) ? left.source : null,
      shots: [...left.shots],
      text: wordsOfLeftOut(left, input),
    })),
  };
}

function presentPoint(
  point: KeptPoint,
  control: AdjustmentInput['control'][number] | undefined,
  { checks }: KeptResult,
  length: Lengths,
): z.output<typeof AdjustmentPoint> {
  const sigma = (i: number) => length.out(Math.sqrt(point.covariance[i * 4]));
  const held = point.horizontalDatum === 'held' || point.easting === null;
  return {
    name: point.name,
    version: control?.version ?? null,
    status: control?.status ?? null,
    datum: { horizontal: point.horizontalDatum, vertical: point.verticalDatum },
    ...presentCoordinates(point, length),
    shift: presentCoordinates(point.shift, length),
    standardDeviations: {
      easting: sigma(0),
      northing: sigma(1),
      elevation: point.elevation === null ? null : length.out(point.elevationSigma),
    },
    errorEllipse: held ? null : presentEllipse(point.ellipse95, length),
    checked: checks[point.name],
  };
}

interface Coordinates {
  easting: number | null;
  northing: number | null;
  elevation: number | null;
}

export function presentCoordinates(
  { easting, northing, elevation }: Coordinates,
  length: Lengths,
): Coordinates {
  return {
    easting: length.outOrNull(easting),
    northing: length.outOrNull(northing),
    elevation: length.outOrNull(elevation),
  };
}

export function presentEllipse({ semiMajor, semiMinor, azimuth }: Ellipse, length: Lengths) {
  return {
    semiMajor: length.out(semiMajor),
    semiMinor: length.out(semiMinor),
    azimuth: toAzimuth(azimuth),
    confidence: 0.95 as const,
  };
}

export function presentObservation(
  observation: NetworkObservation,
  seq: number,
  { setups, levelRuns }: Sources,
  length: Lengths,
): z.output<typeof AdjustmentObservation> {
  const { kind, source, effect } = observation;
  const { unit, out } = unitOf(kind, length);
  const setup = setups.find(({ id }) => id === source);
  const run = kind === 'levelDifference' ? levelRuns.find(({ id }) => source.startsWith(id)) : undefined;
  return {
    number: seq + 1,
    kind,
    setupId: setup?.id ?? null,
    setup: setup?.clientId ?? null,
    levelRunId: run?.id ?? null,
    levelRun: run?.clientId ?? null,
    from: observation.from,
    to: kind === 'control' ? source : observation.to,
    component: observation.component,
    set: observation.set,
    shots: [...observation.shots],
    unit,
    standardDeviation: out(observation.sigma),
    residual: out(observation.residual),
    redundancy: observation.redundancy,
    standardised: observation.standardised,
    minimalDetectable: observation.minimalDetectable === null ? null : out(observation.minimalDetectable),
    effect: effect && {
      point: setups.find(({ id }) => id === effect.point)?.clientId ?? effect.point,
      easting: length.out(effect.easting),
      northing: length.out(effect.northing),
      elevation: length.out(effect.elevation),
    },
    biasToNoise: observation.biasToNoise,
    removed: observation.removed,
  };
}
