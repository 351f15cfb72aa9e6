import { describe, expect, it } from 'vitest';
import { fitStation } from '@/lib/compute/survey/stationFit';
import { seededChance } from '@/tests/simulator/chance';
import {
  type Mistake,
  movedTarget,
  noMistake,
  swappedTargets,
  wrongConstant,
  wrongHeight,
} from '@/tests/simulator/mistakes';
import { observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const SETUPS = 300;

const MISTAKES = [
  ['a prism constant wrong by 30 mm', wrongConstant(0.03), 0.9],
  ['a target moved 60 mm', movedTarget(0.06), 0.9],
  ['a height wrong by 100 mm', wrongHeight(0.1), 0.9],
  ['two targets swapped', swappedTargets, 0.9],
  ['nothing wrong', noMistake, 0.92],
] as const;

function explained({ observed, ...mistake }: Mistake) {
  const { explanations } = fitStation(asEngine(observed));
  const [first] = explanations;
  return {
    weights: explanations.reduce((sum, { weight }) => sum + weight, 0),
    confidence: first.weight,
    right: first.fault === mistake.fault && [...first.subject].sort().join() === mistake.subject.join(),
    off: mistake.size === null || first.size === null ? null : first.size - mistake.size,
  };
}

describe.each([1, 2, 3])('four to six targets all round, seed %i', (seed) => {
  it.each(MISTAKES)('%s is ranked first as often as promised', (name, make, atLeast) => {
    const chance = seededChance(seed);
    let right = 0;
    let sure = 0;
    let sureAndRight = 0;
    const off: number[] = [];
    for (let i = 0; i < SETUPS; i++) {
      const site = randomSite(chance, { marks: [4, 6], allRound: true });
      const observed = observe(site, randomInstrument(chance), { faces: ['left', 'right'], sets: 1 }, chance);
      const found = explained(make(observed, chance));
      expect(found.weights).toBeCloseTo(1, 9);
      if (found.right) right++;
      if (found.right && found.off !== null) off.push(Math.abs(found.off));
      if (found.confidence > 0.9) sure++;
      if (found.confidence > 0.9 && found.right) sureAndRight++;
    }
    const median = off.sort((a, b) => a - b)[off.length >> 1] ?? 0;
    console.log(
      `seed ${seed}, ${name}: first in ${((100 * right) / SETUPS).toFixed(1)} %, ` +
        `right where sure ${((100 * sureAndRight) / sure).toFixed(1)} % of ${sure}, size off by ${(1000 * median).toFixed(1)} mm`,
    );
    expect(right / SETUPS).toBeGreaterThanOrEqual(atLeast);
    // Weights over 0.9 are meant.
    expect(sureAndRight / sure).toBeGreaterThanOrEqual(0.9);
    expect(median).toBeLessThan(0.01);
  });
});
