import { between, type Chance, wholeBetween } from './chance';

/** A level and its staff as they really are. */
export interface TrueLevel {
  /** Rise of the line of sight, rad. */
  collimation: number;
  /** Of a reading at distance d: perRoot·√d, m. */
  perRoot: number;
  /** What curvature and refraction add, per m². */
  curvature: number;
}

export interface SimulatedSight {
  point: string;
  backsight: number | null;
  backsightDistance: number | null;
  intermediate: number | null;
  intermediateDistance: number | null;
  foresight: number | null;
  foresightDistance: number | null;
  bookedElevation: number | null;
}

export interface GroundPoint {
  name: string;
  elevation: number;
}

/** A staff on a point of elevation `ground`, read from a line of sight at `axis`, `distance` away. */
export function staffReading(
  level: TrueLevel,
  chance: Chance,
  axis: number,
  ground: number,
  distance: number,
) {
  const error = level.perRoot * Math.sqrt(distance) * chance.normal();
  return axis - ground + level.collimation * distance + level.curvature * distance ** 2 + error;
}

const NOTHING = {
  backsight: null,
  backsightDistance: null,
  intermediate: null,
  intermediateDistance: null,
  foresight: null,
  foresightDistance: null,
  bookedElevation: null,
};

/** A run over points of the ground, a standing between each two, its sights between `nearest` and `farthest`. */
export function runOver(
  level: TrueLevel,
  chance: Chance,
  points: readonly GroundPoint[],
  nearest = 15,
  farthest = 50,
): SimulatedSight[] {
  const sights: SimulatedSight[] = points.map(({ name }) => ({ point: name, ...NOTHING }));
  for (let i = 0; i + 1 < points.length; i++) {
    const axis = Math.max(points[i].elevation, points[i + 1].elevation) + between(chance, 0.3, 1.5);
    const back = between(chance, nearest, farthest);
    const fore = between(chance, nearest, farthest);
    sights[i].backsightDistance = back;
    sights[i].backsight = staffReading(level, chance, axis, points[i].elevation, back);
    sights[i + 1].foresightDistance = fore;
    sights[i + 1].foresight = staffReading(level, chance, axis, points[i + 1].elevation, fore);
  }
  return sights;
}

/** Ground that rises and falls by up to a metre from point to point. */
export function ground(chance: Chance, names: readonly string[], elevation = 100): GroundPoint[] {
  let height = elevation;
  return names.map((name, i) => {
    if (i > 0) height += between(chance, -1, 1);
    return { name, elevation: height };
  });
}

/** Names of a run of random length between two marks. */
export function namesBetween(chance: Chance, from: string, to: string): string[] {
  const turns = wholeBetween(chance, 2, 9);
  return [from, ...Array.from({ length: turns }, (_, i) => `TP-${i + 1}`), to];
}

/** Two pegs seen from the middle and from beside one of them, `times` over. */
export function pegStandings(level: TrueLevel, chance: Chance, apart: number, times: number) {
  const [a, b] = [100, 100 + between(chance, -0.5, 0.5)];
  const standing = (distanceA: number, distanceB: number) => {
    const axis = Math.max(a, b) + between(chance, 0.3, 1.5);
    return {
      readingA: staffReading(level, chance, axis, a, distanceA),
      distanceA,
      readingB: staffReading(level, chance, axis, b, distanceB),
      distanceB,
    };
  };
  return Array.from({ length: times }, () => [standing(apart / 2, apart / 2), standing(3, apart - 3)]).flat();
}
