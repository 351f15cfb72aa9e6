import {
  ANGLE,
  ARCSECOND,
  LENGTH,
  type LengthUnit,
  PRESSURE,
  type PressureUnit,
  TEMPERATURE,
  type TemperatureUnit,
} from './table';

/**
 * Fifteen significant digits: every decimal of up to fifteen digits that came in comes out as it was, without
 * the noise of the multiplication and division (0.1 ft = 0.03048 m = 0.1 ft, not 0.09999999999999999).
 */
function clean(value: number): number {
  return Number(value.toPrecision(15));
}

/** Length in `unit` to metres. */
export function toMetres(value: number, unit: LengthUnit): number {
  return value * LENGTH[unit];
}

/** Metres to length in `unit`. */
export function fromMetres(metres: number, unit: LengthUnit): number {
  return unit === 'm' ? metres : clean(metres / LENGTH[unit]);
}

/** Angle in a numeric `unit` to radians. */
export function toRadians(value: number, unit: keyof typeof ANGLE): number {
  return value * ANGLE[unit];
}

/** Radians to decimal degrees. */
export function toDegrees(radians: number): number {
  return clean(radians / ANGLE.deg);
}

/** A direction in [0, 2π) to decimal degrees in [0, 360): what rounding lifts to a full turn is zero. */
export function toAzimuth(radians: number): number {
  return toDegrees(radians) % 360;
}

/** Radians to seconds of arc. */
export function toArcseconds(radians: number): number {
  return clean(radians / ARCSECOND);
}

/** Temperature in `unit` to kelvin. */
export function toKelvin(value: number, unit: TemperatureUnit): number {
  return (value + TEMPERATURE[unit].offset) * TEMPERATURE[unit].factor;
}

/** Kelvin to temperature in `unit`. */
export function fromKelvin(kelvin: number, unit: TemperatureUnit): number {
  return clean(kelvin / TEMPERATURE[unit].factor - TEMPERATURE[unit].offset);
}

/** Pascal to pressure in `unit`. */
export function fromPascal(pascal: number, unit: PressureUnit): number {
  return clean(pascal / PRESSURE[unit]);
}

/** Pressure in `unit` to pascal. */
export function toPascal(value: number, unit: PressureUnit): number {
  return value * PRESSURE[unit];
}
