/**
 * The one table of units. Everything inside the hub is in metres, radians, kelvin and pascal; these factors
 * and functions are used where a value enters or leaves, and nowhere else is a unit defined.
 *
 * Sources: international foot 0.3048 m exactly and U.S. survey foot 1200/3937 m exactly (Federal Register,
 * 24 FR 5348, 1 July 1959); conventional inch and millimetre of mercury 3386.389 Pa and 133.3224 Pa
 * (NIST SP 811, appendix B.8); gon = 1/400 turn; yard = 3 ft.
 */

/** Metres in one unit of length. */
export const LENGTH = { m: 1, ft: 0.3048, ftUS: 1200 / 3937 } as const;
export type LengthUnit = keyof typeof LENGTH;

/** Radians in one unit of angle; `dms` is text, see `parseDms`. */
export const ANGLE = { deg: Math.PI / 180, gon: Math.PI / 200, rad: 1 } as const;
export type AngleUnit = keyof typeof ANGLE | 'dms';

/** Pascal in one unit of pressure. */
export const PRESSURE = { hPa: 100, mmHg: 133.3224, inHg: 3386.389 } as const;
export type PressureUnit = keyof typeof PRESSURE;

/** Kelvin = (value + offset) × factor. */
export const TEMPERATURE = {
  C: { offset: 273.15, factor: 1 },
  F: { offset: 459.67, factor: 5 / 9 },
} as const;
export type TemperatureUnit = keyof typeof TEMPERATURE;

/** Cubic metres in one unit of ground volume (yd³ of international feet). */
export const VOLUME = { m3: 1, yd3: (3 * 0.3048) ** 3 } as const;
export type VolumeUnit = keyof typeof VOLUME;

/** Radians in one second of arc. */
export const ARCSECOND = Math.PI / 648000;

/** Metres in one millimetre, for the constants that instruments state in millimetres. */
export const MILLIMETRE = 0.001;

/** Metres in a statute mile of 5280 international feet, for limits that are stated per mile. */
export const MILE = 5280 * LENGTH.ft;
