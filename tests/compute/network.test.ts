import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { CoordinateDatum, NetworkInput } from '@/lib/compute/survey/networkInput';
import { NetworkError, type NetworkResult } from '@/lib/compute/survey/networkResult';
import type { Shot } from '@/lib/compute/survey/shots';
import { seededChance } from '@/tests/simulator/chance';
import { type NetworkPlan, simulateNetwork } from '@/tests/simulator/siteNetwork';
import { networkAsEngine } from './networkAsEngine';

const PLAN: NetworkPlan = {
  ...{ setups: 6, points: 22, sightsOfPoint: 2, faces: ['left', 'right'], sets: 1, occupiedEvery: 3 },
  ...{ controlEvery: 5, controlSigma: 0.002, roverEvery: 0, levelled: 8, baselines: 0 },
};

function network(seed: number, datum: CoordinateDatum = 'weighted', plan: Partial<NetworkPlan> = {}) {
  return networkAsEngine(simulateNetwork({ ...PLAN, ...plan }, seededChance(seed)), datum);
}

const anySeed = fc.integer({ min: 1, max: 100_000 });
const RUNS = { numRuns: 12, seed: 11 };

const coordinatesOf = ({ points }: NetworkResult) =>
  new Map(points.map(({ name, easting, northing, elevation }) => [name, [easting!, northing!, elevation!]]));

/** Statistics of the observations by what they are, in any order; not of eastings and northings, which turn. */
const statisticsOf = ({ observations }: NetworkResult) =>
  observations
    .filter(({ kind, component }) => kind !== 'control' || component === 'elevation')
    .map(({ kind, source, to, component, set, redundancy, residual }) => {
      return { key: [kind, source, to, component, set].join(), figures: [redundancy ?? -1, residual] };
    })
    .sort((a, b) => (a.key < b.key ? -1 : 1));

function agrees(result: NetworkResult, other: NetworkResult, move: (at: number[]) => number[]): void {
  expect(other.test.degreesOfFreedom).toBe(result.test.degreesOfFreedom);
  expect(other.test.value).toBeCloseTo(result.test.value, 5);
  const expected = coordinatesOf(result);
  for (const [name, at] of coordinatesOf(other)) {
    const own = move(expected.get(name)!);
    at.forEach((value, axis) => {
      expect(Math.abs(value - own[axis]), name).toBeLessThan(1e-6);
    });
  }
  const [a, b] = [statisticsOf(result), statisticsOf(other)];
  expect(b.map(({ key }) => key)).toEqual(a.map(({ key }) => key));
  const differences = a.flatMap(({ figures }, i) => figures.map((figure, k) => figure - b[i].figures[k]));
  expect(Math.max(...differences.map(Math.abs))).toBeLessThan(1e-6);
}

