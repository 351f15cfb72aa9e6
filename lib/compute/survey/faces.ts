import { wrapDifference, wrapTurn } from '@/lib/compute/units/angles';
import { trueSlopeDistance } from './distance';
import { circleSigma, distanceSigma, type InstrumentAccuracy } from './instrument';
import type { Shot } from './shots';

export type ReadingKind = 'direction' | 'zenith' | 'distance';

/** A reading after its faces and repeats were meaned within a set. */
export interface Reading {
  kind: ReadingKind;
  /** Index of the erection (one reflector as it stood on its mark). */
  erection: number;
  set: number;
  value: number;
  sigma: number;
  /** +1 read in face left only, −1 face right only, 0 both: collimation and index remain in single faces. */
  face: 1 | -1 | 0;
}

/** A reflector as it stood on its mark: its centring and height errors are the same in all its readings. */
export interface Erection {
  target: string;
  targetHeight: number;
  centringSigma: number;
  heightSigma: number;
}

/** Errors of the instrument that two faces show and their mean is free of; null where no set has both. */
export interface FaceErrors {
  /** 2c: face left minus face right, at the horizon, rad. */
  twoCollimation: number | null;
  /** (left + right − 2π)/2, rad. */
  verticalIndex: number | null;
  /** Standard deviations as the stated accuracy makes them, rad. */
  twoCollimationSigma: number | null;
  verticalIndexSigma: number | null;
  /** Standard deviations of one pair as the pairs show it themselves, rad; null of fewer than two. */
  twoCollimationSpread: number | null;
  verticalIndexSpread: number | null;
  /** Pairs of faces that they come from. */
  collimationPairs: number;
  indexPairs: number;
}

export interface Means {
  erections: Erection[];
  readings: Reading[];
  /** Mean over all two-face pairs; null where no set has both faces. */
  faceErrors: FaceErrors | null;
}

/**
 * Means faces and repeats set by set (Ghilani and Wolf, Elementary Surveying, ch. 8). A face-right circle is
 * turned by 180°, a face-right zenith is 360° minus its reading; the means are free of collimation and of the
 * vertical index, which the differences give.
 *
 * @param ppm atmospheric correction wanted; null where the atmosphere is unknown
 */
export function meanFaces(shots: readonly Shot[], accuracy: InstrumentAccuracy, ppm: number | null): Means {
  const erections: Erection[] = [];
  const indexOf = new Map<string, number>();
  const groups = new Map<string, { erection: number; set: number; left: Shot[]; right: Shot[] }>();
  for (const shot of shots) {
    const standing = `${shot.target}\n${shot.targetHeight}`;
    let erection = indexOf.get(standing);
    if (erection === undefined) {
      erection = erections.length;
      indexOf.set(standing, erection);
      erections.push({
        target: shot.target,
        targetHeight: shot.targetHeight,
        centringSigma: shot.targetCentringSigma ?? accuracy.targetCentring,
        heightSigma: shot.targetHeightSigma ?? accuracy.targetHeight,
      });
    }
    const key = `${erection}/${shot.set}`;
    let group = groups.get(key);
    if (!group) {
      group = { erection, set: shot.set, left: [], right: [] };
      groups.set(key, group);
    }
    group[shot.face].push(shot);
  }

  const readings: Reading[] = [];
  const collimations: Pair[] = [];
  const indices: Pair[] = [];
  for (const { erection, set, left, right } of groups.values()) {
    const place = { erection, set };
    const zenith = meanZenith(left, right, accuracy);
    const direction = meanDirection(left, right, accuracy);
    const distance = meanDistance([...left, ...right], accuracy, ppm);
    if (direction) readings.push({ kind: 'direction', ...place, ...direction.reading });
    if (zenith) readings.push({ kind: 'zenith', ...place, ...zenith.reading });
    if (distance) readings.push({ kind: 'distance', ...place, ...distance });
    // The difference of two faces has twice the standard deviation of their mean.
    if (zenith?.difference != null) {
      indices.push({ value: zenith.difference / 2, sigma: zenith.reading.sigma });
    }
    if (direction?.difference != null) {
      const atHorizon = zenith ? Math.sin(zenith.reading.value) : 1;
      const sigma = 2 * direction.reading.sigma * atHorizon;
      collimations.push({ value: direction.difference * atHorizon, sigma });
    }
  }
  return { erections, readings, faceErrors: faceErrors(collimations, indices) };
}

