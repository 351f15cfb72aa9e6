import { between, type Chance } from './chance';
import type { Instrument, Pointing } from './observe';
import { type Ground, type Place, sightTo, turn } from './sight';

/** What a network is to consist of. */
export interface NetworkPlan {
  setups: number;
  points: number;
  /** Each point is observed from so many setups, the nearest ones. */
  sightsOfPoint: number;
  faces: ('left' | 'right')[];
  sets: number;
  /** Every so manieth setup stands over a point of its own; 0 for free stations only. */
  occupiedEvery: number;
  /** Every so manieth point is control, its published coordinates as good as this, m. */
  controlEvery: number;
  controlSigma: number;
  /** Every so manieth point has a position by a rover. */
  roverEvery: number;
  /** Levelled differences between neighbouring points. */
  levelled: number;
  /** Vectors by rovers between neighbouring points. */
  baselines: number;
}

export interface TruePoint extends Place {
  name: string;
}

export interface SimulatedSetup {
  id: string;
  /** The mark that it stands over; of a free station, a place so far under its axis. */
  place: Place;
  occupied: string | null;
  instrumentHeight: number;
  pointings: Pointing[];
}

export interface Vector {
  easting: number;
  northing: number;
  elevation: number;
}

/** A network as observed, with the truth beside it. */
export interface SimulatedNetwork {
  ground: Ground;
  instrument: Instrument & { instrumentCentring: number };
  refraction: { mean: number; sigma: number };
  truth: Map<string, TruePoint>;
  control: (Vector & { name: string; sigma: number })[];
  setups: SimulatedSetup[];
  levelled: { id: string; from: string; to: string; difference: number; length: number }[];
  /** Standard deviation of a kilometre levelled, m. */
  levelSigma: number;
  positions: (Vector & { id: string; point: string; covariance: number[] })[];
  baselines: (Vector & { id: string; from: string; to: string; covariance: number[] })[];
}

const ARCSECOND = Math.PI / 648000;
/** No setup sees fewer points. */
const LEAST_SIGHTS = 4;
/** Metres between neighbouring setups. */
const SPACING = 120;

/** A later epoch of the same layout: its errors are drawn from elsewhere, and points may have moved. */
interface Later {
  chance?: Chance;
  move?: (point: TruePoint) => TruePoint;
}

/**
 * A site with setups on a loose grid and points at random among them, each seen from its nearest setups. Errors are
 * drawn as in a single setup: once for what readings share, anew for each reading.
 */
