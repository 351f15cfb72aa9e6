import { describe, expect, it } from 'vitest';
import type { Chance } from '@/tests/simulator/chance';
import type { Programme } from '@/tests/simulator/observe';
import type { Kind } from '@/tests/simulator/randomSite';
import { type Coverage, coverage } from './coverage';

const SETUPS = 2000;

const oneFace = (chance: Chance): Programme => ({
  faces: [chance.uniform() < 0.5 ? 'left' : 'right'],
  sets: 1,
});
const bothFaces = (): Programme => ({ faces: ['left', 'right'], sets: 1 });
const twoRounds = (): Programme => ({ faces: ['left', 'right'], sets: 2 });

function isHonest(name: string, result: Coverage) {
  const percent = (share: number) => `${(100 * share).toFixed(1)} %`;
  console.log(
    `${name}: ellipse ${percent(result.ellipse)}, height ${percent(result.height)}, orientation ${percent(
      result.orientation,
    )}, χ² ${percent(result.accepted)}, σ₀ ${result.sigma0.toFixed(4)}, ${result.perSecond} setups/s`,
  );
  expect(result.converged).toBe(1);
  for (const share of [result.ellipse, result.height, result.orientation, result.accepted]) {
    expect(share).toBeGreaterThanOrEqual(0.93);
    expect(share).toBeLessThanOrEqual(0.97);
  }
  expect(result.sigma0).toBeGreaterThanOrEqual(0.97);
  expect(result.sigma0).toBeLessThanOrEqual(1.03);
}

describe.each([1, 2, 3])('2,000 simulated resections, seed %i', (seed) => {
  it.each([
    ['one face', oneFace],
    ['both faces', bothFaces],
    ['two rounds of both faces', twoRounds],
  ])('%s: ellipse, height, orientation and χ² test hold in 93–97 %', (name, programme) => {
    isHonest(`seed ${seed}, ${name}`, coverage(seed, SETUPS, programme));
  });
});

describe('2,000 simulated resections of an unusual kind', () => {
  it.each<[string, (chance: Chance) => Programme, Kind]>([
    ['air that nobody measured', bothFaces, { unknownAirPpm: 10 }],
    ['one face in air that nobody measured', oneFace, { unknownAirPpm: 10 }],
    ['two reflectors on one mark', bothFaces, { secondReflector: true }],
    ['a combined factor', twoRounds, { combinedFactor: 0.9996 }],
    ['a mark without elevation', bothFaces, { withoutElevation: 1 }],
    ['two marks without elevation', twoRounds, { withoutElevation: 2 }],
  ])('%s: what is stated holds in 93–97 %', (name, programme, kind) => {
    isHonest(name, coverage(4, SETUPS, programme, kind));
  });
});
