import { describe, expect, it } from 'vitest';
import { compareEpochs } from '@/lib/compute/survey/epochs';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import { requireComparable } from '@/lib/services/adjustments/comparisonLimit';
import { wordsOfComparison, wordsOfDisplacement } from '@/lib/services/adjustments/comparisonWords';
import { Lengths } from '@/lib/services/lengths';
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

const METRES = new Lengths('m');

/** An epoch in which nothing but some of its points was observed. */
function keeping(input: NetworkInput, names: readonly string[]): NetworkInput {
  return {
    ...input,
    points: input.points.filter(({ name }) => names.includes(name)),
    setups: input.setups.map((setup) => ({
      ...setup,
      shots: setup.shots.filter(({ target }) => names.includes(target)),
    })),
  };
}

/** An epoch that knows one of its points by another name. */
function renaming(input: NetworkInput, name: string, other: string): NetworkInput {
  return {
    ...input,
    points: input.points.map((point) => (point.name === name ? { ...point, name: other } : point)),
    setups: input.setups.map((setup) => ({
      ...setup,
      shots: setup.shots.map((shot) => (shot.target === name ? { ...shot, target: other } : shot)),
    })),
  };
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

  it('test nothing, and say nothing moved or stayed, where one point is common', () => {
    const [before, after] = twoEpochs(7, {});
    const [one, other] = [
      keeping(before, ['P1', 'P2', 'P3', 'P4']),
      keeping(after, ['P4', 'P5', 'P6', 'P7']),
    ];
    const found = compareEpochs(one, other);
    expect(found.points.map(({ name }) => name)).toEqual(['P4']);
    expect(found.congruence).toMatchObject({ value: 0, degreesOfFreedom: 0 });
    expect(found.moved).toEqual([]);
    const { text, action } = wordsOfComparison(found);
    expect(text).toBe(
      'The two have 1 common point, too little to compare: whether anything moved cannot be told.',
    );
    expect(action).toMatch(/three at the least/);
    expect(wordsOfDisplacement(found.points[0], found.remaining, METRES)).toBe(
      'Whether P4 moved cannot be told.',
    );
  });

  it('see that two points lie otherwise, and do not tell which of them moved', () => {
    const [before] = twoEpochs(7, {}, { controlEvery: 1 });
    const two = [...new Set(before.setups[0].shots.map(({ target }) => target))].slice(0, 2);
    const [, after] = twoEpochs(7, { [two[0]]: [0.3, 0.2, 0] }, { controlEvery: 1 });
    const found = compareEpochs(keeping(before, two), keeping(after, two));
    expect(found.congruence.passed).toBe(false);
    expect(found.moved).toEqual([]);
    expect(wordsOfComparison(found).text).toMatch(
      /^The 2 common points no longer lie to each other .* cannot be told\.$/,
    );
    for (const point of found.points)
      expect(wordsOfDisplacement(point, found.remaining, METRES)).toMatch(
        /^P\d+ differs by .*; whether it moved cannot be told\.$/,
      );
  });

  it('say that the others stayed only where they were tested and agree', () => {
    const found = compareEpochs(...twoEpochs(2, { P4: [0.02, 0, 0] }));
    expect(wordsOfComparison(found).text).toBe('Moved: P4; the others stayed.');
    const unsure = { ...found, remaining: { ...found.remaining, passed: false } };
    expect(wordsOfComparison(unsure).text).toMatch(/^Moved: P4; the others do not agree either/);
    const [still] = found.points.filter(({ moved }) => !moved);
    expect(wordsOfDisplacement(still, found.remaining, METRES)).toMatch(/ stayed; it differs by /);
    expect(wordsOfDisplacement(still, unsure.remaining, METRES)).toMatch(/whether it moved cannot be told/);
  });

  it('have as much left without a point as the others make in an adjustment of their own datum', () => {
    const [before, after] = twoEpochs(4, { P4: [0.05, 0.02, 0], P9: [0, 0.04, -0.03] });
    const { moved, remaining, points } = compareEpochs(before, after);
    expect(moved.length).toBeGreaterThan(1);
    const out = moved.map((name) => [name, `${name}'`]);
    const renamed = out.reduce((input, [name, other]) => renaming(input, name, other), after);
    const rest = compareEpochs(before, renamed);
    expect(rest.moved).toEqual([]);
    expect(rest.points).toHaveLength(points.length - moved.length);
    expect(rest.congruence.degreesOfFreedom).toBe(remaining.degreesOfFreedom);
    expect(rest.congruence.value).toBeCloseTo(remaining.value, 6);
  });

  it('are refused where they have more than a hundred points in common', () => {
    const [before] = twoEpochs(1, {});
    const many = (from: number, to: number): NetworkInput => {
      const [setup] = before.setups;
      const targets = Array.from({ length: to - from }, (_, i) => `N${from + i}`);
      const shots = targets.map((target) => ({ ...setup.shots[0], id: target, target }));
      return { ...before, setups: [{ ...setup, occupied: null, shots }], levelDifferences: [] };
    };
    expect(() => requireComparable(many(0, 150), many(50, 200))).not.toThrow();
    expect(() => requireComparable(many(0, 150), many(49, 200))).toThrow(
      expect.objectContaining({ code: 'comparison_too_large' }),
    );
  });
});