export function simulateNetwork(
  plan: NetworkPlan,
  layout: Chance,
  { chance = layout, move = (point) => point }: Later = {},
): SimulatedNetwork {
  const drawn = (sigma: number) => sigma * chance.normal();
  const side = Math.ceil(Math.sqrt(plan.setups));
  const origin = { easting: 412_000, northing: 5_310_000 };
  const placeAt = (column: number, row: number): Place => {
    const [easting, northing] = [column * SPACING, row * SPACING];
    return {
      easting: origin.easting + easting,
      northing: origin.northing + northing,
      height: 140 + 6 * Math.sin(easting / 300) + 4 * Math.cos(northing / 200) + between(layout, 0, 3),
    };
  };
  const ground: Ground = { earthRadius: 6371008.8, combinedFactor: 0.99985 };
  const instrument = {
    direction: 2 * ARCSECOND,
    zenith: 2 * ARCSECOND,
    distance: 0.0015,
    distancePpm: 2,
    collimation: 4 * ARCSECOND,
    targetCentring: 0.001,
    targetHeight: 0.001,
    instrumentCentring: 0.001,
  };
  const truth = new Map<string, TruePoint>();
  for (let i = 0; i < plan.points; i++) {
    const name = `P${i + 1}`;
    const place = placeAt(between(layout, -0.4, side - 0.6), between(layout, -0.4, plan.setups / side - 0.6));
    truth.set(name, { name, ...place });
  }
  const points = [...truth.values()];

  const setups = Array.from({ length: plan.setups }, (_, i) => {
    const place = placeAt(
      (i % side) + between(layout, -0.2, 0.2),
      Math.floor(i / side) + between(layout, -0.2, 0.2),
    );
    const occupied = plan.occupiedEvery > 0 && i % plan.occupiedEvery === 0 ? `T${i + 1}` : null;
    if (occupied !== null) truth.set(occupied, { name: occupied, ...place });
    return {
      id: `S${i + 1}`,
      occupied,
      place,
      instrumentHeight: between(layout, 1.4, 1.8),
      seen: [] as TruePoint[],
    };
  });
  for (const point of points) {
    const near = setups
      .map((setup) => ({ setup, distance: apart(setup.place, point) }))
      .sort((a, b) => a.distance - b.distance);
    for (const { setup } of near.slice(0, plan.sightsOfPoint)) setup.seen.push(point);
  }
  for (const setup of setups) {
    const near = points.toSorted((a, b) => apart(setup.place, a) - apart(setup.place, b));
    for (const point of near.slice(0, LEAST_SIGHTS)) if (!setup.seen.includes(point)) setup.seen.push(point);
  }
  // Setups over marks see the next of their kind too.
  const standing = setups.filter(({ occupied }) => occupied !== null);
  standing.forEach((setup, i) => {
    const next = standing[i + 1];
    if (next) setup.seen.push({ name: next.occupied!, ...next.place });
  });

  for (const setup of setups) setup.seen = setup.seen.map(move);
  const refraction = { mean: 0.13, sigma: 0.2 };
  const neighbours = (count: number) =>
    Array.from({ length: count }, (_, i) => {
      const from = points[Math.floor(layout.uniform() * points.length)];
      const [, to] = points
        .toSorted((a, b) => apart(from, a) - apart(from, b))
        .slice(0, 2 + (i % 2))
        .slice(-2);
      return { from: move(from), to: move(to) };
    });
  const covarianceOf = (horizontal: number, vertical: number) => {
    const [a, b, c] = [horizontal ** 2, (1.2 * horizontal) ** 2, vertical ** 2];
    const [ab, ac, bc] = [0.2 * Math.sqrt(a * b), -0.3 * Math.sqrt(a * c), 0.1 * Math.sqrt(b * c)];
    return [a, ab, ac, ab, b, bc, ac, bc, c];
  };
  const levelSigma = 0.001;
  return {
    ground,
    instrument,
    refraction,
    truth,
    control: points.flatMap((point, i) =>
      plan.controlEvery > 0 && i % plan.controlEvery === 0
        ? { name: point.name, sigma: plan.controlSigma, ...shaken(point, () => drawn(plan.controlSigma)) }
        : [],
    ),
    setups: setups.map((setup): SimulatedSetup => {
      const { id, occupied, instrumentHeight, place, seen } = setup;
      const centred = occupied === null ? 0 : 1;
      const axis = {
        easting: place.easting + centred * drawn(instrument.instrumentCentring),
        northing: place.northing + centred * drawn(instrument.instrumentCentring),
        height: place.height + instrumentHeight + centred * drawn(instrument.targetHeight),
      };
      const k = refraction.mean + drawn(refraction.sigma);
      const orientation = between(chance, 0, 2 * Math.PI);
      const [collimation, index] = [drawn(instrument.collimation), drawn(instrument.collimation)];
      const pointings: Pointing[] = [];
      for (const point of seen) {
        const targetHeight = between(chance, 1.3, 2);
        const reflector = {
          easting: point.easting + drawn(instrument.targetCentring),
          northing: point.northing + drawn(instrument.targetCentring),
          height: point.height + targetHeight + drawn(instrument.targetHeight),
        };
        const sight = sightTo(axis, reflector, k, ground);
        for (let set = 1; set <= plan.sets; set++) {
          for (const face of plan.faces) {
            const turned = face === 'left' ? 1 : -1;
            const direction =
              sight.azimuth -
              orientation +
              (turned * collimation) / Math.sin(sight.zenith) +
              drawn(Math.SQRT2 * instrument.direction);
            const zenith = sight.zenith + drawn(Math.SQRT2 * instrument.zenith);
            pointings.push({
              ...{ target: point.name, reflector: 0, targetHeight, face, set },
              horizontal: turn(face === 'left' ? direction : direction + Math.PI),
              zenith: (face === 'left' ? zenith : 2 * Math.PI - zenith) + index,
              slopeDistance:
                sight.slope + drawn(instrument.distance + instrument.distancePpm * 1e-6 * sight.slope),
            });
          }
        }
      }
      return { id, place, occupied, instrumentHeight, pointings };
    }),
    levelled: neighbours(plan.levelled).map(({ from, to }, i) => {
      const length = 1.3 * apart(from, to);
      const error = drawn(levelSigma * Math.sqrt(length / 1000));
      return {
        id: `L${i + 1}`,
        from: from.name,
        to: to.name,
        difference: to.height - from.height + error,
        length,
      };
    }),
    levelSigma,
    positions: points.flatMap((point, i) => {
      if (plan.roverEvery === 0 || i % plan.roverEvery !== 1) return [];
      const covariance = covarianceOf(0.008, 0.015);
      return { id: `R${i + 1}`, point: point.name, covariance, ...shakenBy(move(point), covariance, chance) };
    }),
    baselines: neighbours(plan.baselines).map(({ from, to }, i) => {
      const covariance = covarianceOf(0.004, 0.008);
      const difference = {
        easting: to.easting - from.easting,
        northing: to.northing - from.northing,
        height: to.height - from.height,
      };
      return {
        id: `B${i + 1}`,
        ...{ from: from.name, to: to.name, covariance, ...shakenBy(difference, covariance, chance) },
      };
    }),
  };
}

function apart(a: Place, b: Place): number {
  return Math.hypot(a.easting - b.easting, a.northing - b.northing);
}

function shaken(place: Place, error: () => number): Vector {
  return {
    easting: place.easting + error(),
    northing: place.northing + error(),
    elevation: place.height + error(),
  };
}

/** A vector with correlated errors, by the Cholesky factor of their covariance. */
function shakenBy(place: Place, c: readonly number[], chance: Chance): Vector {
  const l11 = Math.sqrt(c[0]);
  const [l21, l31] = [c[3] / l11, c[6] / l11];
  const l22 = Math.sqrt(c[4] - l21 * l21);
  const l32 = (c[7] - l31 * l21) / l22;
  const l33 = Math.sqrt(c[8] - l31 * l31 - l32 * l32);
  const [a, b, d] = [chance.normal(), chance.normal(), chance.normal()];
  const errors = [l11 * a, l21 * a + l22 * b, l31 * a + l32 * b + l33 * d];
  return {
    easting: place.easting + errors[0],
    northing: place.northing + errors[1],
    elevation: place.height + errors[2],
  };
}
