import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { wrapDifference } from '@/lib/compute/units/angles';
import { NO_ERRORS, seededChance } from '@/tests/simulator/chance';
import { observe, type Site } from '@/tests/simulator/observe';
import { anyProgramme, anySite, STATED } from './arbitrarySite';
import { asEngine } from './asEngine';

const ARCSECOND = Math.PI / 648000;
const BOTH = { faces: ['left', 'right'], sets: 1 } satisfies Parameters<typeof observe>[2];

function returnsInPlan({ station, converged, test }: StationFit, site: Site) {
  expect(converged).toBe(true);
  expect(test.value).toBeLessThan(1e-6);
  expect(Math.abs(station.easting - site.station.easting)).toBeLessThan(1e-6);
  expect(Math.abs(station.northing - site.station.northing)).toBeLessThan(1e-6);
  expect(Math.abs(wrapDifference(station.orientation - site.orientation))).toBeLessThan(1e-8);
  expect(station.orientation).toBeGreaterThanOrEqual(0);
  expect(station.orientation).toBeLessThan(2 * Math.PI);
}

function returns(fit: StationFit, site: Site) {
  returnsInPlan(fit, site);
  expect(Math.abs(fit.station.axis - site.station.height)).toBeLessThan(1e-6);
}

describe('a setup observed without errors', () => {
  it('returns to 1e-6 m in any geometry, orientation, air, prism and grid', () => {
    fc.assert(
      fc.property(anySite, anyProgramme, (site, programme) => {
        const fit = fitStation(asEngine(observe(site, STATED, programme, NO_ERRORS)));
        returns(fit, site);
        for (const { residual } of fit.marks) {
          expect(Math.hypot(residual.easting!, residual.northing!, residual.elevation!)).toBeLessThan(2e-6);
        }
      }),
      { numRuns: 300, seed: 11 },
    );
  });

  it('returns where marks lack elevations, and readings were left out', () => {
    const left = fc.constantFrom(
      { direction: null },
      { zenith: null, distance: null },
      { distance: null },
      { zenith: null },
      { direction: null, distance: null },
      {},
    );
    const apart = anySite.filter(({ marks: [a, b] }) => {
      return Math.hypot(a.easting - b.easting, a.northing - b.northing) > 20;
    });
    const elevations = fc.array(fc.boolean(), { minLength: 6, maxLength: 6 });
    const readings = fc.array(left, { minLength: 4, maxLength: 4 });
    fc.assert(
      fc.property(apart, elevations, readings, (site, known, without) => {
        const marks = site.marks.map((mark, i) => ({ ...mark, hasElevation: i === 0 || known[i] }));
        const input = asEngine(observe({ ...site, marks }, STATED, BOTH, NO_ERRORS));
        // Two marks are read in full.
        const shots = input.shots.map((shot) => ({ ...shot, ...without[Number(shot.target.slice(1)) - 3] }));
        returns(fitStation({ ...input, shots }), site);
      }),
      { numRuns: 300, seed: 13 },
    );
  });

  it('returns in plan, and has no height, where no mark has an elevation', () => {
    fc.assert(
      fc.property(anySite, anyProgramme, (site, programme) => {
        const marks = site.marks.map((mark) => ({ ...mark, hasElevation: false }));
        const fit = fitStation(asEngine(observe({ ...site, marks }, STATED, programme, NO_ERRORS)));
        returnsInPlan(fit, site);
        expect(fit.heightDetermined).toBe(false);
        expect(fit.marks.some(({ vertical }) => vertical)).toBe(false);
      }),
      { numRuns: 100, seed: 14 },
    );
  });

  it('means collimation and index away from two faces and reports both with their sign', () => {
    // Of all errors only collimation and index are drawn; the engine is told the usual accuracies.
    const onlyTilted = {
      direction: 0,
      zenith: 0,
      distance: 0,
      distancePpm: 0,
      collimation: 40 * ARCSECOND,
      targetCentring: 0,
      targetHeight: 0,
    };
    const seeds = fc.integer({ min: 1, max: 9999 });
    fc.assert(
      fc.property(anySite, seeds, fc.integer({ min: 1, max: 2 }), (site, seed, sets) => {
        const calm = {
          ...site,
          refraction: { ...site.refraction, sigma: 0 },
          marks: site.marks.map((mark) => ({ ...mark, horizontalSigma: 0, verticalSigma: 0 })),
        };
        const observed = observe(calm, onlyTilted, { ...BOTH, sets }, seededChance(seed));
        const published = observed.published.map((mark) => ({
          ...mark,
          horizontalSigma: 0.003,
          verticalSigma: 0.003,
        }));
        const fit = fitStation(asEngine({ ...observed, site, instrument: STATED, published }));
        returns(fit, site);
        expect(fit.faceErrors!.twoCollimation).toBeCloseTo(2 * observed.truth.collimation, 10);
        expect(fit.faceErrors!.verticalIndex).toBeCloseTo(observed.truth.index, 10);
      }),
      { numRuns: 100, seed: 12 },
    );
  });

  it('reports no collimation and index where no mark was read in both faces', () => {
    const [site] = fc.sample(anySite, { numRuns: 1, seed: 5 });
    const observed = observe(site, STATED, { faces: ['left'], sets: 2 }, NO_ERRORS);
    expect(fitStation(asEngine(observed)).faceErrors).toBeNull();
  });
});
