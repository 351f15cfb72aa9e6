import { spawnSync } from 'node:child_process';
import { beforeAll, describe, expect, it } from 'vitest';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { CoordinateDatum, NetworkInput } from '@/lib/compute/survey/networkInput';
import type { NetworkResult } from '@/lib/compute/survey/networkResult';
import { seededChance, wholeBetween } from '@/tests/simulator/chance';
import { type NetworkPlan, type SimulatedNetwork, simulateNetwork } from '@/tests/simulator/siteNetwork';
import { networkAsEngine } from './networkAsEngine';

const PYTHON = '/usr/bin/python3';
const DELTA_0 = 4.13;

interface Answer {
  points: Record<string, { at: (number | null)[]; covariance: number[] }>;
  weightedSquares: number;
  degreesOfFreedom: number;
  observations: {
    kind: string;
    source: string;
    residual: number;
    redundancy: number;
    standardised: number;
    sigma: number | null;
  }[];
}

const probe = spawnSync(PYTHON, ['-c', 'import scipy.linalg'], { encoding: 'utf8' });
const missing = probe.status === 0 ? null : (probe.stderr?.trim().split('\n').at(-1) ?? String(probe.error));
if (missing) console.log(`Skipped: no scipy to compare with (install python3-scipy). ${missing}`);

const PLAN: NetworkPlan = {
  ...{ setups: 7, points: 26, sightsOfPoint: 2, faces: ['left', 'right'], sets: 1, occupiedEvery: 3 },
  ...{ controlEvery: 6, controlSigma: 0.002, roverEvery: 0, levelled: 0, baselines: 0 },
};

/** Networks of every kind and datum, below and above the size from which the elimination is sparse. */
const KINDS: { name: string; plan: Partial<NetworkPlan>; datum: CoordinateDatum; free: number }[] = [
  { name: 'weighted control', plan: {}, datum: 'weighted', free: 0 },
  { name: 'held control', plan: { sets: 2, faces: ['left'] }, datum: 'held', free: 0 },
  { name: 'a free datum', plan: { controlEvery: 4 }, datum: 'free', free: 4 },
  { name: 'levelled differences', plan: { levelled: 15 }, datum: 'weighted', free: 0 },
  { name: 'a free datum with levelled differences', plan: { levelled: 15 }, datum: 'free', free: 4 },
  { name: 'rover positions', plan: { roverEvery: 5, faces: ['right'] }, datum: 'weighted', free: 0 },
  {
    name: 'rover vectors and everything',
    plan: { roverEvery: 7, levelled: 6, baselines: 6 },
    datum: 'held',
    free: 0,
  },
  {
    name: 'few unknowns',
    plan: { setups: 2, points: 6, controlEvery: 2, occupiedEvery: 0 },
    datum: 'weighted',
    free: 0,
  },
  {
    name: 'few unknowns and a free datum',
    plan: { setups: 2, points: 6, controlEvery: 1 },
    datum: 'free',
    free: 4,
  },
];

function asCase(network: SimulatedNetwork, input: NetworkInput, free: number) {
  const { truth, setups } = network;
  return {
    ...input,
    free,
    truth: Object.fromEntries([...truth].map(([name, p]) => [name, [p.easting, p.northing, p.height]])),
    setups: input.setups.map((setup, i) => ({
      ...setup,
      ...startOf(network, setups[i]),
      shots: setup.shots.map(({ distance, ...shot }) => ({
        ...shot,
        slope: distance!.slopeDistance,
        ...{ constant: 0, constantApplied: 0, appliedPpm: 0 },
      })),
    })),
  };
}

/** Where a setup begins: the truth as it was drawn. */
function startOf({ truth }: SimulatedNetwork, setup: SimulatedNetwork['setups'][number]) {
  const { easting, northing, height } = setup.place;
  const [{ target, horizontal, face }] = setup.pointings;
  const mark = truth.get(target)!;
  const azimuth = Math.atan2(mark.easting - easting, mark.northing - northing);
  const direction = face === 'left' ? horizontal : horizontal - Math.PI;
  return { truth: [easting, northing, height + setup.instrumentHeight], orientation: azimuth - direction };
}