describe('an adjusted network', () => {
  it('does not depend on the order of anything', () => {
    fc.assert(
      fc.property(anySeed, (seed) => {
        const input = network(seed);
        const turned: NetworkInput = {
          ...input,
          points: input.points.toReversed(),
          setups: input.setups.toReversed().map((setup) => ({ ...setup, shots: setup.shots.toReversed() })),
          levelDifferences: input.levelDifferences.toReversed(),
        };
        agrees(adjustNetwork(input), adjustNetwork(turned), (at) => at);
      }),
      RUNS,
    );
  });

  it('shifts and turns with its control', () => {
    const angle = fc.double({ min: -3, max: 3, noNaN: true });
    const metres = fc.double({ min: -50_000, max: 50_000, noNaN: true });
    fc.assert(
      fc.property(anySeed, angle, metres, metres, (seed, turn, east, up) => {
        const input = network(seed);
        const [centreE, centreN] = [412_000, 5_310_000];
        const move = ([e, n, h]: number[]) => {
          const [x, y] = [e - centreE, n - centreN];
          return [
            centreE + x * Math.cos(turn) + y * Math.sin(turn) + east,
            centreN - x * Math.sin(turn) + y * Math.cos(turn) - east,
            h + up / 100,
          ];
        };
        const moved: NetworkInput = {
          ...input,
          points: input.points.map((point) => {
            const [easting, northing, elevation] = move([point.easting!, point.northing!, point.elevation!]);
            return { ...point, easting, northing, elevation };
          }),
        };
        agrees(adjustNetwork(input), adjustNetwork(moved), move);
      }),
      RUNS,
    );
  });

  it('has the least trace with all its control free, and the same residuals in any free datum', () => {
    fc.assert(
      fc.property(anySeed, (seed) => {
        const input = network(seed, 'free', { controlEvery: 3 });
        const trace = ({ points }: NetworkResult) =>
          points
            .filter(({ name }) => input.points.some((point) => point.name === name))
            .reduce((sum, { covariance: c }) => sum + c[0] + c[4] + c[8], 0);
        const all = adjustNetwork(input);
        expect([...all.datum.free].sort()).toEqual(['easting', 'elevation', 'northing', 'rotation']);
        const shifts = all.points.flatMap(({ shift }) => (shift.easting === null ? [] : [shift]));
        for (const axis of ['easting', 'northing', 'elevation'] as const) {
          expect(Math.abs(shifts.reduce((sum, shift) => sum + shift[axis]!, 0))).toBeLessThan(1e-7);
        }
        const few = adjustNetwork({
          ...input,
          points: input.points.map((point, i) =>
            i < 2 ? point : { ...point, horizontalDatum: 'new', verticalDatum: 'new' },
          ),
        });
        expect(trace(all)).toBeLessThan(trace(few));
        expect(few.test.value).toBeCloseTo(all.test.value, 6);
        const [a, b] = [statisticsOf(all), statisticsOf(few)];
        a.forEach(({ figures }, i) => {
          expect(figures[0]).toBeCloseTo(b[i].figures[0], 6);
        });
      }),
      RUNS,
    );
  });

  it('is as good as it says: coordinates within their covariances, over 40 networks', () => {
    let [sum, count, failed] = [0, 0, 0];
    for (let seed = 1; seed <= 40; seed++) {
      const simulated = simulateNetwork({ ...PLAN, roverEvery: 9, baselines: 3 }, seededChance(seed));
      const result = adjustNetwork(networkAsEngine(simulated));
      if (!result.test.passed) failed++;
      for (const { name, elevation, covariance } of result.points) {
        const height = simulated.truth.get(name)!.height;
        sum += (elevation! - height) ** 2 / (covariance[8] / result.scale ** 2);
        count++;
      }
    }
    // Points of a network share their errors: an effective dozen in each of 40 networks.
    expect(Math.abs(sum / count - 1)).toBeLessThan(4 * Math.sqrt(2 / (40 * 12)));
    // Binomial with 40 and 0.05: 7 or more in one of 150.
    expect(failed).toBeLessThanOrEqual(6);
  });
});

