/** What a project says of the ground that its rays cross. */
export interface Surroundings {
  /** grid = ground × factor, horizontal distances only. */
  combinedFactor: number;
  /** Coefficient of refraction k and its standard deviation. */
  refraction: number;
  refractionSigma: number;
  /** Radius of the earth, m. */
  earthRadius: number;
  /** Standard deviation of the scale of all distances where no atmosphere was given, ppm. */
  unknownAtmospherePpm: number;
}

/** IUGG mean radius R₁ of GRS 80 (Moritz 2000), m. */
export const MEAN_EARTH_RADIUS = 6371008.8;

/** k = 0.13 is Gauss's mean value; its spread near the ground and the 10 ppm (10 °C) are common practice. */
export const DEFAULT_SURROUNDINGS: Surroundings = {
  combinedFactor: 1,
  refraction: 0.13,
  refractionSigma: 0.3,
  earthRadius: MEAN_EARTH_RADIUS,
  unknownAtmospherePpm: 10,
};
