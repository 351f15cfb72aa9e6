import { between, type Chance, wholeBetween } from './chance';
import type { Instrument, Site, TrueMark } from './observe';
import { turn } from './sight';

const ARCSECOND = Math.PI / 648000;

/** What a random site may deviate from the plain case in. */
export interface Kind {
  /** Marks published without an elevation. */
  withoutElevation?: number;
  /** A second reflector on the first mark, at another height. */
  secondReflector?: boolean;
  /** Nobody measured the air: its correction is known to so many ppm. */
  unknownAirPpm?: number;
  combinedFactor?: number;
  /** So many marks, fewest and most, instead of three to six. */
  marks?: [number, number];
  /** Always all around. */
  allRound?: boolean;
}

/**
 * A station anywhere on a grid, its circle oriented anyhow, and three to six marks 25 to 300 m away: all around, or
 * within a sector of 60° to 180°.
 */
export function randomSite(chance: Chance, kind: Kind = {}): Site {
  const combinedFactor = kind.combinedFactor ?? 1;
  const station = {
    easting: between(chance, 1000, 700_000),
    northing: between(chance, 1000, 5_000_000),
    height: between(chance, 0, 1500),
  };
  const [fewest, most] = kind.marks ?? [3, 6];
  const count = wholeBetween(chance, fewest, most);
  const around = chance.uniform() < 0.5 || kind.allRound === true;
  const sector = around ? 2 * Math.PI : between(chance, Math.PI / 3, Math.PI);
  const first = between(chance, 0, 2 * Math.PI);
  const marks = Array.from({ length: count }, (_, i): TrueMark => {
    const azimuth = first + (sector * (i + between(chance, 0, 0.6))) / count;
    const grid = between(chance, 25, 300) * combinedFactor;
    return {
      name: `M${i + 1}`,
      easting: station.easting + grid * Math.sin(azimuth),
      northing: station.northing + grid * Math.cos(azimuth),
      height: station.height + between(chance, -0.12, 0.12) * grid,
      horizontalSigma: between(chance, 0.001, 0.005),
      verticalSigma: between(chance, 0.001, 0.005),
      hasElevation: i >= (kind.withoutElevation ?? 0),
      reflectors: kind.secondReflector && i === 0 ? [1.5, 0.2] : [between(chance, 0, 2)],
    };
  });
  const ppm = between(chance, -20, 60);
  return {
    station,
    orientation: turn(between(chance, 0, 2 * Math.PI)),
    marks,
    refraction: { mean: 0.13, sigma: 0.3 },
    earthRadius: 6371008.8,
    combinedFactor,
    ppm,
    ppmSigma: kind.unknownAirPpm ?? 0,
    // Where nobody measured the air, the instrument's own correction is the best guess at it.
    appliedPpm: kind.unknownAirPpm === undefined ? 0 : ppm,
    prismConstantMm: -30,
    prismConstantAppliedMm: 0,
  };
}

/** A total station of 1″ to 7″ and 1 to 3 mm + 1 to 3 ppm, with reflectors on poles and tripods. */
export function randomInstrument(chance: Chance): Instrument {
  return {
    direction: between(chance, 1, 7) * ARCSECOND,
    zenith: between(chance, 1, 7) * ARCSECOND,
    distance: between(chance, 0.001, 0.003),
    distancePpm: between(chance, 1, 3),
    collimation: between(chance, 2, 10) * ARCSECOND,
    targetCentring: between(chance, 0.0005, 0.002),
    targetHeight: between(chance, 0.0005, 0.002),
  };
}
