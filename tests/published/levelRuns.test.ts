import { describe, expect, it } from 'vitest';
import { mmPerRootKm, oneWaySigma, perRootMetre } from '@/lib/compute/survey/levelling/accuracy';
import { faultsOfBook, type LevelSight } from '@/lib/compute/survey/levelling/book';
import { levelRun } from '@/lib/compute/survey/levelling/levelRun';
import {
  allowedMisclosure,
  ofRootMile,
  perRootMile,
  THIRD_ORDER,
} from '@/lib/compute/survey/levelling/limit';

const NOTHING: Omit<LevelSight, 'point'> = {
  backsight: null,
  backsightDistance: null,
  intermediate: null,
  intermediateDistance: null,
  foresight: null,
  foresightDistance: null,
  bookedElevation: null,
};

/** Field notes of a differential levelling section, a worked homework answer (askfilo.com; arithmetic rechecked). */
describe('the level run of a worked homework answer, ft', () => {
  const backsights = [3.1, 6.44, 8.76, 7.12];
  const foresights = [9.82, 6.96, 3.27, 10.42];
  const sights: LevelSight[] = Array.from({ length: 5 }, (_, i) => ({
    ...NOTHING,
    point: ['BM-1', 'TP-1', 'TP-2', 'TP-3', 'BM-2'][i],
    backsight: backsights[i] ?? null,
    foresight: foresights[i - 1] ?? null,
  }));
  const run = levelRun({
    sights,
    start: { name: 'BM-1', elevation: 100, sigma: 0 },
    end: { name: 'BM-2', elevation: 94.91, sigma: 0 },
    sigma: 0.0001,
    collimation: 0,
    collimationSigma: 0,
    curvature: 0,
    limit: { per: 'setup', factor: 0.1 },
  });

  it('has the printed elevations, sums and misclosure', () => {
    expect(faultsOfBook(sights)).toEqual([]);
    const elevations = run.lines.slice(1).map(({ bookElevation }) => bookElevation);
    [93.28, 92.76, 98.25, 94.95].forEach((printed, i) => {
      expect(elevations[i]).toBeCloseTo(printed, 10);
    });
    expect(run.page.backsights).toBeCloseTo(25.42, 10);
    expect(run.page.foresights).toBeCloseTo(30.47, 10);
    expect(run.page.rises - run.page.falls).toBeCloseTo(-5.05, 10);
    expect(run.page.agrees).toBe(true);
    expect(run.closure.misclosure).toBeCloseTo(0.04, 10);
  });

  // By hand: four standings of equal weight take a quarter of the misclosure each.
  it('distributes the misclosure by standings where no distance was measured', () => {
    const adjusted = run.lines.map(({ elevation }) => elevation);
    [100, 93.27, 92.74, 98.22, 94.91].forEach((by, i) => {
      expect(adjusted[i]).toBeCloseTo(by, 10);
    });
  });
});

// "12 mm√km, which equals 0.05 ft√mile": the two customary statements of third order (FGCS, from memory).
it('states third order the same in millimetres and kilometres as in feet and miles', () => {
  expect(ofRootMile(THIRD_ORDER.factor) / 0.3048).toBeCloseTo(0.05, 3);
  expect(mmPerRootKm(perRootMile(0.05 * 0.3048))).toBeCloseTo(12, 1);
  expect(allowedMisclosure(THIRD_ORDER, 4000, 50)).toBeCloseTo(0.024, 12);
  expect(allowedMisclosure({ per: 'setup', factor: 0.002 }, 4000, 25)).toBeCloseTo(0.01, 12);
});

// ISO 17123-2 states the mean of a run there and back over one kilometre; one way is √2 of it.
it('takes √2 of the stated accuracy for a single run', () => {
  expect(oneWaySigma(perRootMetre(2)) * Math.sqrt(1000)).toBeCloseTo(0.002 * Math.SQRT2, 12);
});
