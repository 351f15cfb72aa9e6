import type { InferInsertModel } from 'drizzle-orm';
import type { observations } from '@/db/schema';
import type { Shot as EngineShot } from '@/lib/compute/survey/shots';
import { utcInstant } from '@/lib/services/moments';
import { normaliseShot, type Readings } from '@/lib/services/shots/normalise';
import type { Units } from '@/lib/services/shots/units';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Shot } from '@/openapi/schemas/shot';
import type { Site } from './site';

export interface NormalShot {
  sent: Shot & { target: string };
  readings: Readings;
}

/** A shot of a setup by `identify`, whose target is still to be found. */
export interface UnnamedShot {
  sent: Shot;
  readings: Readings;
}

/**
 * The shots of a setup or of a check in SI units, all targets known, or everything that is wrong with them: one bad
 * shot refuses the whole.
 *
 * @param taken client ids of shots that the setup has already
 * @param identified shots that orient have no name yet
 */
export function normaliseShots(
  shots: readonly Shot[],
  units: Units,
  site: Site,
  pointer: string,
  { taken = new Set(), identified = false }: { taken?: ReadonlySet<string>; identified?: boolean } = {},
): { shots: NormalShot[]; unnamed: UnnamedShot[]; problems: ProblemItem[] } {
  const normal: NormalShot[] = [];
  const unnamed: UnnamedShot[] = [];
  const problems: ProblemItem[] = [];
  const ids = new Set(taken);
  shots.forEach((shot, i) => {
    const at = `${pointer}/shots/${i}`;
    const { target, clientId } = shot;
    if (ids.has(clientId)) {
      problems.push(
        problemItem(`${at}/clientId`, 'target_repeated', `The setup has a shot ${clientId} already.`),
      );
    }
    ids.add(clientId);
    const nameless = identified && shot.purpose === 'orient';
    if (nameless) {
      if (target !== null) problems.push(problemItem(`${at}/target`, 'target_named', `${target} is named.`));
    } else if (target === null) problems.push(problemItem(`${at}/target`, 'target_required'));
    else if (!site.control.has(target)) {
      problems.push(
        problemItem(`${at}/target`, 'target_unknown', `There is no control point ${target} in this project.`),
      );
    }
    const readings = normaliseShot(shot, units, at);
    if (Array.isArray(readings)) problems.push(...readings);
    else if (nameless) unnamed.push({ sent: shot, readings });
    else if (target !== null) normal.push({ sent: { ...shot, target }, readings });
  });
  problems.push(...mixedSigmas(normal, pointerIn(pointer, shots)));
  return { shots: normal, unnamed, problems: once(problems) };
}

/** The pointers of an item's shots, by their client ids. */
export function pointerIn(pointer: string, shots: readonly Shot[]): (shot: UnnamedShot) => string {
  return ({ sent }) => `${pointer}/shots/${shots.findIndex((shot) => shot.clientId === sent.clientId)}`;
}

const SIGMAS = ['targetCentringSigma', 'targetHeightSigma'] as const;

/** Centring and height of one erection are one error in all its shots: they have one σ, stated in all or in none. */
export function mixedSigmas(
  shots: readonly NormalShot[],
  pointers: (shot: NormalShot) => string,
): ProblemItem[] {
  return byErection(shots).flatMap(([first, ...others]) =>
    others.flatMap((shot) =>
      SIGMAS.filter((field) => shot.readings[field] !== first.readings[field]).map((field) => {
        const { clientId, target } = shot.sent;
        const detail = `${clientId} and ${first.sent.clientId} stand on ${target} alike, with another ${field}Mm.`;
        return problemItem(`${pointers(shot)}/${field}Mm`, 'sigma_conflict', detail);
      }),
    ),
  );
}

/** The same finding at the same place, such as a missing unit, is told once. */
function once(problems: readonly ProblemItem[]): ProblemItem[] {
  const seen = new Set<string>();
  return problems.filter(({ pointer, code }) => {
    const key = `${pointer} ${code}`;
    return !seen.has(key) && seen.add(key);
  });
}

export function asEngineShot({ sent, readings }: NormalShot): EngineShot {
  return {
    id: sent.clientId,
    target: sent.target,
    purpose: sent.purpose,
    face: readings.face,
    set: readings.set,
    direction: readings.direction,
    zenith: readings.zenith,
    distance: readings.distance,
    targetHeight: readings.targetHeight,
    targetCentringSigma: readings.targetCentringSigma,
    targetHeightSigma: readings.targetHeightSigma,
  };
}

export function observationRow(
  { sent, readings }: UnnamedShot,
  seq: number,
  of: {
    organizationId: string;
    projectId: string;
    setupId: string;
    checkId: string | null;
    identified: boolean;
  },
): InferInsertModel<typeof observations> {
  // Written out, not spread: this runs for every shot, and a spread of this size takes longer than all the rest.
  return {
    organizationId: of.organizationId,
    projectId: of.projectId,
    setupId: of.setupId,
    checkId: of.checkId,
    clientId: sent.clientId,
    seq,
    target: sent.target,
    identified: of.identified,
    purpose: sent.purpose,
    face: readings.face,
    set: readings.set,
    direction: readings.direction,
    zenith: readings.zenith,
    slopeDistance: readings.distance?.slopeDistance ?? null,
    prismConstantMm: readings.distance?.prismConstantMm ?? null,
    prismConstantAppliedMm: readings.distance?.prismConstantAppliedMm ?? null,
    appliedPpm: readings.distance?.appliedPpm ?? null,
    targetHeight: readings.targetHeight,
    targetCentringSigma: readings.targetCentringSigma,
    targetHeightSigma: readings.targetHeightSigma,
    distanceMode: readings.distanceMode,
    compensator: readings.compensator,
    observedAt: sent.observedAt === undefined ? null : utcInstant(sent.observedAt),
  };
}

/** A check needs direction, zenith angle and distance to each reflector as it stood, in whatever faces. */
export function incompleteChecks(
  shots: readonly NormalShot[],
  pointers: (shot: NormalShot) => string,
): ProblemItem[] {
  return byErection(shots).flatMap((group) => {
    const has = (pick: (readings: Readings) => unknown) =>
      group.some(({ readings }) => pick(readings) !== null);
    const complete = has((r) => r.direction) && has((r) => r.zenith) && has((r) => r.distance);
    if (complete) return [];
    const { target } = group[0].sent;
    const heights = new Set(
      shots.flatMap(({ sent, readings }) => (sent.target === target ? readings.targetHeight : [])),
    );
    const standing = heights.size > 1 ? ', at one target height,' : '';
    const detail = `The check of ${target}${standing} lacks a direction, a zenith angle or a distance.`;
    return [problemItem(pointers(group[0]), 'reading_incomplete', detail)];
  });
}

/** Shots by the reflector as it stood: for one purpose, one mark at one target height, as the engine takes it. */
function byErection(shots: readonly NormalShot[]): NormalShot[][] {
  const erections = new Map<string, NormalShot[]>();
  for (const shot of shots) {
    const { purpose, target } = shot.sent;
    const key = `${purpose}\n${target}\n${shot.readings.targetHeight}`;
    const own = erections.get(key);
    if (own) own.push(shot);
    else erections.set(key, [shot]);
  }
  return [...erections.values()];
}
