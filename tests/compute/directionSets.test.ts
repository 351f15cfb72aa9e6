import { describe, expect, it } from 'vitest';
import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import { directionSets } from '@/lib/compute/survey/directionSets';
import { meanFaces } from '@/lib/compute/survey/faces';
import { seededChance } from '@/tests/simulator/chance';
import { observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const ARCSECOND = Math.PI / 648_000;
const FACES: ('left' | 'right')[] = ['left', 'right'];

function reading(erection: number, set: number, seconds: number) {
  const value = (((erection * 5000 + seconds) * ARCSECOND) % (2 * Math.PI)) + (seconds < 0 ? 2 * Math.PI : 0);
  return { kind: 'direction', erection, set, value, sigma: 2 * ARCSECOND, face: 0 } as const;
}
const erections = ['A', 'B', 'C'].map((target) => ({
  target,
  targetHeight: 0,
  centringSigma: 0.001,
  heightSigma: 0.001,
}));

describe('sets of directions', () => {
  it('are meaned and spread as ISO 17123-3 has it, over the circle’s zero and whatever the circle was turned', () => {
    // Two sets, three targets, the second circle 40″ on: differences −2, 1, 1 off its turn of 40.
    const sets = directionSets(
      [
        ...[-10, 2, 5].map((seconds, t) => reading(t, 1, seconds)),
        ...[28, 43, 46].map((seconds, t) => reading(t, 2, seconds)),
      ],
      erections,
    )!;
    // r = ∓1, ±0.5, ±0.5: Σr² = 2·(1 + 0.25 + 0.25) = 3, ν = 1·2.
    expect(sets.degreesOfFreedom).toBe(2);
    expect(sets.ofOneSet / ARCSECOND).toBeCloseTo(Math.sqrt(1.5), 6);
    expect(sets.ofMean / ARCSECOND).toBeCloseTo(Math.sqrt(0.75), 6);
    expect(sets.directions.map(({ largest }) => largest / ARCSECOND)).toEqual([
      expect.closeTo(1, 6),
      expect.closeTo(0.5, 6),
      expect.closeTo(0.5, 6),
    ]);
    const seconds = sets.directions.map(({ mean }, t) => mean / ARCSECOND - 5000 * t);
    expect(seconds[0] - 1_296_000).toBeCloseTo(-11, 5);
    expect(seconds[1]).toBeCloseTo(2.5, 5);
    expect(seconds[2]).toBeCloseTo(5.5, 5);
    expect(sets.asStated).toBe(true);
  });

  it('leave out what was not read in every set, and say nothing of one set or one target', () => {
    const some = [reading(0, 1, 0), reading(1, 1, 0), reading(2, 1, 0), reading(0, 2, 1), reading(1, 2, 3)];
    expect(directionSets(some, erections)!.directions.map(({ target }) => target)).toEqual(['A', 'B']);
    expect(directionSets(some.slice(0, 3), erections)).toBeNull();
    expect(directionSets([reading(0, 1, 0), reading(0, 2, 0)], erections)).toBeNull();
  });

  it('of a simulated instrument spread as it states: mean of 1, beyond the 95 % point in one of twenty', () => {
    const chance = seededChance(21);
    const count = 600;
    let ratios = 0;
    let beyond = 0;
    for (let i = 0; i < count; i++) {
      const observed = observe(
        randomSite(chance, { marks: [4, 6] }),
        randomInstrument(chance),
        { faces: FACES, sets: 3 },
        chance,
      );
      const { shots, accuracy } = asEngine(observed);
      const means = meanFaces(shots, accuracy, null);
      const sets = directionSets(means.readings, means.erections)!;
      const ratio = (sets.ofOneSet / accuracy.direction) ** 2;
      ratios += ratio / count;
      if (ratio * sets.degreesOfFreedom > chiSquareQuantile(0.95, sets.degreesOfFreedom)) beyond++;
      expect(sets.stated).toBeCloseTo(accuracy.direction, 12);
    }
    expect(ratios).toBeGreaterThan(0.95);
    expect(ratios).toBeLessThan(1.05);
    expect(beyond / count).toBeGreaterThan(0.02);
    expect(beyond / count).toBeLessThan(0.08);
  });
});

describe('errors that two faces show', () => {
  it('come with a σ that their own scatter bears out', () => {
    const chance = seededChance(22);
    const z = { collimation: 0, index: 0 };
    const count = 600;
    for (let i = 0; i < count; i++) {
      const observed = observe(
        randomSite(chance),
        randomInstrument(chance),
        { faces: FACES, sets: 2 },
        chance,
      );
      const { shots, accuracy } = asEngine(observed);
      const faces = meanFaces(shots, accuracy, null).faceErrors!;
      const { collimation, index } = observed.truth;
      z.collimation += ((faces.twoCollimation! - 2 * collimation) / faces.twoCollimationSigma!) ** 2 / count;
      z.index += ((faces.verticalIndex! - index) / faces.verticalIndexSigma!) ** 2 / count;
      expect(faces.collimationPairs).toBe(2 * observed.published.length);
    }
    for (const mean of Object.values(z)) {
      expect(mean).toBeGreaterThan(0.8);
      expect(mean).toBeLessThan(1.2);
    }
  });
});
