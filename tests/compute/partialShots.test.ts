import { describe, expect, it } from 'vitest';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import { isNear } from '@/lib/compute/survey/dangerCircle';
import type { Shot } from '@/lib/compute/survey/shots';
import { StationError } from '@/lib/compute/survey/stationAdjustment';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { judgeSetup, type SetupLimits } from '@/lib/compute/survey/verdict';
import { accuracyAtWork } from '@/lib/compute/survey/workAccuracy';
import { wrapDifference } from '@/lib/compute/units/angles';
import { type Chance, seededChance } from '@/tests/simulator/chance';
import { type Observed, observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const LIMITS: SetupLimits = {
  residual: { horizontal: 0.01, vertical: 0.01 },
  work: { radius: 100, horizontal: 0.03, vertical: 0.02 },
  checkRequired: false,
};
const SITE = DEFAULT_SURROUNDINGS;
const FACES = { faces: ['left', 'right'] as ('left' | 'right')[], sets: 1 };

/** What is left of each shot, by the number of its mark. */
type Kept = (shot: Shot, mark: number) => Shot;
const angleOnly: Kept = (shot) => ({ ...shot, distance: null });
const directionOnly: Kept = (shot) => ({ ...shot, distance: null, zenith: null });
const distanceOnly: Kept = (shot) => ({ ...shot, direction: null });

function seen(chance: Chance, marks: [number, number], kept: Kept): { observed: Observed; shots: Shot[] } {
  const site = randomSite(chance, { marks, allRound: true });
  const observed = observe(site, randomInstrument(chance), FACES, chance);
  const { shots } = asEngine(observed);
  return { observed, shots: shots.map((shot) => kept(shot, Number(shot.target.slice(1)) - 1)) };
}

/** How far the station is off, in its own standard deviations: squares, of two and one degree of freedom. */
function misses({ station }: StationFit, { site }: Observed) {
  const [e, n] = [station.easting - site.station.easting, station.northing - site.station.northing];
  const [ee, en, nn] = [station.covariance[0], station.covariance[1], station.covariance[6]];
  const turn = wrapDifference(station.orientation - site.orientation);
  return {
    plan: (nn * e * e - 2 * en * e * n + ee * n * n) / (ee * nn - en * en),
    height: (station.axis - site.station.height) ** 2 / station.covariance[12],
    orientation: turn ** 2 / station.covariance[18],
  };
}

const KINDS: [string, [number, number], Kept][] = [
  ['directions and zenith angles of four to six marks', [4, 6], angleOnly],
  [
    'distances and zenith angles of four to six, one direction',
    [4, 6],
    (s, m) => (m === 0 ? s : distanceOnly(s, m)),
  ],
  ['one distance among the directions of three to five', [3, 5], (s, m) => (m === 1 ? s : angleOnly(s, m))],
  [
    'a mark with direction only, one without height, others whole',
    [4, 6],
    (s, m) => (m === 0 ? { ...s, distance: null, zenith: null } : m === 1 ? { ...s, zenith: null } : s),
  ],
];

describe('1,000 simulated setups with partial shots', () => {
  it.each(KINDS)('%s: what is stated holds in 93–97 %%', (name, marks, kept) => {
    const chance = seededChance(11);
    const hits = { plan: 0, height: 0, orientation: 0, test: 0 };
    const count = 1000;
    let refused = 0;
    for (let i = 0; i < count; i++) {
      const { observed, shots } = seen(chance, marks, kept);
      try {
        const fit = fitStation({ ...asEngine(observed), shots });
        expect(fit.converged).toBe(true);
        // Where two stations fit, the truth may be the other one; it is named.
        if (fit.others.length > 0) throw new StationError('not_determined');
        const { plan, height, orientation } = misses(fit, observed);
        if (plan <= 5.991) hits.plan++;
        if (height <= 3.841) hits.height++;
        if (orientation <= 3.841) hits.orientation++;
        if (fit.test.passed) hits.test++;
      } catch (error) {
        if (!(error instanceof StationError)) throw error;
        refused++;
      }
    }
    const share = (value: number) => value / (count - refused);
    console.log(
      `${name}: ellipse ${(100 * share(hits.plan)).toFixed(1)} %, height ${(100 * share(hits.height)).toFixed(1)} %, ` +
        `orientation ${(100 * share(hits.orientation)).toFixed(1)} %, χ² ${(100 * share(hits.test)).toFixed(1)} %, refused or ambiguous ${refused}`,
    );
    expect(refused / count).toBeLessThan(0.05);
    for (const hit of Object.values(hits)) {
      expect(share(hit)).toBeGreaterThan(0.93);
      expect(share(hit)).toBeLessThan(0.97);
    }
  });
});

describe('three directions', () => {
  it('find the station of any figure, or say that it is on the danger circle', () => {
    const chance = seededChance(12);
    let refused = 0;
    for (let i = 0; i < 500; i++) {
      const { observed, shots } = seen(chance, [3, 3], directionOnly);
      try {
        const fit = fitStation({ ...asEngine(observed), shots });
        expect(fit.converged).toBe(true);
        expect(fit.others).toEqual([]);
        // Four and a half standard deviations.
        expect(misses(fit, observed).plan).toBeLessThan(25);
        expect(fit.marks.map(({ without }) => without)).toEqual([null, null, null]);
      } catch (error) {
        if (!(error instanceof StationError)) throw error;
        expect(error.code).toBe('danger_circle');
        refused++;
      }
    }
    expect(refused).toBeLessThan(10);
  });

  it('near the danger circle say how near, and their σ doubles at half the distance', () => {
    const semiMajors = [0.08, 0.04, 0.02].map((part) => {
      const { observed } = onCircle(part);
      const input = asEngine(observed);
      const fit = fitStation({ ...input, shots: input.shots.map((s) => angleOnly(s, 0)) });
      expect(isNear(fit.danger!)).toBe(true);
      expect(Math.abs(fit.danger!.distance) / fit.danger!.circle.radius).toBeCloseTo(part, 2);
      return fit.ellipse95.semiMajor;
    });
    expect(semiMajors[1] / semiMajors[0]).toBeCloseTo(2, 0);
    expect(semiMajors[2] / semiMajors[1]).toBeCloseTo(2, 0);
  });

  it('on the danger circle are refused, never solved; one distance mends it', () => {
    const { observed } = onCircle(0);
    const input = asEngine(observed);
    const shots = input.shots.map((s) => angleOnly(s, 0));
    expect(() => fitStation({ ...input, shots })).toThrow(
      expect.objectContaining({ code: 'danger_circle', marks: ['M1', 'M2', 'M3'] }),
    );
    const mended = input.shots.map((s) => (s.target === 'M1' ? s : angleOnly(s, 0)));
    const fit = fitStation({ ...input, shots: mended });
    expect(fit.converged).toBe(true);
    expect(fit.danger).toBeNull();
  });
});

/** Three marks on a circle of 100 m, the station outside it by a part of its radius, without errors. */
function onCircle(part: number) {
  const chance = seededChance(13);
  const site = randomSite(chance, { marks: [3, 3], allRound: true });
  const { easting, northing, height } = site.station;
  const centre = { easting: easting - 100 * (1 + part), northing };
  [0.5, 1.9, 4.2].forEach((angle, i) => {
    site.marks[i].easting = centre.easting + 100 * Math.sin(angle);
    site.marks[i].northing = centre.northing + 100 * Math.cos(angle);
    site.marks[i].height = height + i;
    site.marks[i].horizontalSigma = 0.001;
  });
  const observed = observe(site, randomInstrument(chance), FACES, { uniform: () => 0.5, normal: () => 0 });
  return { observed };
}

describe('two distances', () => {
  it('meet in two stations: both are told, and the true one is among them', () => {
    const chance = seededChance(14);
    let weak = 0;
    for (let i = 0; i < 300; i++) {
      const { observed, shots } = seen(chance, [2, 2], (s, m) => (m === 0 ? s : distanceOnly(s, m)));
      const { station, marks } = observed.site;
      const [a, b] = marks.map((m) => Math.atan2(m.easting - station.easting, m.northing - station.northing));
      // In line with both marks two distances say the same thing twice, and the two stations become one.
      if (Math.abs(Math.sin(a - b)) < 0.1) {
        weak++;
        continue;
      }
      const fit = fitStation({ ...asEngine(observed), shots });
      expect(fit.others).toHaveLength(1);
      const off = [fit.station, ...fit.others].map(({ easting, northing }) =>
        Math.hypot(easting - station.easting, northing - station.northing),
      );
      expect(Math.min(...off)).toBeLessThan(0.2);
      expect(Math.max(...off)).toBeGreaterThan(1);
    }
    expect(weak).toBeLessThan(60);
  });

  it('with both directions meet in one', () => {
    const chance = seededChance(15);
    const { observed, shots } = seen(chance, [2, 2], (s) => s);
    expect(fitStation({ ...asEngine(observed), shots }).others).toEqual([]);
  });

  it('and a third find the place without any direction, not the orientation', () => {
    const chance = seededChance(16);
    for (let i = 0; i < 100; i++) {
      const { observed, shots } = seen(chance, [4, 5], distanceOnly);
      const fit = fitStation({ ...asEngine(observed), shots });
      expect(fit.orientationDetermined).toBe(false);
      if (fit.others.length === 0) expect(misses(fit, observed).plan).toBeLessThan(25);
    }
  });
});

describe('one target of four that is wrong by tens of metres', () => {
  // A shot to another object, or under another name: the mark stands 10 to 80 m from where it was published.
  it('is named in 500 setups by the reasons and explanations, and never a good one', () => {
    const chance = seededChance(17);
    const count = 500;
    const named = { explained: 0, largestW: 0, converged: 0, wrongly: 0 };
    for (let i = 0; i < count; i++) {
      const { observed, shots } = seen(chance, [4, 4], (s) => s);
      const bad = observed.published[Math.floor(4 * chance.uniform())];
      const azimuth = 2 * Math.PI * chance.uniform();
      const size = 10 + 70 * chance.uniform();
      bad.easting += size * Math.sin(azimuth);
      bad.northing += size * Math.cos(azimuth);
      const fit = fitStation({ ...asEngine(observed), shots });
      const [first] = fit.explanations;
      if (fit.converged) named.converged++;
      if (first.subject[0] === bad.name && first.subject.length === 1) named.explained++;
      else if (first.subject.length > 0) named.wrongly++;
      const { verdict, reasons } = judgeSetup(fit, LIMITS, [], accuracyAtWork(fit.station, 1e-5, 100, SITE));
      expect(verdict).toBe('fail');
      for (const reason of reasons) {
        if ('target' in reason && reason.target !== bad.name) named.wrongly++;
      }
      const w = fit.marks.map(({ name, readings }) => ({
        name,
        w: Math.max(...readings.map(({ standardised }) => Math.abs(standardised))),
      }));
      const worst = w.reduce((a, b) => (b.w > a.w ? b : a));
      expect(worst.w).toBeGreaterThan(CRITICAL_W);
      if (worst.name === bad.name) named.largestW++;
    }
    console.log(`of ${count}: ${JSON.stringify(named)}`);
    expect(named.explained / count).toBeGreaterThanOrEqual(0.99);
    expect(named.wrongly).toBe(0);
    expect(named.converged).toBe(count);
  });
});

describe('one target of five or six that is wrong by tens of metres, with partial shots', () => {
  it.each<[string, Kept]>([
    ['directions and zenith angles', angleOnly],
    ['distances and zenith angles, one direction', (s, m) => (m === 0 ? s : distanceOnly(s, m))],
    ['every other mark without distance', (s, m) => (m % 2 ? angleOnly(s, m) : s)],
  ])('%s: is named in 99 of 100 setups, and never a good one', (_, kept) => {
    const chance = seededChance(18);
    let named = 0;
    for (let i = 0; i < 100; i++) {
      const { observed, shots } = seen(chance, [5, 6], kept);
      const { published } = observed;
      const bad = published[Math.floor(published.length * chance.uniform())];
      const azimuth = 2 * Math.PI * chance.uniform();
      const size = 10 + 70 * chance.uniform();
      bad.easting += size * Math.sin(azimuth);
      bad.northing += size * Math.cos(azimuth);
      const [first] = fitStation({ ...asEngine(observed), shots }).explanations;
      if (first.subject.join() === bad.name) named++;
      else expect(first.subject).toEqual([]);
      // What shows of it is a part of it, as well as the start knows the distance.
      if (first.atLeast) expect(first.size!).toBeLessThan(1.05 * size);
    }
    expect(named).toBeGreaterThanOrEqual(99);
  });
});
