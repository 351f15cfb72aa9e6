import type { InstrumentAccuracy } from './instrument';
import type { Shot } from './shots';
import type { Surroundings } from './surroundings';

/**
 * What a coordinate does for the datum of a network:
 *
 * - `held`: fixed at its value, no unknown.
 * - `weighted`: an unknown with its published value as an observation of its standard deviation.
 * - `free`: an unknown; where nothing else places the network, it is placed so that the corrections of all free
 *   coordinates have the least sum of squares (inner constraints).
 * - `new`: an unknown that has no part in the datum; its value, where it has one, is a start value only.
 */
export type CoordinateDatum = 'held' | 'weighted' | 'free' | 'new';

/** A point of the network. Points that are only named by observations are new and need no entry. */
export interface NetworkPoint {
  name: string;
  /** m; null where unknown. Both or none; required unless `horizontalDatum` is `new`. */
  easting: number | null;
  northing: number | null;
  /** m; null where unknown; required unless `verticalDatum` is `new`. */
  elevation: number | null;
  horizontalDatum: CoordinateDatum;
  verticalDatum: CoordinateDatum;
  /** Per axis, m, above zero; used where the datum is `weighted`. */
  horizontalSigma: number;
  verticalSigma: number;
}

/** The shots of one setup of an instrument; directions share one orientation, and refraction is one for all. */
export interface NetworkSetup {
  id: string;
  /** The point that the instrument stands on; null for a free station, which has unknowns of its own. */
  occupied: string | null;
  /** Tilting axis above the occupied point, m; null where it was not measured: heights then pass by the point. */
  instrumentHeight: number | null;
  /**
   * All shots that are to take part, whatever their purpose, ids unique within the setup. A reflector that stood on
   * its mark (same target, same target height) has one centring and one height error in all its readings.
   */
  shots: readonly Shot[];
  accuracy: InstrumentAccuracy;
  /** Atmospheric correction wanted; null where the atmosphere is unknown: a scale of its own is then estimated. */
  ppm: number | null;
}

/** How far a levelled difference of heights is to be trusted. */
export type LevelWeight =
  /** σ = `sigmaPerRootKilometre`·√(length in km). */
  | { by: 'length'; length: number; sigmaPerRootKilometre: number }
  /** σ = `sigmaPerSetup`·√setups. */
  | { by: 'setups'; setups: number; sigmaPerSetup: number }
  | { by: 'sigma'; sigma: number };

/** A levelled difference of heights, to minus from, m. */
export interface LevelDifference {
  id: string;
  from: string;
  to: string;
  difference: number;
  weight: LevelWeight;
}

/** A position found by a rover, reduced to its mark, in the frame of the project. */
export interface RoverPosition {
  id: string;
  point: string;
  easting: number;
  northing: number;
  elevation: number;
  /** Of (easting, northing, elevation), 3 × 3 row by row, m²; positive definite. */
  covariance: readonly number[];
}

/** A difference of positions from a rover, to minus from, reduced to the marks, in the frame of the project. */
export interface RoverBaseline {
  id: string;
  from: string;
  to: string;
  easting: number;
  northing: number;
  elevation: number;
  /** Of (easting, northing, elevation), 3 × 3 row by row, m²; positive definite. */
  covariance: readonly number[];
}

/** Everything that goes into one adjustment of a network. */
export interface NetworkInput {
  points: readonly NetworkPoint[];
  setups: readonly NetworkSetup[];
  levelDifferences: readonly LevelDifference[];
  positions: readonly RoverPosition[];
  baselines: readonly RoverBaseline[];
  surroundings: Surroundings;
  /** Remove observations whose standardised residual is too large, the worst first. */
  snooping: boolean;
}
