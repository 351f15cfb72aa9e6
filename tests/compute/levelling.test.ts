import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  curvatureOf,
  oneWaySigma,
  perRootMetre,
  UNTESTED_COLLIMATION,
} from '@/lib/compute/survey/levelling/accuracy';
import { type LevelSight, stationsOf } from '@/lib/compute/survey/levelling/book';
import { heightDifferences } from '@/lib/compute/survey/levelling/heightDifferences';
import { type LevelRunInput, levelRun } from '@/lib/compute/survey/levelling/levelRun';
import { THIRD_ORDER } from '@/lib/compute/survey/levelling/limit';
import { errorPlace, misreadFigure, passedMarks } from '@/lib/compute/survey/levelling/passedMarks';
import { pegTest } from '@/lib/compute/survey/levelling/pegTest';
import { judgeRun } from '@/lib/compute/survey/levelling/runVerdict';
import { between, NO_ERRORS, seededChance } from '@/tests/simulator/chance';
import { ground, namesBetween, pegStandings, runOver, type TrueLevel } from '@/tests/simulator/level';

const SIGMA = oneWaySigma(perRootMetre(2));
const CURVATURE = curvatureOf(0.13, 6371008.8);
const PERFECT: TrueLevel = { collimation: 0, perRoot: 0, curvature: 0 };

/** Books of any length with any readings, intermediate sights among them. */
const books = fc
  .array(
    fc.record({
      backsight: fc.double({ min: -3, max: 4, noNaN: true }),
      foresight: fc.double({ min: -3, max: 4, noNaN: true }),
      back: fc.double({ min: 2, max: 90, noNaN: true }),
      fore: fc.double({ min: 2, max: 90, noNaN: true }),
      between: fc.array(fc.double({ min: -3, max: 4, noNaN: true }), { maxLength: 2 }),
    }),
    { minLength: 1, maxLength: 8 },
  )
  .map((standings) => {
    const nothing = {
      backsight: null,
      backsightDistance: null,
      intermediate: null,
      intermediateDistance: null,
      foresight: null,
      foresightDistance: null,
      bookedElevation: null,
    };
    const sights: LevelSight[] = [{ ...nothing, point: 'A' }];
    standings.forEach((s, i) => {
      const last = sights[sights.length - 1];
      last.backsight = s.backsight;
      last.backsightDistance = s.back;
      s.between.forEach((intermediate, k) => {
        sights.push({ ...nothing, point: `I-${i}-${k}`, intermediate });
      });
      const point = i === standings.length - 1 ? 'B' : `TP-${i}`;
      sights.push({ ...nothing, point, foresight: s.foresight, foresightDistance: s.fore });
    });
    return sights;
  });

/** The same book walked from its end: backsights are foresights, and each standing's points come in reverse. */
function reversed(sights: readonly LevelSight[]): LevelSight[] {
  return sights.toReversed().map((sight) => ({
    ...sight,
    backsight: sight.foresight,
    backsightDistance: sight.foresightDistance,
    foresight: sight.backsight,
    foresightDistance: sight.backsightDistance,
  }));
}

function input(sights: readonly LevelSight[], changes: Partial<LevelRunInput> = {}): LevelRunInput {
  return {
    sights,
    start: { name: 'A', elevation: 100, sigma: 0.0015 },
    end: null,
    sigma: SIGMA,
    collimation: 4e-5,
    collimationSigma: 2e-5,
    curvature: CURVATURE,
    limit: { per: 'length', factor: 1e6 },
    ...changes,
  };
}
const end = (elevation: number) => ({ end: { name: 'B', elevation, sigma: 0.002 } });

