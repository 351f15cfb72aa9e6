import { describe, expect, it } from 'vitest';
import { IdentificationError } from '@/lib/compute/survey/identify';
import { seededChance } from '@/tests/simulator/chance';
import { amongPoints, crowdedSite } from '@/tests/simulator/crowdedSite';
import { REGULAR_LAYOUTS } from '@/tests/simulator/regularLayouts';
import { asTask, identified, type Outcome, outcome } from './identifySite';

const SITES = 500;
const LAYOUTS = 100;

describe.each([1, 2, 3])(
  'four to eight unnamed shots among 200 to 5,000 points, a stray in half of them, seed %i',
  (seed) => {
    it(`are identified in at least 99 % of ${SITES} sites, and never wrongly without saying so`, {
      timeout: 120_000,
    }, () => {
      const chance = seededChance(seed);
      const counts: Record<Outcome, number> = { right: 0, wrong: 0, ambiguous: 0, refused: 0 };
      for (let i = 0; i < SITES; i++) counts[outcome(asTask(crowdedSite(chance)))]++;
      console.log(`seed ${seed}: ${JSON.stringify(counts)}`);
      expect(counts.wrong).toBe(0);
      expect(counts.right / SITES).toBeGreaterThanOrEqual(0.99);
    });
  },
);

describe.each(REGULAR_LAYOUTS)('%s', (_, layout) => {
  it('is ambiguous every time, with another stand listed and the shot that would tell', {
    timeout: 120_000,
  }, () => {
    const chance = seededChance(4);
    for (let i = 0; i < LAYOUTS; i++) {
      const task = asTask(amongPoints(chance, layout(chance), { strays: 0 }));
      const found = identified(task);
      if (found instanceof IdentificationError) throw found;
      expect(found.ambiguous).toBe(true);
      expect(found.rivals.length).toBeGreaterThan(0);
      expect(found.deciding).not.toBeNull();
    }
  });

  it('is never identified wrongly where a point of it is missing from the list', { timeout: 120_000 }, () => {
    const chance = seededChance(5);
    for (let i = 0; i < LAYOUTS; i++) {
      const task = asTask(amongPoints(chance, layout(chance), { strays: 1, shots: [5, 8] }));
      expect(outcome(task)).not.toBe('wrong');
    }
  });
});
