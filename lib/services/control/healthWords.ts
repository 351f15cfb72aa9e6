import type { MarkHealth } from '@/lib/compute/survey/controlHealth';
import type { Place } from '@/lib/compute/survey/inPlace';
import { toAzimuth } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { WitnessFacts } from './witnesses';

/** Factor of a standard deviation to the radius that holds 95 % of a plane, √5.991, and of a line. */
const CIRCLE_95 = 2.448;
const LINE_95 = 1.96;

const WINDS = ['north', 'north-east', 'east', 'south-east', 'south', 'south-west', 'west', 'north-west'];

/** `0.066 ft ± 0.012 ft to the north-east, 0.010 ft ± 0.008 ft down`; 95 %. */
export function displacementText(place: Place, covariance: ArrayLike<number>, length: Lengths): string {
  const axes = place.elevation === null ? 2 : 3;
  const fine = (metres: number) => length.text(metres, length.unit === 'm' ? 3 : 2);
  const sigma = Math.sqrt(Math.max(covariance[0], covariance[axes + 1]));
  const aside = Math.hypot(place.easting, place.northing);
  const wind = WINDS[Math.round((Math.atan2(place.easting, place.northing) / (2 * Math.PI)) * 8 + 8) % 8];
  const level = `${fine(aside)} ± ${fine(CIRCLE_95 * sigma)} to the ${wind}`;
  if (place.elevation === null) return level;
  const up = `${fine(Math.abs(place.elevation))} ± ${fine(LINE_95 * Math.sqrt(covariance[8]))} ${place.elevation < 0 ? 'down' : 'up'}`;
  return `${level}, ${up}`;
}

/** What several setups say of a mark that has moved. */
export function movedText(
  { name, sightings, movedSince, lastInPlace, displacement, covariance }: MarkHealth,
  facts: ReadonlyMap<string, WitnessFacts>,
  length: Lengths,
): string {
  const since = sightings.slice(movedSince ?? 0);
  const stations = since.flatMap(({ source }) => facts.get(source)?.station ?? []);
  const last = lastInPlace === null ? undefined : facts.get(sightings[lastInPlace].source);
  const good = last ? ` ${last.station} at ${asMoment(last.observedAt)} still found it in place.` : '';
  return `${name} stands ${displacementText(displacement!, covariance!, length)} (95 %) from where it was published, by ${stations.join(', ')}, while the other marks agree.${good}`;
}

/** What leaves a mark in doubt. */
export function doubtText(
  { name, sightings, doubted, displacement, covariance }: MarkHealth,
  facts: ReadonlyMap<string, WitnessFacts>,
  length: Lengths,
): string {
  const unsure = 'It may have moved, been misread there, or another mark has.';
  if (doubted === null) {
    return `All that saw ${name} together find it ${displacementText(displacement!, covariance!, length)} (95 %) off, and do not tell since when, or whether it is the mark. ${unsure}`;
  }
  const { source, observedAt, difference, sigma } = sightings[doubted];
  const fact = facts.get(source)!;
  const who = `${fact.kind === 'setup' ? 'One setup' : 'One level run'}, ${fact.station} at ${asMoment(new Date(observedAt).toISOString())},`;
  if (!difference || !sigma) return `${who} does not agree with where ${name} was published. ${unsure}`;
  const axes = difference.elevation === null ? 2 : 3;
  const own = new Float64Array(axes * axes);
  [sigma.easting, sigma.northing, sigma.elevation ?? 0].slice(0, axes).forEach((deviation, axis) => {
    own[axis * (axes + 1)] = deviation ** 2;
  });
  return `${who} finds ${name} ${displacementText(difference, own, length)} (95 %) off. ${unsure}`;
}

export function azimuthOf({ easting, northing }: Place): number {
  return toAzimuth(Math.atan2(easting, northing));
}
