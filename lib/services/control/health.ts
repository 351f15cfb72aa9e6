import type * as z from 'zod';
import type { Tenant } from '@/db/tenant';
import { controlHealth, type MarkHealth } from '@/lib/compute/survey/controlHealth';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { ProjectRow } from '@/lib/services/projects/load';
import type { ControlHealth } from '@/openapi/schemas/control';
import { azimuthOf, displacementText, doubtText, movedText } from './healthWords';
import type { CurrentControl } from './load';
import { loadWitnesses, type Witnesses } from './witnesses';

/** What setups show of a point in its present version; null where none is heard on it. */
export async function loadHealth(
  tenant: Tenant,
  project: Pick<ProjectRow, 'organizationId' | 'id'>,
  { point, version }: CurrentControl,
): Promise<{ health: MarkHealth | null; witnesses: Witnesses }> {
  const witnesses = await loadWitnesses(tenant, project.organizationId, project.id, [point.name]);
  const all = controlHealth(witnesses.setups, witnesses.levels);
  const health = all.find(({ name, version: of }) => name === point.name && of === version.version) ?? null;
  return { health, witnesses };
}

export function presentHealth(
  { health, witnesses: { facts } }: { health: MarkHealth | null; witnesses: Witnesses },
  name: string,
  length: Lengths,
): z.output<typeof ControlHealth> {
  if (!health?.displacement || !health.covariance) {
    return {
      finding: 'unknown',
      text: `No setup tells where ${name} stands: none has seen it in its present version together with others that do.`,
      action: 'Shoot it from two setups on trusted marks.',
      displacement: null,
      test: null,
      movedBetween: null,
      sightings: health ? sightingsOf(health, facts, length) : [],
    };
  }
  const { finding, displacement, covariance, movedSince, lastInPlace, sightings, test } = health;
  const moved = movedSince !== null;
  const axes = displacement.elevation === null ? 2 : 3;
  const deviation = (axis: number) => length.out(Math.sqrt(covariance[axis * (axes + 1)]));
  const instant = (at: number) => asMoment(new Date(at).toISOString());
  return {
    finding,
    ...wordsOf(health, facts, length),
    displacement: {
      easting: length.out(displacement.easting),
      northing: length.out(displacement.northing),
      elevation: length.outOrNull(displacement.elevation),
      horizontal: length.out(Math.hypot(displacement.easting, displacement.northing)),
      azimuth: azimuthOf(displacement),
      standardDeviations: {
        easting: deviation(0),
        northing: deviation(1),
        elevation: axes === 3 ? deviation(2) : null,
      },
    },
    test: test && {
      value: test.statistic,
      critical: test.critical,
      degreesOfFreedom: test.degreesOfFreedom,
    },
    movedBetween: moved
      ? {
          after: lastInPlace === null ? null : instant(sightings[lastInPlace].observedAt),
          before: instant(sightings[movedSince].observedAt),
        }
      : null,
    sightings: sightingsOf(health, facts, length),
  };
}

/** What is found, and what to do. */
function wordsOf(
  health: MarkHealth,
  facts: Witnesses['facts'],
  length: Lengths,
): { text: string; action?: string } {
  const { name, finding, sightings } = health;
  const place = () => `${displacementText(health.displacement!, health.covariance!, length)} (95 %)`;
  switch (finding) {
    case 'moved':
      return {
        text: movedText(health, facts, length),
        action: `Look at ${name}. Quarantine it, or publish it anew once it is surveyed; then see what is affected.`,
      };
    case 'doubtful':
      return {
        text: doubtText(health, facts, length),
        action: `Shoot ${name} and the marks around it from a second setup before you rely on it.`,
      };
    case 'unknown':
      return {
        text: `Nothing tells closely enough where ${name} stands: ${place()}, while a smaller move would matter in the class that it is used for.`,
        action: `Shoot ${name} from nearer, in both faces, together with more marks.`,
      };
    case 'steady':
      return {
        text: `${name} stands where it was published, as far as ${tellersOf(sightings, facts)}: ${place()}.`,
      };
  }
}

/** `one setup tells`, `3 setups and 1 level run tell`. */
function tellersOf(sightings: MarkHealth['sightings'], facts: Witnesses['facts']): string {
  const setups = sightings.filter(({ source }) => facts.get(source)?.kind === 'setup').length;
  const runs = sightings.length - setups;
  if (runs === 0) return setups === 1 ? 'one setup tells' : `${setups} setups tell`;
  return `${setups} setup${setups === 1 ? '' : 's'} and ${runs} level run${runs === 1 ? '' : 's'} tell`;
}

/** Newest first. */
function sightingsOf(
  { sightings, movedSince }: MarkHealth,
  facts: Witnesses['facts'],
  length: Lengths,
): z.output<typeof ControlHealth>['sightings'] {
  const out = (place: MarkHealth['displacement']) =>
    place && {
      easting: length.out(place.easting),
      northing: length.out(place.northing),
      elevation: length.outOrNull(place.elevation),
    };
  return sightings
    .map(({ source, difference, sigma, off }, i) => {
      const fact = facts.get(source)!;
      return {
        setupId: fact.kind === 'setup' ? fact.id : null,
        levelRunId: fact.kind === 'levelRun' ? fact.id : null,
        station: fact.station,
        observedAt: asMoment(fact.observedAt),
        crew: fact.crew,
        moved: movedSince !== null && i >= movedSince,
        off,
        difference: out(difference),
        standardDeviations: out(sigma),
      };
    })
    .reverse();
}
