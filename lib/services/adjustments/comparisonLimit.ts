import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { Problem } from '@/lib/problem';
import { observationCount } from './count';

/** More than these take seconds, and a request answers at once; the cost grows with the cube of the common points. */
const MOST_OBSERVATIONS = 2_000;
const MOST_COMMON_POINTS = 100;

/** Refuses what is too large to be compared in one request. */
export function requireComparable(earlier: NetworkInput, later: NetworkInput): void {
  const count = observationCount(earlier) + observationCount(later);
  if (count > MOST_OBSERVATIONS) {
    const detail = `Both have ${count} shots and levelled differences; ${MOST_OBSERVATIONS} are the most that are compared.`;
    throw new Problem('comparison_too_large', detail);
  }
  const observed = observedPoints(earlier);
  const common = [...observedPoints(later)].filter((name) => observed.has(name)).length;
  if (common > MOST_COMMON_POINTS) {
    const detail = `The two have ${common} points in common; ${MOST_COMMON_POINTS} are the most that are compared.`;
    throw new Problem('comparison_too_large', detail);
  }
}

/** Names of the points that a network's observations touch. */
function observedPoints({ setups, levelDifferences }: NetworkInput): Set<string> {
  const stands = setups.flatMap(({ occupied, shots }) => [occupied, ...shots.map(({ target }) => target)]);
  const levelled = levelDifferences.flatMap(({ from, to }) => [from, to]);
  return new Set([...stands, ...levelled].filter((name) => name !== null));
}
