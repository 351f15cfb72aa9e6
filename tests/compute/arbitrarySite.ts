import fc from 'fast-check';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import type { Programme, Site, TrueMark } from '@/tests/simulator/observe';

const TURN = 2 * Math.PI;
const real = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** Any orientation, those that straddle the circle's zero more often than chance would have it. */
export const anyOrientation = fc.oneof(
  real(0, TURN).map((angle) => angle % TURN),
  fc.constantFrom(0, 1e-12, 1e-6, Math.PI, TURN - 1e-6, TURN - 1e-12),
);

const sight = fc.record({
  azimuth: real(0, TURN),
  ground: real(15, 400),
  /** Rise per metre of ground distance. */
  slope: real(-0.4, 0.4),
  targetHeight: real(0, 3),
});

/** Two to six marks, at least two of them 20 m apart. */
const sights = fc.array(sight, { minLength: 2, maxLength: 6 }).filter((list) =>
  list.some((a) =>
    list.some((b) => {
      const east = a.ground * Math.sin(a.azimuth) - b.ground * Math.sin(b.azimuth);
      const north = a.ground * Math.cos(a.azimuth) - b.ground * Math.cos(b.azimuth);
      return Math.hypot(east, north) >= 20;
    }),
  ),
);

/** Sites of every geometry, orientation, prism, air and grid; the marks' places are exact to 3 mm. */
export const anySite: fc.Arbitrary<Site> = fc
  .record({
    sights,
    station: fc.record({
      easting: real(-10_000, 900_000),
      northing: real(-10_000, 9_000_000),
      height: real(-50, 4000),
    }),
    orientation: anyOrientation,
    combinedFactor: fc.oneof(fc.constant(1), real(0.999, 1.001)),
    ppm: real(-100, 200),
    appliedPpm: real(-100, 200),
    prismConstantMm: real(-60, 60),
    prismConstantAppliedMm: real(-60, 60),
  })
  .map(({ sights: list, station, combinedFactor, ...rest }) => ({
    ...rest,
    station,
    combinedFactor,
    earthRadius: 6371008.8,
    refraction: { mean: 0.13, sigma: 0.3 },
    ppmSigma: 0,
    marks: list.map(({ azimuth, ground, slope, targetHeight }, i): TrueMark => {
      const grid = ground * combinedFactor;
      return {
        name: `M${i + 1}`,
        easting: station.easting + grid * Math.sin(azimuth),
        northing: station.northing + grid * Math.cos(azimuth),
        height: station.height + slope * ground - targetHeight,
        horizontalSigma: 0.003,
        verticalSigma: 0.003,
        hasElevation: true,
        reflectors: [targetHeight],
      };
    }),
  }));

export const anyProgramme: fc.Arbitrary<Programme> = fc.record({
  faces: fc.constantFrom<Programme['faces'][]>(['left'], ['right'], ['left', 'right'], ['right', 'left']),
  sets: fc.integer({ min: 1, max: 2 }),
}) as fc.Arbitrary<Programme>;

/** A common instrument, as it is stated; what it truly does is the simulator's business. */
export const STATED = DEFAULT_ACCURACY;
