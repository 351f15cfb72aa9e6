import { between, type Chance, wholeBetween } from './chance';
import type { Place } from './sight';

type Layout = (chance: Chance) => Place[];

/** A grid of stakes on level ground, as wide as deep. */
const levelGrid: Layout = (chance) => {
  const side = wholeBetween(chance, 4, 15);
  const spacing = between(chance, 8, 25);
  return laid(chance, (put) => {
    for (let i = 0; i < side; i++) for (let j = 0; j < side; j++) put(i * spacing, j * spacing, 0);
  });
};

/** A grid on a slope, so large that what is within reach is the same everywhere. */
const slopingGrid: Layout = (chance) => {
  const spacing = between(chance, 12, 30);
  const [east, north] = [between(chance, -0.05, 0.05), between(chance, -0.05, 0.05)];
  return laid(chance, (put) => {
    for (let i = 0; i < 60; i++) {
      for (let j = 0; j < 60; j++) put(i * spacing, j * spacing, spacing * (i * east + j * north));
    }
  });
};

/** The corners of a square building, level. */
const square: Layout = (chance) => {
  const half = between(chance, 15, 60);
  return laid(chance, (put) => {
    for (const i of [-1, 1]) for (const j of [-1, 1]) put(i * half, j * half, 0);
  });
};

/** A rectangular building's corners and offset stakes beyond them, in every half turn the same. */
const rectangle: Layout = (chance) => {
  const [width, depth, off] = [between(chance, 20, 40), between(chance, 45, 80), between(chance, 3, 8)];
  return laid(chance, (put) => {
    for (const i of [-1, 1]) {
      for (const j of [-1, 1]) {
        put(i * width, j * depth, 0);
        put(i * (width + off), j * depth, 0.4);
      }
    }
  });
};

/** Pegs anyhow, each with its likes turned about a common middle, heights and all. */
const turned =
  (turns: number): Layout =>
  (chance) => {
    const pegs = Array.from({ length: wholeBetween(chance, 4, 12) }, () => ({
      away: between(chance, 15, 120),
      azimuth: between(chance, 0, 2 * Math.PI),
      up: between(chance, -3, 3),
    }));
    return laid(chance, (put) => {
      for (let turn = 0; turn < turns; turn++) {
        for (const { away, azimuth, up } of pegs) {
          const angle = azimuth + (2 * Math.PI * turn) / turns;
          put(away * Math.sin(angle), away * Math.cos(angle), up);
        }
      }
    });
  };

/**
 * Two building sites of the same plan, farther apart than anybody shoots: each reaches 170 m from its corner, whichever
 * way it is turned, and shots to both would tell them apart.
 */
const twins: Layout = (chance) => {
  const pegs = Array.from({ length: wholeBetween(chance, 8, 20) }, () => ({
    east: between(chance, 0, 120),
    north: between(chance, 0, 120),
    up: between(chance, -2, 2),
  }));
  const [away, azimuth] = [between(chance, 650, 1200), between(chance, 0, 2 * Math.PI)];
  const lift = between(chance, -10, 10);
  return laid(chance, (put) => {
    for (const { east, north, up } of pegs) {
      put(east, north, up);
      put(
        away + east * Math.cos(azimuth) + north * Math.sin(azimuth),
        north * Math.cos(azimuth) - east * Math.sin(azimuth),
        up + lift,
      );
    }
  });
};

/** Layouts that some turn or shift brings onto themselves: shots alone cannot tell where in them they were taken. */
export const REGULAR_LAYOUTS: [string, Layout][] = [
  ['a level grid', levelGrid],
  ['a grid on a slope', slopingGrid],
  ['a square stake-out', square],
  ['a rectangular stake-out with offsets', rectangle],
  ['pegs mirrored by a half turn', turned(2)],
  ['pegs repeated by quarter turns', turned(4)],
  ['two sites of one plan', twins],
];

/** Puts points of a local plan somewhere on the grid, turned anyhow. */
function laid(
  chance: Chance,
  layOut: (put: (east: number, north: number, up: number) => void) => void,
): Place[] {
  const [easting, northing] = [between(chance, 1000, 700_000), between(chance, 1000, 5_000_000)];
  const [height, angle] = [between(chance, 0, 1500), between(chance, 0, 2 * Math.PI)];
  const points: Place[] = [];
  layOut((east, north, up) => {
    points.push({
      easting: easting + east * Math.cos(angle) + north * Math.sin(angle),
      northing: northing + north * Math.cos(angle) - east * Math.sin(angle),
      height: height + up,
    });
  });
  return points;
}
