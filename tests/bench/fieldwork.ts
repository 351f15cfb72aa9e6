/**
 * Field work on an invented site, by plain trigonometry: a total station among four marks reads each in both faces.
 * It knows nothing of the hub's own computations.
 */

const EARTH_RADIUS = 6371008.8;
const REFRACTION = 0.13;
export const ARCSECOND = Math.PI / 648_000;
const TURN = 2 * Math.PI;
export const TARGET_HEIGHT = 1.5;

/** What the hub is told of the site; lengths in metres. */
export const MARKS = [
  { name: 'HT-101', easting: 1562.4, northing: 2441.7, elevation: 126.31 },
  { name: 'HT-102', easting: 1618.9, northing: 2298.2, elevation: 124.87 },
  { name: 'HT-103', easting: 1455.3, northing: 2262.5, elevation: 125.44 },
  { name: 'HT-104', easting: 1398.8, northing: 2407.1, elevation: 127.02 },
];
export const MARK_SIGMA = 0.003;
const MARK_OFF = 0.002;
export const ACCURACY = { directionArcsec: 2, zenithArcsec: 2, distanceMm: 1.5, distancePpm: 2 };
const STATION = { easting: 1503.2, northing: 2344.6, axis: 127.6 };

/** One pointing in radians and metres. */
export interface Pointing {
  target: string;
  face: 'left' | 'right';
  horizontal: number;
  zenith: number;
  slopeDistance: number;
}

/** Numbers between 0 and 1 that come again with the same seed (mulberry32). */
export function chance(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

/**
 * Eight pointings of one setup: four marks, left and right. Readings scatter by the instrument's accuracy, each mark
 * stands a little off its published place.
 */
export function pointings(seed: number): Pointing[] {
  const random = chance(seed);
  const normal = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(TURN * random());
  const orientation = TURN * random();
  return MARKS.flatMap(({ name, easting, northing, elevation }) => {
    const off = () => MARK_OFF * normal();
    const [east, north] = [easting + off() - STATION.easting, northing + off() - STATION.northing];
    const ground = Math.hypot(east, north);
    const rise = elevation + off() + TARGET_HEIGHT - STATION.axis;
    const seen = rise - ((1 - REFRACTION) * ground * ground) / (2 * EARTH_RADIUS);
    const circle = ACCURACY.directionArcsec * ARCSECOND * Math.SQRT2;
    return (['left', 'right'] as const).map((face) => {
      const direction = Math.atan2(east, north) - orientation + circle * normal();
      const zenith = Math.atan2(ground, seen) + circle * normal();
      return {
        target: name,
        face,
        horizontal: (((direction + (face === 'left' ? 0 : Math.PI)) % TURN) + TURN) % TURN,
        zenith: face === 'left' ? zenith : TURN - zenith,
        slopeDistance: Math.hypot(ground, rise) + (ACCURACY.distanceMm / 1000) * normal(),
      };
    });
  });
}

/** The pad's own shape: a fall to the north-east with a swell. */
export function designElevation(easting: number, northing: number): number {
  return 125 - 0.012 * (easting - 1500) - 0.008 * (northing - 2350) + 0.4 * Math.sin(easting / 60);
}
