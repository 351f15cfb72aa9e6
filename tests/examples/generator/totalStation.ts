import type { Chance } from './chance';

/**
 * A total station as it works on site: what it would show of a point, from the point's true place. It shares nothing
 * with the hub's computation, so that the examples check that too.
 */

export const FOOT = 0.3048;
const ARCSECOND = Math.PI / 648_000;
const EARTH_RADIUS = 6_371_000;

/** Feet, in the site's grid. */
export interface Place {
  easting: number;
  northing: number;
  elevation: number;
}

export interface Instrument {
  /** Stated after ISO 17123: one direction observed in both faces. */
  directionArcsec: number;
  zenithArcsec: number;
  distanceMm: number;
  distancePpm: number;
  /** What is left of collimation and vertical index after the instrument's own correction. */
  collimationArcsec: number;
  indexArcsec: number;
}

export interface Air {
  fahrenheit: number;
  inchesOfMercury: number;
  humidity: number;
  /** True coefficient of refraction. */
  refraction: number;
}

export interface Standing {
  /** The tilting axis. */
  axis: Place;
  /** Azimuth of the circle's zero, degrees. */
  orientation: number;
  instrument: Instrument;
  air: Air;
  chance: Chance;
}

export interface Reflector {
  /** True centre of the reflector. */
  centre: Place;
  /** Its true constant, counted from the distance meter's own zero, mm. */
  constantMm: number;
  /** What the operator had set in the instrument, mm. */
  appliedMm: number;
}

/** What the display shows: degrees and feet. */
export interface Display {
  horizontal: number;
  zenith: number;
  slopeDistance: number;
}

export function observe(standing: Standing, reflector: Reflector, face: 'left' | 'right'): Display {
  const { axis, orientation, instrument, air, chance } = standing;
  const { azimuth, zenith, slope } = trueRay(axis, reflector.centre, air.refraction);
  const side = face === 'left' ? 1 : -1;
  const single = Math.SQRT2 * ARCSECOND;
  const reading =
    azimuth -
    orientation * (Math.PI / 180) +
    side * ((instrument.collimationArcsec * ARCSECOND) / Math.sin(zenith)) +
    chance.normal(instrument.directionArcsec * single);
  const vertical =
    zenith + side * instrument.indexArcsec * ARCSECOND + chance.normal(instrument.zenithArcsec * single);
  const length =
    slope / (1 + airPpm(air) * 1e-6) +
    (reflector.appliedMm - reflector.constantMm) / 1000 +
    chance.normal(instrument.distanceMm / 1000 + instrument.distancePpm * 1e-6 * slope);
  return {
    horizontal: turn((reading * 180) / Math.PI + (face === 'left' ? 0 : 180)),
    zenith: face === 'left' ? (vertical * 180) / Math.PI : 360 - (vertical * 180) / Math.PI,
    slopeDistance: length / FOOT,
  };
}

/** The ray over a spherical earth, bent by refraction: angles in radians, metres. */
function trueRay(from: Place, to: Place, refraction: number) {
  const east = (to.easting - from.easting) * FOOT;
  const north = (to.northing - from.northing) * FOOT;
  const ground = Math.hypot(east, north);
  const centre = ground / EARTH_RADIUS;
  // Both points count their heights from the sphere that passes through the tilting axis.
  const radius = EARTH_RADIUS + (to.elevation - from.elevation) * FOOT;
  const along = radius * Math.sin(centre);
  const up = radius * Math.cos(centre) - EARTH_RADIUS;
  return {
    azimuth: Math.atan2(east, north),
    zenith: Math.atan2(along, up) - (refraction * ground) / (2 * EARTH_RADIUS),
    slope: Math.hypot(along, up),
  };
}

/**
 * By how much the air shortens a distance, ppm, against air of 12 °C, 1013.25 hPa, 60 %: the closed formula of the
 * IAG resolutions of 1999 for a carrier of 658 nm.
 */
function airPpm({ fahrenheit, inchesOfMercury, humidity }: Air): number {
  const celsius = ((fahrenheit - 32) * 5) / 9;
  return refractivity(12, 1013.25, 0.6) - refractivity(celsius, inchesOfMercury * 33.863_886_4, humidity);
}

function refractivity(celsius: number, hPa: number, humidity: number): number {
  const group = 287.6155 + 4.8866 / 0.658 ** 2 + 0.068 / 0.658 ** 4;
  const kelvin = celsius + 273.15;
  const vapour = humidity * 6.1078 * 10 ** ((7.5 * celsius) / (237.3 + celsius));
  return (273.15 / 1013.25) * group * (hPa / kelvin) - (11.27 * vapour) / kelvin;
}

function turn(degrees: number): number {
  return ((degrees % 360) + 360) % 360;
}

/** `124-30-15.2`, to a tenth of a second. */
export function dms(degrees: number): string {
  const tenths = Math.round(degrees * 36_000) % (360 * 36_000);
  const [d, m, s] = [Math.floor(tenths / 36_000), Math.floor(tenths / 600) % 60, (tenths % 600) / 10];
  return `${d}-${String(m).padStart(2, '0')}-${s.toFixed(1).padStart(4, '0')}`;
}
