import type { NetworkInput } from '@/lib/compute/survey/networkInput';

/** Shots and levelled differences of a network. */
export function observationCount({ setups, levelDifferences }: NetworkInput): number {
  return setups.reduce((sum, { shots }) => sum + shots.length, levelDifferences.length);
}