describe('snooping in a network', () => {
  const changeShot = (input: NetworkInput, setup: number, target: string, change: (shot: Shot) => Shot) => ({
    ...input,
    setups: input.setups.map((own, i) =>
      i !== setup
        ? own
        : { ...own, shots: own.shots.map((shot) => (shot.target === target ? change(shot) : shot)) },
    ),
    snooping: true,
  });
  const longer = (shot: Shot): Shot => ({
    ...shot,
    distance: { ...shot.distance!, slopeDistance: shot.distance!.slopeDistance + 0.06 },
  });

  it('finds a distance that is wrong by 60 mm, says by how much, and leaves the rest as if it had never been', () => {
    const clean = network(23, 'weighted', { sightsOfPoint: 4 });
    expect(adjustNetwork({ ...clean, snooping: true }).removed).toEqual([]);
    const target = clean.setups[1].shots[0].target;
    const result = adjustNetwork(changeShot(clean, 1, target, longer));
    expect(result.snoopingEnded).toBe('clean');
    expect(result.removed).toHaveLength(1);
    const [removed] = result.removed;
    const { kind, source, to, ...observation } = result.observations[removed.observation];
    expect({ kind, source, to }).toEqual({ kind: 'distance', source: clean.setups[1].id, to: target });
    expect(observation.removed).toBe(true);
    expect(Math.abs(removed.error - 0.06)).toBeLessThan(4 * removed.errorSigma);
    const without = changeShot(clean, 1, target, (shot) => ({ ...shot, distance: null }));
    const expected = coordinatesOf(adjustNetwork({ ...without, snooping: false }));
    for (const [name, at] of coordinatesOf(result)) {
      at.forEach((value, axis) => {
        expect(Math.abs(value - expected.get(name)![axis])).toBeLessThan(1e-7);
      });
    }
  });

  it('finds a control point whose published height is wrong, and a levelled difference', () => {
    const clean = network(22, 'weighted', { sightsOfPoint: 4, levelled: 20 });
    const wrong = clean.points[1].name;
    const input: NetworkInput = {
      ...clean,
      points: clean.points.map((p) => (p.name === wrong ? { ...p, elevation: p.elevation! + 0.05 } : p)),
      levelDifferences: clean.levelDifferences.map((d, i) =>
        i === 4 ? { ...d, difference: d.difference + 0.04 } : d,
      ),
      snooping: true,
    };
    const { removed, observations } = adjustNetwork(input);
    const named = removed.map(({ observation }) => {
      const { kind, source, component } = observations[observation];
      return `${kind} ${source} ${component ?? ''}`.trim();
    });
    expect(named.sort()).toEqual([`control ${wrong} elevation`, 'levelDifference L5'].sort());
  });

  it('finds swapped targets and a distance off by a metre, which plain least squares would not converge with', () => {
    for (const seed of [1, 2]) {
      const clean = network(seed, 'weighted', {
        setups: 40,
        points: 160,
        sightsOfPoint: 3,
        levelled: 80,
        controlEvery: 20,
      });
      const [one, other] = new Set(clean.setups[9].shots.map(({ target }) => target));
      const far = clean.setups[20].shots[0].target;
      const swapped = (shot: Shot): Shot =>
        shot.target === one
          ? { ...shot, target: other }
          : shot.target === other
            ? { ...shot, target: one }
            : shot;
      const input: NetworkInput = {
        ...clean,
        setups: clean.setups.map((setup, i) => ({
          ...setup,
          shots: setup.shots.map((shot) => {
            if (i === 9) return swapped(shot);
            const wrong = i === 20 && shot.target === far;
            if (!wrong) return shot;
            const slopeDistance = shot.distance!.slopeDistance + 1;
            return { ...shot, distance: { ...shot.distance!, slopeDistance } };
          }),
        })),
        snooping: true,
      };
      const { removed, observations, converged, test } = adjustNetwork(input);
      expect(converged).toBe(true);
      expect(test.sigma0).toBeLessThan(1.2);
      const out = new Set(
        removed.map(
          ({ observation: i }) => `${observations[i].kind} ${observations[i].source} ${observations[i].to}`,
        ),
      );
      expect(out).toContain(`distance ${clean.setups[20].id} ${far}`);
      for (const target of [one, other]) expect(out).toContain(`direction ${clean.setups[9].id} ${target}`);
      expect(out.size).toBeLessThan(14);
    }
  });

  it('calls it too many where more than a tenth was wrong, though the rest agrees', () => {
    const clean = network(5, 'weighted', {
      ...{ points: 20, sightsOfPoint: 4, occupiedEvery: 0, controlEvery: 3, levelled: 0 },
    });
    const { removed, observations, snoopingEnded, test } = adjustNetwork({
      ...clean,
      setups: clean.setups.map((setup, i) => {
        const targets = [...new Set(setup.shots.map(({ target }) => target))];
        const wrong = (target: string) => (3 * i + targets.indexOf(target)) % 5 < 2;
        return { ...setup, shots: setup.shots.map((shot) => (wrong(shot.target) ? longer(shot) : shot)) };
      }),
      snooping: true,
    });
    const read = observations.filter(({ kind }) => ['direction', 'zenith', 'distance'].includes(kind));
    expect(test.passed).toBe(true);
    expect(removed.length).toBeGreaterThan(0.1 * read.length);
    expect(snoopingEnded).toBe('too_many');
  });

  it('removes nothing from clean networks more often than one test in a thousand would', () => {
    let [removed, tested] = [0, 0];
    for (let seed = 50; seed < 70; seed++) {
      const result = adjustNetwork({ ...network(seed), snooping: true });
      removed += result.removed.length;
      tested += result.test.degreesOfFreedom;
    }
    expect(removed).toBeLessThanOrEqual(3 + (3 * tested) / 1000);
  });
});

