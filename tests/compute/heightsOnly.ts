import { adjustNetwork } from '@/lib/compute/survey/network';
import type {
  CoordinateDatum,
  LevelDifference,
  NetworkInput,
  NetworkPoint,
} from '@/lib/compute/survey/networkInput';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';

/** A point of a network of heights alone. */
export function heightOf(
  name: string,
  elevation: number | null,
  verticalDatum: CoordinateDatum,
  verticalSigma = 1,
): NetworkPoint {
  const plan = { easting: null, northing: null, horizontalDatum: 'new', horizontalSigma: 1 } as const;
  return { name, ...plan, elevation, verticalDatum, verticalSigma };
}

/** Levelled differences adjusted by the general network adjustment. */
export function adjustHeights(
  points: readonly NetworkPoint[],
  levelDifferences: readonly LevelDifference[],
  snooping = false,
) {
  const input: NetworkInput = {
    points,
    setups: [],
    levelDifferences,
    positions: [],
    baselines: [],
    surroundings: DEFAULT_SURROUNDINGS,
    snooping,
  };
  const result = adjustNetwork(input);
  const point = (name: string) => {
    const found = result.points.find((candidate) => candidate.name === name);
    if (!found || found.elevation === null) throw new Error(`${name} has no height.`);
    return { elevation: found.elevation, sigma: found.elevationSigma };
  };
  const observation = (source: string) => {
    const found = result.observations.find(
      (candidate) => candidate.kind === 'levelDifference' && candidate.source === source,
    );
    if (!found) throw new Error(`${source} is no observation of the network.`);
    return found;
  };
  return { result, point, observation };
}