describe('a level run', () => {
  it('shifts as its start is shifted', () => {
    fc.assert(
      fc.property(books, fc.double({ min: -2000, max: 2000, noNaN: true }), (sights, shift) => {
        const here = levelRun(input(sights, end(99)));
        const start = { name: 'A', elevation: 100 + shift, sigma: 0.0015 };
        const there = levelRun(input(sights, { start, ...end(99 + shift) }));
        here.lines.forEach(({ elevation, standardDeviation }, i) => {
          expect(there.lines[i].elevation).toBeCloseTo(elevation + shift, 8);
          expect(there.lines[i].standardDeviation).toBeCloseTo(standardDeviation, 10);
        });
        expect(there.closure.misclosure).toBeCloseTo(here.closure.misclosure ?? Number.NaN, 8);
      }),
    );
  });

  it('walked the other way has the opposite difference, and between two marks the same heights', () => {
    fc.assert(
      fc.property(books, (sights) => {
        const forth = levelRun(input(sights, end(101)));
        const back = levelRun(
          input(reversed(sights), {
            start: { name: 'B', elevation: 101, sigma: 0.002 },
            end: { name: 'A', elevation: 100, sigma: 0.0015 },
          }),
        );
        expect(back.closure.levelled).toBeCloseTo(-forth.closure.levelled, 9);
        expect(back.closure.misclosure).toBeCloseTo(-(forth.closure.misclosure ?? Number.NaN), 9);
        expect(back.page.agrees && forth.page.agrees).toBe(true);
        const other = back.lines.toReversed();
        forth.lines.forEach(({ elevation, standardDeviation }, i) => {
          expect(other[i].elevation).toBeCloseTo(elevation, 8);
          expect(other[i].standardDeviation).toBeCloseTo(standardDeviation, 10);
        });
      }),
    );
  });

  it('cut at a turning point gives two that add up to it', () => {
    fc.assert(
      fc.property(books, fc.nat(), (sights, pick) => {
        const turns = stationsOf(sights).slice(0, -1);
        fc.pre(turns.length > 0);
        const at = turns[pick % turns.length].fore;
        const first = sights
          .slice(0, at + 1)
          .map((sight, i) => (i === at ? { ...sight, backsight: null, backsightDistance: null } : sight));
        const second = sights
          .slice(at)
          .map((sight, i) => (i === 0 ? { ...sight, foresight: null, foresightDistance: null } : sight));
        const [whole, one, two] = [sights, first, second].map((book) => levelRun(input(book)));
        expect(one.closure.levelled + two.closure.levelled).toBeCloseTo(whole.closure.levelled, 9);
        expect(one.balance.length + two.balance.length).toBeCloseTo(whole.balance.length, 9);
        const name = sights[at].point;
        const cut = heightDifferences(sights, input(sights), (point) => point === name);
        expect(cut.map(({ from, to }) => [from, to])).toEqual([
          ['A', name],
          [name, 'B'],
        ]);
        expect(cut[0].difference).toBeCloseTo(one.closure.levelled, 9);
        expect(cut[1].difference).toBeCloseTo(two.closure.levelled, 9);
        const [all] = heightDifferences(sights, input(sights), () => false);
        expect(Math.hypot(cut[0].sigma, cut[1].sigma)).toBeCloseTo(all.sigma, 12);
        expect(all.standings).toBe(stationsOf(sights).length);
      }),
    );
  });

  it('takes a known collimation, curvature and refraction off to the last figure', () => {
    for (const seed of [3, 14, 159]) {
      const chance = seededChance(seed);
      const points = ground(chance, namesBetween(chance, 'A', 'B'));
      const collimation = between(chance, -2e-4, 2e-4);
      const errorless = { uniform: chance.uniform, normal: NO_ERRORS.normal };
      const sights = runOver({ collimation, perRoot: 0, curvature: CURVATURE }, errorless, points, 5, 90);
      const run = levelRun(input(sights, { collimation }));
      run.lines.forEach(({ elevation }, i) => {
        expect(elevation).toBeCloseTo(points[i].elevation, 10);
      });
      const raw = levelRun(input(sights, { collimation: 0, curvature: 0 }));
      expect(raw.closure.levelled - run.closure.levelled).toBeCloseTo(
        run.balance.collimationEffect + run.balance.curvatureEffect,
        10,
      );
    }
  });

  // 95 % of normal errors lie within 1.96 standard deviations: of 2,000 runs between 93.6 and 96.4 % do (three
  // standard deviations of the count). Levels, marks and books are drawn anew for each.
  it.each([11, 2031, 777])('misses by what it says it may, heights too: seed %d', (seed) => {
    const chance = seededChance(seed);
    const runs = 2000;
    let closes = 0;
    let middles = 0;
    for (let i = 0; i < runs; i++) {
      const points = ground(chance, namesBetween(chance, 'A', 'B'));
      const perRoot = oneWaySigma(perRootMetre(between(chance, 0.5, 3)));
      const collimation = UNTESTED_COLLIMATION * chance.normal();
      const sights = runOver({ collimation, perRoot, curvature: CURVATURE }, chance, points);
      const published = (place: (typeof points)[number], sigma: number) => ({
        name: place.name,
        elevation: place.elevation + sigma * chance.normal(),
        sigma,
      });
      const last = points[points.length - 1];
      const run = levelRun({
        ...input(sights),
        start: published(points[0], 0.0015),
        end: published(last, 0.002),
        sigma: perRoot,
        collimation: 0,
        collimationSigma: UNTESTED_COLLIMATION,
      });
      const { misclosure, standardDeviation } = run.closure;
      if (Math.abs(misclosure ?? Number.NaN) < 1.96 * standardDeviation) closes++;
      const turn = 1 + Math.floor(chance.uniform() * (points.length - 2));
      const line = run.lines[turn];
      if (Math.abs(line.elevation - points[turn].elevation) < 1.96 * line.standardDeviation) middles++;
    }
    expect(closes / runs).toBeGreaterThan(0.936);
    expect(closes / runs).toBeLessThan(0.964);
    expect(middles / runs).toBeGreaterThan(0.936);
    expect(middles / runs).toBeLessThan(0.964);
  });
});