describe('a network that cannot be computed', () => {
  const refused = (input: NetworkInput): NetworkError => {
    try {
      adjustNetwork(input);
    } catch (error) {
      if (error instanceof NetworkError) return error;
      throw error;
    }
    throw new Error('It was computed.');
  };

  it('says that nothing was observed, that nothing places it, or what is not determined', () => {
    const input = network(31);
    const nothing = { ...input, setups: [], levelDifferences: [] };
    expect(refused(nothing).code).toBe('no_observations');
    expect(refused({ ...input, points: [] }).code).toBe('no_datum');
    const afloat = input.points.map((point) => ({
      ...point,
      horizontalDatum: 'new' as const,
      verticalDatum: 'new' as const,
    }));
    expect(refused({ ...input, points: afloat }).code).toBe('no_datum');
    const dangling = refused({
      ...input,
      points: [
        ...input.points,
        { ...afloat[0], name: 'X', easting: 412_010, northing: 5_310_020, elevation: 140 },
      ],
      setups: input.setups.map((setup, i) =>
        i > 0
          ? setup
          : {
              ...setup,
              shots: [...setup.shots, { ...setup.shots[0], id: 'x', target: 'X', distance: null }],
            },
      ),
    });
    expect(dangling.code).toBe('not_determined');
    expect(dangling.points).toEqual(['X']);
  });

  it('says that the observations contradict each other where a robust start loses its way', () => {
    const length = { prismConstantMm: 0, prismConstantAppliedMm: 0, appliedPpm: 0 };
    const shot = (
      [id, target, face]: [string, string, 'left' | 'right'],
      direction: number | null,
      zenith: number | null,
      slopeDistance: number | null,
      targetHeightSigma: number | null = null,
    ): Shot => ({
      ...{ id, target, face, direction, zenith, targetHeight: 1.6, targetHeightSigma },
      ...{ purpose: 'orient', set: 1, targetCentringSigma: null },
      distance: slopeDistance === null ? null : { ...length, slopeDistance },
    });
    const accuracy = { ...DEFAULT_ACCURACY, collimation: 0 };
    const sigmas = { horizontalSigma: 0.003, verticalSigma: 0.003 };
    const nowhere = { easting: null, northing: null, elevation: 0.8401 };
    const input: NetworkInput = {
      ...network(31),
      points: [
        { name: 'A', ...nowhere, horizontalDatum: 'new', verticalDatum: 'free', ...sigmas },
        {
          ...{ name: 'B', easting: 200, northing: 190, elevation: 1.045 },
          ...{ horizontalDatum: 'new', verticalDatum: 'held', ...sigmas },
        },
        {
          ...{ name: 'C', easting: 40, northing: 100, elevation: 1.0982 },
          ...{ horizontalDatum: 'weighted', verticalDatum: 'free', ...sigmas },
        },
      ],
      setups: [
        {
          ...{ id: 'S0', occupied: 'C', instrumentHeight: 1.5, accuracy, ppm: 0 },
          shots: [
            shot(['0', 'A', 'left'], 2.2109, 1.5725, 94.8695),
            shot(['1', 'B', 'left'], 1.3767, 1.5705, null),
          ],
        },
        {
          ...{ id: 'S1', occupied: null, instrumentHeight: null, accuracy, ppm: 0 },
          shots: [
            shot(['0', 'A', 'left'], null, null, 98.0086),
            shot(['1', 'A', 'right'], 4.5138, 4.7169, 98.0074),
            shot(['2', 'B', 'left'], 5.1534, 1.5572, 47.7312),
          ],
        },
        {
          ...{ id: 'S2', occupied: 'A', instrumentHeight: 1.5, ppm: 0 },
          accuracy: { ...accuracy, instrumentCentring: 0 },
          shots: [
            shot(['0', 'B', 'left'], null, null, 138.926, 0),
            shot(['1', 'B', 'right'], 1.2903, 4.7146, 138.9254),
          ],
        },
      ],
      levelDifferences: [
        { id: 'L0', from: 'C', to: 'A', difference: -0.2579, weight: { by: 'sigma', sigma: 0.001 } },
      ],
      surroundings: {
        ...{ earthRadius: 6_371_000, combinedFactor: 1, refraction: 0.13, refractionSigma: 0.1 },
        unknownAtmospherePpm: 10,
      },
      snooping: true,
    };
    expect(refused(input).code).toBe('contradiction');
  });

  it('leaves out what nothing leads to, and says so', () => {
    const input = network(32);
    const [first] = input.setups;
    const lost = {
      ...first,
      id: 'lost',
      occupied: null,
      shots: first.shots.map((s) => ({ ...s, target: `Z${s.target}` })),
    };
    const result = adjustNetwork({ ...input, setups: [...input.setups, lost] });
    expect(result.leftOut).toEqual([
      { kind: 'setup', source: 'lost', shots: lost.shots.map(({ id }) => id), reason: 'not_connected' },
    ]);
    agrees(adjustNetwork(input), result, (at) => at);
  });
});