describe.skipIf(missing)('random networks against an independent solution by scipy', () => {
  let results: { name: string; fit: NetworkResult; answer: Answer }[];

  beforeAll(() => {
    const chance = seededChance(41);
    const cases = KINDS.map(({ plan, datum, free }) => {
      const network = simulateNetwork({ ...PLAN, ...plan }, seededChance(wholeBetween(chance, 1, 1e6)));
      const input = networkAsEngine(network, datum);
      return { input, asked: asCase(network, input, free) };
    });
    const { stdout, stderr, status } = spawnSync(PYTHON, ['tests/compute/independentNetwork.py'], {
      input: JSON.stringify({ cases: cases.map(({ asked }) => asked) }),
      env: { ...process.env, OPENBLAS_NUM_THREADS: '1' },
      encoding: 'utf8',
      maxBuffer: 64e6,
    });
    if (status !== 0) throw new Error(stderr);
    const answers = JSON.parse(stdout) as Answer[];
    results = cases.map(({ input }, i) => ({
      name: KINDS[i].name,
      answer: answers[i],
      fit: adjustNetwork(input),
    }));
  }, 240_000);

  const each = (check: (fit: NetworkResult, answer: Answer, name: string) => void) => {
    expect(results).toHaveLength(KINDS.length);
    for (const { fit, answer, name } of results) check(fit, answer, name);
  };

  it('leave nothing out and converge', () => {
    each((fit, _, name) => {
      expect(fit.leftOut, name).toEqual([]);
      expect(fit.converged, name).toBe(true);
    });
  });

  it('agree to 1e-8 m in all coordinates', () => {
    each((fit, answer, name) => {
      for (const point of fit.points) {
        const other = answer.points[point.name];
        [point.easting, point.northing, point.elevation].forEach((value, axis) => {
          const expected = other?.at[axis] ?? null;
          if (expected !== null)
            expect(Math.abs(value! - expected), `${name} ${point.name}`).toBeLessThan(1e-8);
        });
      }
      expect(Object.keys(answer.points).length).toBeLessThanOrEqual(fit.points.length);
    });
  });

  it('agree to 1e-6 of the variances in the covariance of each point', () => {
    each((fit, answer, name) => {
      for (const point of fit.points) {
        const expected = answer.points[point.name]?.covariance;
        if (!expected) continue;
        expected.forEach((value, k) => {
          const own = point.covariance[k] / fit.scale ** 2;
          const size = Math.sqrt(expected[4 * Math.floor(k / 3)] * expected[4 * (k % 3)]);
          expect(Math.abs(own - value), `${name} ${point.name}`).toBeLessThanOrEqual(1e-6 * size);
        });
      }
    });
  });

  it('agree in degrees of freedom and to 1e-6 in vᵀPv', () => {
    each((fit, answer, name) => {
      expect(fit.test.degreesOfFreedom, name).toBe(answer.degreesOfFreedom);
      expect(Math.abs(fit.test.value - answer.weightedSquares)).toBeLessThan(1e-6 * answer.weightedSquares);
    });
  });

  it('agree to 1e-6 in redundancy numbers, standardised residuals and detectable biases', () => {
    each((fit, answer, name) => {
      // Both list observations of one kind and source in the same order.
      const inKinds = <T extends { kind: string; source: string }>(list: readonly T[]) => {
        const groups = new Map<string, T[]>();
        for (const one of list) {
          const key = `${one.kind} ${one.source}`;
          groups.set(key, [...(groups.get(key) ?? []), one]);
        }
        return [...groups].sort(([a], [b]) => (a < b ? -1 : 1));
      };
      const [own, other] = [inKinds(fit.observations), inKinds(answer.observations)];
      expect(own.map(([key, list]) => `${key} ${list.length}`)).toEqual(
        other.map(([key, list]) => `${key} ${list.length}`),
      );
      own.forEach(([key, list], g) => {
        list.forEach((observation, i) => {
          const expected = other[g][1][i];
          expect(Math.abs(observation.redundancy! - expected.redundancy), `${name} ${key}`).toBeLessThan(
            1e-6,
          );
          expect(Math.abs(observation.residual - expected.residual), `${name} ${key}`).toBeLessThan(1e-8);
          if (observation.standardised === null || expected.redundancy < 1e-3) return;
          expect(Math.abs(observation.standardised - expected.standardised), key).toBeLessThan(1e-4);
          const bias = observation.minimalDetectable! / DELTA_0;
          expect(Math.abs(bias / expected.sigma! - 1), `${name} ${key}`).toBeLessThan(1e-4);
        });
      });
    });
  });
});