describe('the marks on the way', () => {
  const points = ground(NO_ERRORS, ['A', 'TP-1', 'M-1', 'TP-2', 'M-2', 'TP-3', 'B']);
  const known = new Map(
    points
      .filter(({ name }) => !name.startsWith('TP'))
      .map(({ name, elevation }) => [name, { name, elevation, sigma: 0.0015 }]),
  );
  const judge = (sights: readonly LevelSight[], marks = known) => {
    const [start, stop] = [marks.get('A'), marks.get('B')];
    if (!start || !stop) throw new Error('The run has no ends.');
    const run = levelRun(input(sights, { start, end: stop, collimation: 0, limit: THIRD_ORDER }));
    const passed = passedMarks(run, marks);
    return { run, passed, place: errorPlace(run, passed) };
  };
  const sound = () => runOver(PERFECT, NO_ERRORS, points);

  it('agree where nothing is wrong, each with its own row', () => {
    const { passed, run } = judge(sound());
    expect(passed.map(({ point, role, agrees }) => [point, role, agrees])).toEqual([
      ['M-1', 'passed', true],
      ['M-2', 'passed', true],
      ['B', 'end', true],
    ]);
    expect(run.closure.exceeds).toBe(false);
  });

  it('bound a misreading, whose figure is told', () => {
    const sights = sound();
    sights[3].foresight = (sights[3].foresight ?? 0) + 0.1;
    const { run, place } = judge(sights);
    expect(run.closure.misclosure).toBeCloseTo(-0.1, 4);
    expect(run.lines.every(({ adjustment }) => adjustment === 0)).toBe(true);
    expect(place).toEqual({ kind: 'between', after: 'M-1', before: 'M-2' });
    expect(misreadFigure(run.closure.misclosure ?? 0, 1, run.closure.standardDeviation)).toBe(0.1);
    expect(misreadFigure(0.137, 1, 0.003)).toBeNull();
    expect(misreadFigure(0.1, 1, 0.02)).toBeNull();
  });

  it('explain a small excess by what they are stated to be good for, and no large one', () => {
    const verdictOf = (miss: number, sigma: number) => {
      const sights = sound();
      sights[6].foresight = (sights[6].foresight ?? 0) - miss;
      const ends = [...known].filter(([name]) => name === 'A' || name === 'B');
      const marks = new Map(ends.map(([name, mark]) => [name, { ...mark, sigma }]));
      const { run, passed } = judge(sights, marks);
      const line = { source: 'pegTest' as const, collimation: 0, sigma: 5e-6, failed: null };
      const around = { sights, limit: THIRD_ORDER, passed, line, untrusted: [], staffUnit: 1 };
      return judgeRun(run, around).reasons[0].code;
    };
    // 12 mm√km over 390 m: 7.5 mm.
    expect(verdictOf(0.007, 0.0015)).toBe('closes');
    expect(verdictOf(0.0095, 0.0015)).toBe('misclosure_of_marks');
    expect(verdictOf(0.0095, 0.0002)).toBe('misclosure_over');
    expect(verdictOf(0.03, 0.0015)).toBe('misclosure_over');
  });

  it('point at a start that has moved, since all others differ from it alike', () => {
    const sunk = new Map(known);
    const start = known.get('A');
    if (start) sunk.set('A', { ...start, elevation: start.elevation + 0.06 });
    const { place, run } = judge(sound(), sunk);
    expect(run.closure.exceeds).toBe(true);
    expect(place?.kind).toBe('start');
  });

  it('tell of one that has moved while the run itself closes', () => {
    const moved = new Map(known);
    const mark = known.get('M-2');
    if (mark) moved.set('M-2', { ...mark, elevation: mark.elevation - 0.02 });
    const { passed, run } = judge(sound(), moved);
    expect(run.closure.exceeds).toBe(false);
    const off = passed.filter(({ agrees }) => !agrees);
    expect(off.map(({ point }) => point)).toEqual(['M-2']);
    expect(off[0].difference).toBeCloseTo(0.02, 4);
  });
});

