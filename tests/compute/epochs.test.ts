import { describe, expect, it } from 'vitest';
import { compareEpochs } from '@/lib/compute/survey/epochs';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { seededChance } from '@/tests/simulator/chance';
import { type NetworkPlan, simulateNetwork, type TruePoint } from '@/tests/simulator/siteNetwork';
import { networkAsEngine } from './networkAsEngine';

const PLAN: NetworkPlan = {
  ...{ setups: 4, points: 14, sightsOfPoint: 3, faces: ['left', 'right'], sets: 2, occupiedEvery: 0 },
  ...{ controlEvery: 3, controlSigma: 0.002, roverEvery: 0, levelled: 0, baselines: 0 },
};

type Shift = Partial<Record<string, [number, number, number]>>;

/** The same site observed twice, by other errors, with some points moved in between. */
function twoEpochs(
  seed: number,
  shifts: Shift,
  plan: Partial<NetworkPlan> = {},
): [NetworkInput, NetworkInput] {
  const all = { ...PLAN, ...plan };
  const before = simulateNetwork(all, seededChance(seed));
  const move = (point: TruePoint): TruePoint => {
    const [east, north, up] = shifts[point.name] ?? [0, 0, 0];
    return {
      ...point,
      easting: point.easting + east,
      northing: point.northing + north,
      height: point.height + up,
    };
  };
  const after = simulateNetwork(all, seededChance(seed), {
    chance: seededChance(seed + 1000),
    move,
  });
  return [networkAsEngine(before), networkAsEngine(after)];
}

describe('two epochs of a network', () => {
  it('find nothing moved where nothing moved: 5 % false alarms over 60 sites', () => {
    let alarms = 0;
    for (let seed = 1; seed <= 60; seed++)
      if (compareEpochs(...twoEpochs(seed, {})).moved.length > 0) alarms++;
    // Binomial with 60 and 0.05: 9 or more in one of 500.
    expect(alarms).toBeLessThanOrEqual(8);
  });

  it('find the point that moved by 20 mm, the displacement within its 95 % ellipse nine times of ten', () => {
    let [found, inside] = [0, 0];
    for (let seed = 1; seed <= 40; seed++) {
      const comparison = compareEpochs(...twoEpochs(seed, { P4: [0.016, -0.012, 0] }));
      const point = comparison.points.find(({ name }) => name === 'P4')!;
      expect(comparison.congruence.passed).toBe(false);
      if (comparison.moved[0] === 'P4') found++;
      expect(point.probability).toBeLessThan(0.001);
      const [e, n] = [point.easting! - 0.016, point.northing! + 0.012];
      const { semiMajor, semiMinor, azimuth } = point.ellipse95;
      const along = e * Math.sin(azimuth) + n * Math.cos(azimuth);
      const across = e * Math.cos(azimuth) - n * Math.sin(azimuth);
      if ((along / semiMajor) ** 2 + (across / semiMinor) ** 2 <= 1) inside++;
    }
    expect(found).toBe(40);
    // Binomial with 40 and 0.95: 33 or fewer in one of 250.
    expect(inside).toBeGreaterThanOrEqual(34);
  });

  it('find two points that moved apart, one of them settled', () => {
    const shifts: Shift = { P4: [0.02, 0.01, 0], P9: [0, 0, -0.025] };
    for (let seed = 1; seed <= 10; seed++) {
      const { moved, points, remaining } = compareEpochs(...twoEpochs(seed, shifts));
      expect([...moved].slice(0, 2).sort()).toEqual(['P4', 'P9']);
      expect(remaining.passed).toBe(true);
      const settled = points.find(({ name }) => name === 'P9')!;
      expect(Math.abs(settled.elevation! + 0.025)).toBeLessThan(4 * Math.sqrt(settled.covariance[8]));
    }
  });

  it('do not take control for firm: a control point that moved is found like any other', () => {
    const { moved } = compareEpochs(...twoEpochs(3, { P1: [0.03, 0, 0] }));
    expect(moved[0]).toBe('P1');
  });

  it('see no displacement where the whole network is stated to lie elsewhere', () => {
    const [before, after] = twoEpochs(5, {});
    const shifted: NetworkInput = {
      ...after,
      points: after.points.map((point) => ({
        ...point,
        easting: point.easting! + 12.5,
        northing: point.northing! - 3,
        elevation: point.elevation! + 0.75,
      })),
    };
    const plain = compareEpochs(before, after);
    const other = compareEpochs(before, shifted);
    expect(other.congruence.value).toBeCloseTo(plain.congruence.value, 5);
    other.points.forEach((point, i) => {
      expect(Math.abs(point.easting! - plain.points[i].easting!)).toBeLessThan(1e-6);
      expect(Math.abs(point.elevation! - plain.points[i].elevation!)).toBeLessThan(1e-6);
    });
  });

  it('name the points that only one epoch has', () => {
    const [before, after] = twoEpochs(7, {});
    const without = (input: NetworkInput, name: string): NetworkInput => ({
      ...input,
      points: input.points.filter((point) => point.name !== name),
      setups: input.setups.map((setup) => ({
        ...setup,
        shots: setup.shots.filter((shot) => shot.target !== name),
      })),
    });
    const { onlyBefore, onlyAfter, points } = compareEpochs(without(before, 'P5'), without(after, 'P8'));
    expect(onlyBefore).toEqual(['P8']);
    expect(onlyAfter).toEqual(['P5']);
    expect(points.map(({ name }) => name)).not.toContain('P5');
  });
});
