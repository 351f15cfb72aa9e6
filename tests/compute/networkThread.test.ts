import { describe, expect, it } from 'vitest';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { NetworkError } from '@/lib/compute/survey/networkResult';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { computeNetwork } from '@/lib/services/adjustments/compute';

/** Levels over a grid of marks, along every row and column, with errors of a millimetre. */
function levelledGrid(size: number, held: boolean): NetworkInput {
  const name = (i: number, j: number) => `${i}-${j}`;
  const line = (i: number, j: number, di: number, dj: number) => ({
    id: `${name(i, j)} ${di}`,
    from: name(i, j),
    to: name(i + di, j + dj),
    difference: 0.1 * di - 0.2 * dj + 0.001 * Math.sin(7 * i + 13 * j + di),
    weight: { by: 'sigma' as const, sigma: 0.001 },
  });
  const places = Array.from({ length: size * size }, (_, k) => [Math.floor(k / size), k % size]);
  const start = { easting: null, northing: null, elevation: 100, horizontalSigma: 1, verticalSigma: 1 };
  return {
    points: held ? [{ name: name(0, 0), ...start, horizontalDatum: 'new', verticalDatum: 'held' }] : [],
    setups: [],
    levelDifferences: places.flatMap(([i, j]) => [
      ...(i + 1 < size ? [line(i, j, 1, 0)] : []),
      ...(j + 1 < size ? [line(i, j, 0, 1)] : []),
    ]),
    positions: [],
    baselines: [],
    surroundings: DEFAULT_SURROUNDINGS,
    snooping: true,
  };
}

describe('a network that is adjusted in a thread of its own', () => {
  it('has the same result, to the last digit', async () => {
    const network = levelledGrid(24, true);
    expect(network.levelDifferences.length).toBeGreaterThan(1000);
    expect(await computeNetwork(network)).toEqual(adjustNetwork(network));
  }, 60_000);

  it('leaves this one free while it is computed', async () => {
    let turns = 0;
    const timer = setInterval(() => turns++, 5);
    await computeNetwork(levelledGrid(24, true));
    clearInterval(timer);
    expect(turns).toBeGreaterThan(5);
  }, 60_000);

  it('is refused with the same reason', async () => {
    const refused = computeNetwork(levelledGrid(24, false));
    await expect(refused).rejects.toBeInstanceOf(NetworkError);
    await expect(refused).rejects.toMatchObject({ code: 'no_datum' });
  }, 60_000);
});