describe('the two-peg test', () => {
  // From the middle 1.481 − 1.233 = 0.248; from beside A 1.507 − 1.262 = 0.245; so that readings rise by 3 mm over the
  // 44 m that B is farther: by hand, without curvature.
  it('gives by hand what it gives', () => {
    const test = pegTest(
      [
        { readingA: 1.481, distanceA: 25, readingB: 1.233, distanceB: 25 },
        { readingA: 1.507, distanceA: 3, readingB: 1.262, distanceB: 47 },
      ],
      SIGMA,
      0,
    );
    expect(test.heightDifference).toBeCloseTo(0.248, 10);
    expect(test.collimation).toBeCloseTo(0.003 / 44, 10);
    expect(test.adjustTo.staff).toBe('B');
    expect(test.adjustTo.wanted).toBeCloseTo(1.262 - (0.003 / 44) * 47, 10);
    expect(test.test.degreesOfFreedom).toBe(0);
  });

  it('finds the collimation without errors exactly, curvature and refraction on', () => {
    const level = { collimation: -7.3e-5, perRoot: 0, curvature: CURVATURE };
    const standings = pegStandings(level, seededChance(8), 50, 2);
    expect(pegTest(standings, SIGMA, CURVATURE).collimation).toBeCloseTo(-7.3e-5, 12);
  });

  // Coverage as above; and of levels that are off by more than the limit, 5 % at most may pass.
  it.each([5, 66, 404])('is right as often as it says, and passes no bad level: seed %d', (seed) => {
    const chance = seededChance(seed);
    const tests = 2000;
    let covered = 0;
    let bad = 0;
    let passedBad = 0;
    let failedGood = 0;
    for (let i = 0; i < tests; i++) {
      const collimation = between(chance, -2e-4, 2e-4);
      const level = { collimation, perRoot: SIGMA, curvature: CURVATURE };
      const standings = pegStandings(level, chance, between(chance, 40, 60), 1 + (i % 3));
      const found = pegTest(standings, SIGMA, CURVATURE);
      if (Math.abs(found.collimation - collimation) < 1.96 * found.standardDeviation) covered++;
      const isBad = Math.abs(collimation) > found.limit;
      if (isBad) bad++;
      if (isBad && found.verdict === 'pass') passedBad++;
      if (!isBad && found.verdict === 'fail') failedGood++;
    }
    expect(covered / tests).toBeGreaterThan(0.94);
    expect(passedBad / bad).toBeLessThan(0.05);
    expect(failedGood / (tests - bad)).toBeLessThan(0.05);
  });
});
