import type { Ellipse } from '@/lib/compute/adjustment/ellipse';
import type { GlobalTest } from '@/lib/compute/adjustment/globalTest';
import type { CoordinateDatum } from './networkInput';

/** Observed by somebody. */
export type ObservedKind =
  | 'direction'
  | 'zenith'
  | 'distance'
  | 'levelDifference'
  | 'position'
  | 'baseline'
  | 'control';
/** Held about zero or a stated value by its standard deviation: an error that repeats do not shrink. */
export type AssumedKind =
  | 'instrumentCentring'
  | 'instrumentHeight'
  | 'targetCentring'
  | 'targetHeight'
  | 'refraction'
  | 'collimation'
  | 'verticalIndex'
  | 'scale';

/** Shift that an undetected error of an observation would bring about, m. */
export interface PointEffect {
  /** A point, or the id of a setup where its free station is meant. */
  point: string;
  easting: number;
  northing: number;
  elevation: number;
}

/** One observation after the adjustment; rad for directions, zenith angles, collimation and index, else m or 1. */
export interface NetworkObservation {
  kind: ObservedKind | AssumedKind;
  /** Id of the setup, level difference, position or baseline; name of the point of a `control` coordinate. */
  source: string;
  /** Where from and where to; null where there is none. A free station goes by its setup's id in `source`. */
  from: string | null;
  to: string | null;
  /**
   * Coordinate of a position, baseline or control; of a centring, along and across the ray (the zero of the circle, for
   * an instrument); null for scalars.
   */
  component: 'easting' | 'northing' | 'elevation' | 'along' | 'across' | null;
  /** Number of the set; null where it has none. */
  set: number | null;
  /** Ids of the shots that it was meaned from, within the setup; empty elsewhere. */
  shots: readonly string[];
  /** A-priori standard deviation. */
  sigma: number;
  /** Observed minus fitted. Where the observation was removed: as it lies beside the fit of the others. */
  residual: number;
  /** Share of an error that shows in its own residual, 0–1; null where removed. */
  redundancy: number | null;
  /** Standard normal without blunders; null where nothing else controls it or it was removed. */
  standardised: number | null;
  /** Smallest error found with power 0.80 at α₀ = 0.001; null like `standardised`. */
  minimalDetectable: number | null;
  /**
   * What an error of that size would do to the points that it touches, the one that moves most (of a levelled
   * difference: to their elevations); null where `minimalDetectable` is.
   */
  effect: PointEffect | null;
  /**
   * δ₀√((1−r)/r): no coordinate of the network can be shifted by an error of that size by more than this many of
   * its own standard deviations (Baarda 1968); null like `standardised`.
   */
  biasToNoise: number | null;
  removed: boolean;
}

/** An observation that snooping took out. */
export interface RemovedObservation {
  /** Index in `observations`; all coordinates of a position or baseline leave together, the worst is named. */
  observation: number;
  /**
   * Standardised residual that it was removed for, the largest of all at that moment; of one that was grossly wrong, as
   * it lies beside the fit of the others.
   */
  standardised: number;
  redundancy: number;
  /** Estimate of its error from the others, with its standard deviation; in its own unit. */
  error: number;
  errorSigma: number;
  /** Observations whose error would have shown in the same way: it may be one of them instead. */
  alternatives: readonly number[];
}

export interface AdjustedPoint {
  name: string;
  horizontalDatum: CoordinateDatum;
  verticalDatum: CoordinateDatum;
  /** m; null where the observations do not reach this far. */
  easting: number | null;
  northing: number | null;
  elevation: number | null;
  /** Adjusted minus given coordinates, m; null where none were given. */
  shift: { easting: number | null; northing: number | null; elevation: number | null };
  /** Of (easting, northing, elevation), 3 × 3 row by row, m², times `scale`²; zero where held or null. */
  covariance: Float64Array;
  /** Semi-axes of the 95 % ellipse, m. */
  ellipse95: Ellipse;
  /** Standard deviation of the elevation, m. */
  elevationSigma: number;
}

export interface AdjustedSetup {
  id: string;
  occupied: string | null;
  /** Of the tilting axis, m. */
  easting: number;
  northing: number;
  axis: number | null;
  /** Of the zero of the circle, rad; null where no direction was read. */
  orientation: number | null;
  /** As `AdjustedPoint.covariance`. */
  covariance: Float64Array;
  ellipse95: Ellipse;
}

/** Shots or observations that could not take part, and why. */
export interface LeftOut {
  kind: 'distance' | 'setup' | 'levelDifference' | 'position' | 'baseline' | 'shot';
  /** Id of the setup, level difference, position or baseline. */
  source: string;
  shots: readonly string[];
  /**
   * `zenith_wanted`: a slope distance without zenith angle between ends whose heights are not both known.
   * `not_connected`: neither the datum nor any other observation leads there.
   */
  reason: 'zenith_wanted' | 'not_connected';
}

/** What places the network: how many ways of moving it the inner constraints had to settle. */
export interface NetworkDatum {
  /** Movements that no observation and no control coordinate sees, settled by the free coordinates. */
  free: readonly ('easting' | 'northing' | 'elevation' | 'rotation')[];
  /** Counts of coordinates (an easting and a northing count two). */
  held: number;
  weighted: number;
}

/** A network adjusted; plain data throughout. */
export interface NetworkResult {
  converged: boolean;
  iterations: number;
  unknowns: number;
  test: GlobalTest;
  /** σ₀ where the global test failed high, else 1: already in the covariances and ellipses. */
  scale: number;
  datum: NetworkDatum;
  points: readonly AdjustedPoint[];
  setups: readonly AdjustedSetup[];
  observations: readonly NetworkObservation[];
  /** In the order of removal; empty where snooping was not asked for. */
  removed: readonly RemovedObservation[];
  /**
   * Why snooping ended: `clean` (nothing above 3.29 is left), `too_many` (a tenth of the observations is out, or every
   * solution shows more of them: the model or the stated accuracies are wrong, not the observations), null where it was not asked for.
   */
  snoopingEnded: 'clean' | 'too_many' | null;
  leftOut: readonly LeftOut[];
}

/** Why a network cannot be computed at all. */
export class NetworkError extends Error {
  constructor(
    /**
     * `no_observations`: nothing is left to adjust. `no_datum`: no coordinate is held, weighted or free.
     * `not_determined`: the observations do not determine the points and setups named. `contradiction`: no
     * convergence from the start values, the worst fitting setups or observations are named.
     */
    readonly code: 'no_observations' | 'no_datum' | 'not_determined' | 'contradiction',
    /** Names of points, ids of setups and other sources that it concerns. */
    readonly points: readonly string[] = [],
    readonly sources: readonly string[] = [],
  ) {
    super(code);
    this.name = 'NetworkError';
  }
}
