import type { Chance } from './chance';
import { type Ground, type Place, sightTo, turn } from './sight';

export type Face = 'left' | 'right';

/** One standard deviation each, rad and m, as an instrument states them. */
export interface Instrument {
  /** A direction, a zenith angle observed in both faces. */
  direction: number;
  zenith: number;
  /** a + b ppm of one reading. */
  distance: number;
  distancePpm: number;
  /** Collimation and vertical index, drawn once a setup. */
  collimation: number;
  targetCentring: number;
  targetHeight: number;
}

/** A mark as it truly is, with how well its published coordinates are known and how high its reflectors stand. */
export interface TrueMark extends Place {
  name: string;
  horizontalSigma: number;
  verticalSigma: number;
  /** Published with an elevation. */
  hasElevation: boolean;
  /** Heights of the reflectors above the mark, m: one erection each. */
  reflectors: number[];
}

/** The world that a setup stands in, and what is asked of it. */
export interface Site extends Ground {
  /** Tilting axis. */
  station: Place;
  /** Azimuth of the circle's zero, rad. */
  orientation: number;
  marks: TrueMark[];
  /** Coefficient of refraction: mean and standard deviation, drawn once a setup. */
  refraction: { mean: number; sigma: number };
  /** Atmospheric correction that the air asks for, ppm; its standard deviation where nobody measured the air. */
  ppm: number;
  ppmSigma: number;
  /** What the instrument took the correction and the reflector's constant for. */
  appliedPpm: number;
  prismConstantMm: number;
  prismConstantAppliedMm: number;
}

export interface Programme {
  /** Faces of every set. */
  faces: Face[];
  sets: number;
}

/** One pointing as displayed, rad and m. */
export interface Pointing {
  target: string;
  reflector: number;
  targetHeight: number;
  face: Face;
  set: number;
  horizontal: number;
  zenith: number;
  slopeDistance: number;
}

export interface PublishedMark {
  name: string;
  easting: number;
  northing: number;
  elevation: number | null;
  horizontalSigma: number;
  verticalSigma: number;
}

export interface Observed {
  site: Site;
  instrument: Instrument;
  /** What was drawn, and nobody on the site knows. */
  truth: { refraction: number; collimation: number; index: number };
  published: PublishedMark[];
  pointings: Pointing[];
}

/**
 * Observes a free station. Drawn once a setup: refraction, collimation, index, the air; once a mark: its published
 * coordinates; once an erection: centring and height of the reflector; with every reading: direction, zenith and
 * distance noise. A stated angle belongs to one direction in both faces, so that a single reading carries √2 of it.
 */
export function observe(site: Site, instrument: Instrument, programme: Programme, chance: Chance): Observed {
  const drawn = (sigma: number) => sigma * chance.normal();
  const truth = {
    refraction: site.refraction.mean + drawn(site.refraction.sigma),
    collimation: drawn(instrument.collimation),
    index: drawn(instrument.collimation),
  };
  const ppm = site.ppm + drawn(site.ppmSigma);
  const published = site.marks.map((mark): PublishedMark => {
    const elevation = mark.height + drawn(mark.verticalSigma);
    return {
      name: mark.name,
      easting: mark.easting + drawn(mark.horizontalSigma),
      northing: mark.northing + drawn(mark.horizontalSigma),
      elevation: mark.hasElevation ? elevation : null,
      horizontalSigma: mark.horizontalSigma,
      verticalSigma: mark.verticalSigma,
    };
  });
  const erections = site.marks.flatMap((mark) =>
    mark.reflectors.map((targetHeight, reflector) => {
      const place = {
        easting: mark.easting + drawn(instrument.targetCentring),
        northing: mark.northing + drawn(instrument.targetCentring),
        height: mark.height + targetHeight + drawn(instrument.targetHeight),
      };
      const sight = sightTo(site.station, place, truth.refraction, site);
      return { target: mark.name, reflector, targetHeight, sight };
    }),
  );
  const reading = Math.SQRT2;
  const pointings: Pointing[] = [];
  for (let set = 1; set <= programme.sets; set++) {
    for (const face of programme.faces) {
      for (const { sight, ...erection } of erections) {
        const side = face === 'left' ? 1 : -1;
        const direction =
          sight.azimuth -
          site.orientation +
          (side * truth.collimation) / Math.sin(sight.zenith) +
          drawn(reading * instrument.direction);
        const zenith = sight.zenith + drawn(reading * instrument.zenith);
        const slope = sight.slope + drawn(instrument.distance + instrument.distancePpm * 1e-6 * sight.slope);
        pointings.push({
          ...erection,
          face,
          set,
          horizontal: turn(face === 'left' ? direction : direction + Math.PI),
          zenith: (face === 'left' ? zenith : 2 * Math.PI - zenith) + truth.index,
          slopeDistance: displayed(slope, ppm, site),
        });
      }
    }
  }
  return { site, instrument, truth, published, pointings };
}

/**
 * What the distance meter shows for a true slope distance: the published rule, true = (shown + constant − applied
 * constant)·(1 + (ppm − applied ppm)·10⁻⁶), read backwards.
 */
function displayed(slope: number, ppm: number, site: Site): number {
  const constant = (site.prismConstantMm - site.prismConstantAppliedMm) * 1e-3;
  return slope / (1 + (ppm - site.appliedPpm) * 1e-6) - constant;
}
