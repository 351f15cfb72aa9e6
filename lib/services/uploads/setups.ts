import { StationError } from '@/lib/compute/survey/stationAdjustment';
import { toMetres } from '@/lib/compute/units/convert';
import type { CallerContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { surroundingsOf } from '@/lib/services/projects/load';
import { computeSetup, isAgreed } from '@/lib/services/setups/compute';
import type { CheckRow, LoadedSetup } from '@/lib/services/setups/load';
import { type CheckResult, METHOD_VERSION, methodOf, type SetupNote } from '@/lib/services/setups/result';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { airOf, readAtmosphere, type Weather, wantedPpm } from './atmosphere';
import type { Document } from './document';
import { type Draft, pointerOf } from './draft';
import { identificationLimits, nameTargets } from './identified';
import { readOccupied } from './occupied';
import {
  asEngineShot,
  incompleteChecks,
  type NormalShot,
  normaliseShots,
  observationRow,
  pointerIn,
  type UnnamedShot,
} from './shotsOfSetup';
import type { Site, SiteClass, SiteInstrument } from './site';
import { stationProblem } from './stationProblem';

type SetupItem = Document['setups'][number];

/** Computes every setup of the upload; a setup with anything wrong is refused whole, every pointer listed. */
export function draftSetups(draft: Draft, context: CallerContext): void {
  draft.document.setups.forEach((item, index) => {
    const pointer = pointerOf(draft, 'setups', index);
    const problems = draftSetup(draft, context, item, pointer);
    draft.refused.push(...problems);
  });
}

function draftSetup(draft: Draft, context: CallerContext, item: SetupItem, pointer: string): ProblemItem[] {
  const { site, document } = draft;
  if (site.taken.setups.has(item.clientId)) {
    return [
      problemItem(`${pointer}/clientId`, 'client_id_taken', `A setup ${item.clientId} was accepted before.`),
    ];
  }
  const known = knownParts(site, item, pointer);
  const identified = item.method === 'identify';
  const normal = normaliseShots(item.shots, document.units, site, pointer, { identified });
  const targets = identified ? [...site.control.keys()] : normal.shots.map(({ sent }) => sent.target);
  const { atmosphere, problems: airProblems } = readAtmosphere(
    item.atmosphere,
    document.units,
    site,
    targets,
    pointer,
  );
  const at = pointerIn(pointer, item.shots);
  const checking = normal.shots.filter(({ sent }) => sent.purpose !== 'orient');
  const { occupied, problems: markProblems } = readOccupied(draft, item, pointer);
  const problems = [
    ...known.problems,
    ...identificationLimits(site, document, item, pointer),
    ...markProblems,
    ...airProblems,
    ...normal.problems,
    ...incompleteChecks(checking, at),
  ];
  const { instrument, limits } = known;
  if (problems.length > 0 || !instrument || !limits) return problems;

  const air = atmosphere && airOf(atmosphere, instrument);
  const ppm = air && wantedPpm(air);
  const { name: toleranceClass, ...classLimits } = limits;
  const surroundings = { ...surroundingsOf(site.project), ...chosenRefraction(item) };
  const sighting = { accuracy: instrument.accuracy, surroundings, ppm };
  const { unnamed } = normal;
  const named = identified ? nameTargets(site, item, { unnamed, checking }, sighting, pointer) : null;
  if (Array.isArray(named)) return named;
  const { shots } = named ?? normal;
  try {
    const computed = computeSetup({
      shots: shots.map(asEngineShot),
      control: site.control,
      ...sighting,
      air,
      occupied,
      identification: named?.identification,
      limits: classLimits,
      notes: assumptions(site, { shots, stationPoint: item.stationPoint }, instrument, ppm),
    });
    const observed = inOrder(item, [...shots, ...(named?.strays ?? [])]);
    accept(draft, context, item, { computed, observed, instrument, toleranceClass, atmosphere });
    return [];
  } catch (error) {
    if (!(error instanceof StationError)) throw error;
    return stationProblem(error, pointer, item.shots);
  }
}

/** The k that a setup was observed with, where it says another than the project's. */
function chosenRefraction({ refraction }: SetupItem) {
  return refraction && { refraction: refraction.coefficient, refractionSigma: refraction.sigma };
}

function knownParts(site: Site, item: SetupItem, pointer: string) {
  const problems: ProblemItem[] = [];
  const instrument = site.instruments.get(item.instrument);
  if (!instrument) {
    problems.push(
      problemItem(
        `${pointer}/instrument`,
        'instrument_unknown',
        `There is no instrument ${item.instrument} in this project.`,
      ),
    );
  }
  const name = item.toleranceClass;
  const limits = name === undefined ? site.classes[0] : site.classes.find((c: SiteClass) => c.name === name);
  if (!limits) {
    const names = site.classes.map((c) => c.name).join(', ');
    problems.push(
      problemItem(`${pointer}/toleranceClass`, 'tolerance_class_unknown', `${name} is none of ${names}.`),
    );
  }
  return { instrument, limits, problems };
}

/** What was taken for granted, to be said in the answer. */
function assumptions(
  site: Site,
  { shots, stationPoint }: { shots: readonly NormalShot[]; stationPoint: string | undefined },
  instrument: SiteInstrument,
  ppm: number | null,
): SetupNote[] {
  const notes: SetupNote[] = [];
  if (ppm === null)
    notes.push({ code: 'atmosphere_unknown', ppm: surroundingsOf(site.project).unknownAtmospherePpm });
  if (!instrument.accuracyStated) notes.push({ code: 'accuracy_default' });
  const marks = [
    ...(stationPoint === undefined ? [] : [stationPoint]),
    ...shots.map(({ sent }) => sent.target),
  ];
  const unstated = [...new Set(marks)].filter((name) => !site.control.get(name)!.sigmaStated);
  if (unstated.length > 0) {
    const { controlSigmaHorizontal: horizontal, controlSigmaVertical: vertical } = site.project;
    notes.push({ code: 'control_sigma_default', targets: unstated, horizontal, vertical });
  }
  const uncompensated = shots.filter(({ readings }) => readings.compensator === 'off').length;
  if (uncompensated > 0) notes.push({ code: 'compensator_off', shots: uncompensated });
  return notes;
}

/** Shots as they were sent, one after the other. */
function inOrder(item: SetupItem, shots: readonly UnnamedShot[]): UnnamedShot[] {
  const place = new Map(item.shots.map(({ clientId }, i) => [clientId, i]));
  return [...shots].sort((a, b) => place.get(a.sent.clientId)! - place.get(b.sent.clientId)!);
}

interface Computed {
  computed: ReturnType<typeof computeSetup>;
  observed: UnnamedShot[];
  instrument: SiteInstrument;
  toleranceClass: string;
  atmosphere: Weather | null;
}

function accept(draft: Draft, context: CallerContext, item: SetupItem, parts: Computed): void {
  const { computed, observed, instrument, toleranceClass, atmosphere } = parts;
  const { caller, runtime } = context;
  const { result } = computed;
  const { organizationId } = caller;
  const projectId = draft.site.project.id;
  const id = runtime.uuid();
  const now = runtime.now().toISOString();
  const { length } = draft.document.units;
  const setup = {
    organizationId,
    id,
    projectId,
    clientId: item.clientId,
    uploadId: draft.uploadId,
    rootId: id,
    station: item.station,
    method: item.method,
    instrumentId: instrument.id,
    instrumentName: instrument.name,
    calibrationVersion: instrument.version,
    instrumentHeight: item.instrumentHeight === null ? null : toMetres(item.instrumentHeight, length),
    toleranceClass,
    temperature: atmosphere?.temperature ?? null,
    pressure: atmosphere?.pressure ?? null,
    humidity: atmosphere?.humidity ?? null,
    observedAt: utcInstant(item.observedAt),
    resultVersion: 1,
    verdict: result.verdict,
    state: 'computed' as const,
    releasedAt: null,
    validUntil: null,
    withdrawnAt: null,
    supersedesId: null,
    supersededById: null,
    excluded: [],
    submittedBy: caller.name,
    submitterPersonId: caller.personId,
    createdAt: now,
  };
  const resultRow = {
    organizationId,
    setupId: id,
    version: 1,
    method: methodOf(result),
    methodVersion: METHOD_VERSION,
    result,
    computedAt: now,
  };
  const checks = computed.checks.map(({ purpose, targets, drift }): CheckRow => {
    const kept: CheckResult = { targets, drift, tolerance: result.limits.residual, verdict: result.verdict };
    return {
      organizationId,
      id: runtime.uuid(),
      projectId,
      setupId: id,
      uploadId: draft.uploadId,
      clientId: null,
      purpose,
      agreed: isAgreed(targets),
      result: kept,
      observedAt: setup.observedAt,
      resultVersion: 1,
      carriedFromId: null,
    };
  });
  const loaded: LoadedSetup = { setup, result: resultRow, checks, release: null };
  draft.setups.push(loaded);
  draft.rows.setups.push(setup);
  draft.rows.setupResults.push(resultRow);
  draft.rows.setupChecks.push(...checks);
  observed.forEach((shot, seq) => {
    draft.rows.observations.push(
      observationRow(shot, seq, {
        organizationId,
        projectId,
        setupId: id,
        checkId: null,
        identified: item.method === 'identify' && shot.sent.purpose === 'orient',
      }),
    );
  });
  draft.site.taken.setups.add(item.clientId);
  draft.happenings.push({
    type: 'setup.computed',
    subject: id,
    projectId,
    data: { station: item.station, clientId: item.clientId, verdict: result.verdict },
  });
}
