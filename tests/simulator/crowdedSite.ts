import { between, type Chance, wholeBetween } from './chance';
import { type Observed, observe, type Programme, type PublishedMark, type TrueMark } from './observe';
import { randomInstrument } from './randomSite';
import type { Place } from './sight';
import { turn } from './sight';

/** A setup whose pointings tell no names, among all the control of a site. */
export interface Unnamed {
  observed: Observed;
  /** Every published mark of the site. */
  control: PublishedMark[];
  /** What was shot: the mark of each target of the pointings, null where it is none. */
  truth: Map<string, string | null>;
}

export interface Crowd {
  /** Fewest and most points of the site. */
  points?: [number, number];
  /** Metres between neighbours, on the whole. */
  spacing?: [number, number];
  /** Reflectors that are shot. */
  shots?: [number, number];
  /** Of them strays, at most a quarter; by default one in half of the sites. */
  strays?: number;
  programme?: Programme;
}

/** Nearest and farthest target, m. */
const REACH = [15, 250] as const;
const PUBLISHED_AS = 'P';

/**
 * A site strewn with control, on ground that rises and falls, and a station somewhere in it that shoots some of the
 * points within reach. A stray is a point that was never published, or a reflector that somebody else set up.
 */
export function crowdedSite(chance: Chance, crowd: Crowd = {}): Unnamed {
  const count = wholeBetween(chance, ...(crowd.points ?? [200, 5000]));
  const side = between(chance, ...(crowd.spacing ?? [6, 40])) * Math.sqrt(count);
  const corner = { easting: between(chance, 1000, 700_000), northing: between(chance, 1000, 5_000_000) };
  const ground = rollingGround(chance, side);
  const points = Array.from({ length: count }, (): Place => {
    const [east, north] = [side * chance.uniform(), side * chance.uniform()];
    return {
      easting: corner.easting + east,
      northing: corner.northing + north,
      // Pegs and pins on the ground, and targets on posts.
      height: ground(east, north) + (chance.uniform() < 0.5 ? 0 : between(chance, 0, 2.5)),
    };
  });
  return amongPoints(chance, points, crowd);
}

/** A setup among points that are given: the truth of a site, which is then published with its errors. */
export function amongPoints(chance: Chance, points: readonly Place[], crowd: Crowd = {}): Unnamed {
  const [fewest, most] = crowd.shots ?? [4, 8];
  const wanted = Math.min(points.length, wholeBetween(chance, fewest, most));
  const station = standNear(chance, points, wanted);
  const distance = (point: Place) =>
    Math.hypot(point.easting - station.easting, point.northing - station.northing);
  const inReach = points.filter((point) => distance(point) > REACH[0] && distance(point) < REACH[1]);
  const far = [...points].sort((a, b) => distance(a) - distance(b)).slice(0, wanted);
  const seen = shuffled(chance, inReach.length >= wanted ? inReach : far).slice(0, wanted);
  const strays = crowd.strays ?? (chance.uniform() < 0.5 ? 0 : 1);
  // Of strays, one sort is a point like the others that the list lacks.
  const unpublished = new Set(seen.filter((_, i) => i < strays && chance.uniform() < 0.5));

  const sigma = () => between(chance, 0.001, 0.005);
  const asMark = (point: Place, name: string): TrueMark => ({
    ...point,
    name,
    horizontalSigma: sigma(),
    verticalSigma: sigma(),
    hasElevation: true,
    reflectors: [between(chance, 0, 2)],
  });
  const truth = new Map<string, string | null>();
  const nameOf = new Map(points.map((point, i) => [point, `${PUBLISHED_AS}${i + 1}`]));
  const marks = seen.map((point, i) => {
    const name = nameOf.get(point)!;
    const stray = i < strays;
    truth.set(name, stray ? null : name);
    return asMark(stray && !unpublished.has(point) ? besides(chance, point) : point, name);
  });
  const observed = observe(
    {
      station,
      orientation: turn(between(chance, 0, 2 * Math.PI)),
      marks,
      refraction: { mean: 0.13, sigma: 0.3 },
      earthRadius: 6371008.8,
      combinedFactor: chance.uniform() < 0.5 ? 1 : between(chance, 0.9996, 1.0004),
      ppm: between(chance, -20, 60),
      ppmSigma: 0,
      appliedPpm: 0,
      prismConstantMm: -30,
      prismConstantAppliedMm: 0,
    },
    randomInstrument(chance),
    crowd.programme ?? {
      faces: chance.uniform() < 0.5 ? ['left'] : ['left', 'right'],
      sets: wholeBetween(chance, 1, 2),
    },
    chance,
  );
  const shot = new Map(observed.published.map((mark) => [mark.name, mark]));
  const control = points.flatMap((point): PublishedMark[] => {
    if (unpublished.has(point)) return [];
    const name = nameOf.get(point)!;
    const known = shot.get(name);
    // A stray took a point's name only to be told from the others.
    if (known && truth.get(name) !== null) return [known];
    const mark = asMark(point, name);
    return [
      {
        name,
        easting: mark.easting + mark.horizontalSigma * chance.normal(),
        northing: mark.northing + mark.horizontalSigma * chance.normal(),
        elevation: mark.height + mark.verticalSigma * chance.normal(),
        horizontalSigma: mark.horizontalSigma,
        verticalSigma: mark.verticalSigma,
      },
    ];
  });
  return { observed, control, truth };
}

/** Long waves and a slope, metres to decimetres of relief per hundred metres. */
function rollingGround(chance: Chance, side: number): (east: number, north: number) => number {
  const base = between(chance, 0, 1500);
  const [slopeEast, slopeNorth] = [between(chance, -0.03, 0.03), between(chance, -0.03, 0.03)];
  const wave = between(chance, 60, Math.max(120, side));
  const swell = between(chance, 0.2, 4);
  const phase = between(chance, 0, 6);
  return (east, north) =>
    base +
    slopeEast * east +
    slopeNorth * north +
    swell * Math.sin(east / wave + phase) * Math.cos(north / wave);
}

/** A place among the points for the instrument, its axis a little above them. */
function standNear(chance: Chance, points: readonly Place[], wanted: number): Place {
  const near = points[wholeBetween(chance, 0, points.length - 1)];
  const others = [...points]
    .sort(
      (a, b) =>
        Math.hypot(a.easting - near.easting, a.northing - near.northing) -
        Math.hypot(b.easting - near.easting, b.northing - near.northing),
    )
    .slice(0, wanted);
  const mean = (pick: (point: Place) => number) =>
    others.reduce((sum, point) => sum + pick(point), 0) / wanted;
  return {
    easting: mean((p) => p.easting) + between(chance, -8, 8),
    northing: mean((p) => p.northing) + between(chance, -8, 8),
    height: mean((p) => p.height) + between(chance, 1, 3),
  };
}

/** Where somebody else's reflector stands: somewhere about. */
function besides(chance: Chance, { easting, northing, height }: Place): Place {
  const off = () => between(chance, 2, 20) * (chance.uniform() < 0.5 ? -1 : 1);
  return { easting: easting + off(), northing: northing + off(), height: height + between(chance, -2, 2) };
}

function shuffled<T>(chance: Chance, list: readonly T[]): T[] {
  const copy = [...list];
  for (let i = copy.length - 1; i > 0; i--) {
    const j = wholeBetween(chance, 0, i);
    [copy[i], copy[j]] = [copy[j], copy[i]];
  }
  return copy;
}
