/**
 * Refraction of light in air after the IUGG/IAG resolutions of 1999 (Rüeger, Refractive Index Formulae for
 * Radio and Light Waves), closed formula, good to 1 ppm for infrared and red carriers.
 */

export interface Atmosphere {
  /** Dry-bulb temperature, K. */
  temperature: number;
  /** Station pressure, Pa: not reduced to sea level. */
  pressure: number;
  /** Relative humidity, 0–1. */
  humidity: number;
}

/** Carrier wavelength of a red laser distance meter, m; editable per instrument (common practice). */
export const DEFAULT_WAVELENGTH = 658e-9;
/** Air for which distance meters are commonly set up: 12 °C, 1013.25 hPa, 60 % (common practice). */
export const REFERENCE_ATMOSPHERE: Atmosphere = { temperature: 285.15, pressure: 101325, humidity: 0.6 };
/** Humidity taken where none was measured: its whole range is worth 1 ppm (common practice). */
export const DEFAULT_HUMIDITY = 0.6;

/** Group refractivity (n−1)·10⁶ of standard air at 0 °C, 1013.25 hPa, 0.0375 % CO₂; wavelength in metres. */
export function groupRefractivity(wavelength: number): number {
  const inverseSquare = 1e-12 / (wavelength * wavelength);
  return 287.6155 + 4.8866 * inverseSquare + 0.068 * inverseSquare * inverseSquare;
}

/** Partial pressure of water vapour in Pa. */
function vapourPressure({ temperature, humidity }: Atmosphere): number {
  return humidity * saturation(temperature);
}

/** Saturation pressure over water in Pa (Magnus formula with 6.1078, 7.5 and 237.3). */
function saturation(temperature: number): number {
  const celsius = temperature - 273.15;
  return 610.78 * 10 ** ((7.5 * celsius) / (237.3 + celsius));
}

/** Constant of the aspirated psychrometer over water, 1/K (Sprung 1888). */
const PSYCHROMETER = 0.000662;

/**
 * Relative humidity, 0–1, by an aspirated psychrometer: e = E(t′) − 0.000662·p·(t − t′). Negative where the wet bulb
 * is colder than the driest air makes it.
 *
 * @param wetBulb not below freezing, K
 */
export function humidityFromWetBulb(
  { temperature, pressure }: Pick<Atmosphere, 'temperature' | 'pressure'>,
  wetBulb: number,
): number {
  const vapour = saturation(wetBulb) - PSYCHROMETER * pressure * (temperature - wetBulb);
  return vapour / saturation(temperature);
}

/** Refractivity N = (n−1)·10⁶ of ambient air: (273.15/1013.25)·Ngr·p/T − 11.27·e/T with p and e in hPa. */
export function refractivity(atmosphere: Atmosphere, wavelength: number): number {
  const { temperature, pressure } = atmosphere;
  const dry = (273.15 / 1013.25) * groupRefractivity(wavelength) * (pressure / 100 / temperature);
  return dry - (11.27 * (vapourPressure(atmosphere) / 100)) / temperature;
}

/**
 * First velocity correction in ppm of the distance, positive when it lengthens: the refractivity that the
 * instrument was set up for minus that of the air it measured through.
 */
export function atmosphericPpm(
  atmosphere: Atmosphere,
  wavelength = DEFAULT_WAVELENGTH,
  reference = refractivity(REFERENCE_ATMOSPHERE, wavelength),
): number {
  return reference - refractivity(atmosphere, wavelength);
}

/**
 * Station pressure of the standard atmosphere, Pa, at a height in metres (ISO 2533:1975, troposphere):
 * 101325·(1 − 0.0065 h/288.15)^5.25588. Good enough to find a pressure that was reduced to sea level.
 */
export function standardPressure(height: number): number {
  return 101325 * (1 - (0.0065 * height) / 288.15) ** 5.25588;
}
