import { chance } from './chance';
import type { Air, Instrument, Place } from './totalStation';

/** Thistledown Yard: a pad of 240 × 180 ft amid eight control points. All lengths in international feet. */

/** How well the control was surveyed, one standard deviation per axis. */
export const CONTROL_SIGMA = { horizontal: 0.006, vertical: 0.006 };
export const LEVELLED_SIGMA = { horizontal: 0.006, vertical: 0.004 };

export interface Control extends Place {
  name: string;
  kind: 'target' | 'benchmark';
  description: string;
  sigma: typeof CONTROL_SIGMA;
}

const target = (name: string, easting: number, northing: number, elevation: number, description: string) =>
  ({ name, easting, northing, elevation, kind: 'target', description, sigma: CONTROL_SIGMA }) as const;
const benchmark = (name: string, easting: number, northing: number, elevation: number, description: string) =>
  ({ name, easting, northing, elevation, kind: 'benchmark', description, sigma: LEVELLED_SIGMA }) as const;

/** As published. */
export const CONTROL: readonly Control[] = [
  target('HT-101', 4962.418, 10301.175, 1243.622, 'prism on a post, north-west corner'),
  target('HT-102', 5341.906, 10318.64, 1239.274, 'prism on a post, north-east corner'),
  target('HT-103', 5402.233, 10088.517, 1236.841, 'prism on a post, haul road'),
  target('HT-104', 5318.075, 9934.662, 1234.158, 'prism on a post, south-east corner'),
  target('HT-105', 5061.73, 9897.284, 1236.493, 'prism on a post, stockpile'),
  target('HT-106', 4921.357, 10066.903, 1240.885, 'prism on a post, west fence'),
  benchmark('BM-1', 4988.54, 9968.212, 1236.215, 'iron pin in concrete, gate'),
  benchmark('BM-2', 5231.488, 10287.946, 1238.437, 'iron pin in concrete, north bank'),
];

/** Where the control really is: the survey that published it was good, not perfect. */
const drawn = chance('control of Thistledown Yard');
const TRUE_PLACES: ReadonlyMap<string, Place> = new Map(
  CONTROL.map(({ name, easting, northing, elevation, sigma }) => [
    name,
    {
      easting: easting + drawn.normal(sigma.horizontal),
      northing: northing + drawn.normal(sigma.horizontal),
      elevation: elevation + drawn.normal(sigma.vertical),
    },
  ]),
);

export function truePlace(name: string): Place {
  const place = TRUE_PLACES.get(name);
  if (!place) throw new Error(`There is no control point ${name}.`);
  return place;
}

export const INSTRUMENT: Instrument = {
  directionArcsec: 2,
  zenithArcsec: 2,
  distanceMm: 1.5,
  distancePpm: 2,
  collimationArcsec: 1.4,
  indexArcsec: -1.1,
};
/** One standard deviation of a reflector over its mark, and of its height, mm. */
export const TARGET_SIGMA_MM = { centring: 1, height: 1 };

export const AIR: Air = { fahrenheit: 68, inchesOfMercury: 28.61, humidity: 0.5, refraction: 0.16 };

/** The pad: a crown down its middle, 2 % to either side, 0.5 % to the south. */
export const PAD = { west: 5040, east: 5280, south: 10060, north: 10240, spacing: 20 };
const CROWN = { easting: 5160, elevation: 1239.2, crossFall: 0.02, fall: 0.005 };

export function finishElevation(easting: number, northing: number): number {
  return (
    CROWN.elevation -
    CROWN.crossFall * Math.abs(easting - CROWN.easting) -
    CROWN.fall * (PAD.north - northing)
  );
}

export const LAYER = { name: 'subgrade', offset: -0.5, below: 0.1, above: 0.05 };