/** What one pair of faces shows of an error. */
interface Pair {
  value: number;
  sigma: number;
}

function faceErrors(collimations: readonly Pair[], indices: readonly Pair[]): FaceErrors | null {
  if (collimations.length === 0 && indices.length === 0) return null;
  const [collimation, index] = [collimations, indices].map(meanPair);
  return {
    twoCollimation: collimation.mean,
    verticalIndex: index.mean,
    twoCollimationSigma: collimation.sigma,
    verticalIndexSigma: index.sigma,
    twoCollimationSpread: collimation.spread,
    verticalIndexSpread: index.spread,
    collimationPairs: collimations.length,
    indexPairs: indices.length,
  };
}

function meanPair(pairs: readonly Pair[]) {
  const n = pairs.length;
  if (n === 0) return { mean: null, sigma: null, spread: null };
  const middle = mean(pairs.map(({ value }) => value));
  const squares = pairs.reduce((sum, { value }) => sum + (value - middle) ** 2, 0);
  const variances = pairs.reduce((sum, { sigma }) => sum + sigma ** 2, 0);
  return {
    mean: middle,
    sigma: Math.sqrt(variances) / n,
    spread: n < 2 ? null : Math.sqrt(squares / (n - 1)),
  };
}

type SetMean = Pick<Reading, 'value' | 'sigma' | 'face'>;

function meanDirection(left: Shot[], right: Shot[], accuracy: InstrumentAccuracy) {
  const l = left.flatMap((shot) => shot.direction ?? []);
  const r = right.flatMap((shot) => (shot.direction === null ? [] : shot.direction - Math.PI));
  return meanCircle(l, r, accuracy.direction);
}

function meanZenith(left: Shot[], right: Shot[], accuracy: InstrumentAccuracy) {
  const l = left.flatMap((shot) => shot.zenith ?? []);
  const r = right.flatMap((shot) => (shot.zenith === null ? [] : 2 * Math.PI - shot.zenith));
  return meanCircle(l, r, accuracy.zenith);
}

/** @param right readings of face right, brought to face left */
function meanCircle(left: number[], right: number[], stated: number) {
  if (left.length + right.length === 0) return null;
  const origin = left[0] ?? right[0];
  const l = mean(left.map((value) => wrapDifference(value - origin)));
  const r = mean(right.map((value) => wrapDifference(value - origin)));
  const both = left.length > 0 && right.length > 0;
  const fromOrigin = both ? (l + r) / 2 : left.length > 0 ? l : r;
  const reading: SetMean = {
    value: wrapTurn(origin + fromOrigin),
    sigma: circleSigma(stated, left.length, right.length),
    face: both ? 0 : left.length > 0 ? 1 : -1,
  };
  return { reading, difference: both ? l - r : null };
}

function meanDistance(shots: Shot[], accuracy: InstrumentAccuracy, ppm: number | null): SetMean | null {
  const values = shots.flatMap((shot) => (shot.distance ? trueSlopeDistance(shot.distance, ppm) : []));
  if (values.length === 0) return null;
  const value = mean(values);
  return { value, sigma: distanceSigma(accuracy, value) / Math.sqrt(values.length), face: 0 };
}

/** The readings of one kind to one reflector, meaned. */
export interface MeanReading {
  value: number;
  sigma: number;
  /** Some of it was read in one face only. */
  single: boolean;
}

/** Weighted mean of the sets of one kind. */
export function meanOf(readings: readonly Reading[], kind: ReadingKind): MeanReading | null {
  const own = readings.filter((reading) => reading.kind === kind);
  if (own.length === 0) return null;
  let weights = 0;
  let shift = 0;
  for (const { value, sigma } of own) {
    const weight = 1 / (sigma * sigma);
    weights += weight;
    const difference = value - own[0].value;
    shift += weight * (kind === 'distance' ? difference : wrapDifference(difference));
  }
  return {
    value: own[0].value + shift / weights,
    sigma: 1 / Math.sqrt(weights),
    single: own.some((reading) => reading.face !== 0),
  };
}

function mean(values: readonly number[]): number {
  return values.length === 0 ? 0 : values.reduce((sum, value) => sum + value, 0) / values.length;
}
