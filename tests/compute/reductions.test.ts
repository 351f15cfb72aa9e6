import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { trueSlopeDistance } from '@/lib/compute/survey/distance';
import { sightGeometry } from '@/lib/compute/survey/geometry';
import { circleSigma, DEFAULT_ACCURACY, distanceSigma } from '@/lib/compute/survey/instrument';
import { polarPoint, polarPointAtElevation } from '@/lib/compute/survey/polarPoint';
import { rayTo } from '@/lib/compute/survey/ray';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { wrapDifference, wrapTurn } from '@/lib/compute/units/angles';
import { fromMetres, toMetres } from '@/lib/compute/units/convert';
import { parseDms } from '@/lib/compute/units/dms';
import { sightTo } from '@/tests/simulator/sight';

const real = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const DEGREE = Math.PI / 180;

describe('accuracies', () => {
  it('a stated angle belongs to one direction in both faces; a single face carries √2 of it', () => {
    expect(circleSigma(2, 1, 1)).toBeCloseTo(2, 12);
    expect(circleSigma(2, 1, 0)).toBeCloseTo(2 * Math.SQRT2, 12);
    expect(circleSigma(2, 0, 2)).toBeCloseTo(2, 12);
    expect(circleSigma(2, 2, 2)).toBeCloseTo(2 / Math.SQRT2, 12);
    // Two readings left and one right: the mean of the faces weighs each face alike.
    expect(circleSigma(2, 2, 1)).toBeCloseTo(Math.sqrt((4 + 8) / 4), 12);
  });

  it('a distance is good to a + b ppm, added', () => {
    expect(distanceSigma({ ...DEFAULT_ACCURACY, distance: 0.001, distancePpm: 2 }, 500)).toBeCloseTo(
      0.002,
      12,
    );
  });
});

describe('a slope distance', () => {
  const reading = { slopeDistance: 100, prismConstantMm: 0, prismConstantAppliedMm: 0, appliedPpm: 0 };

  it('takes the constant that was not applied, and gives back the one that was', () => {
    const constant = { ...reading, prismConstantMm: -30 };
    expect(trueSlopeDistance(constant, 0)).toBeCloseTo(99.97, 12);
    expect(trueSlopeDistance({ ...constant, prismConstantAppliedMm: -30 }, 0)).toBe(100);
    expect(trueSlopeDistance({ ...reading, prismConstantAppliedMm: -30 }, 0)).toBeCloseTo(100.03, 12);
  });

  it('lengthens with a positive ppm, less what was applied; without an atmosphere the applied one stands', () => {
    expect(trueSlopeDistance(reading, 20)).toBeCloseTo(100.002, 12);
    expect(trueSlopeDistance({ ...reading, appliedPpm: 50 }, 20)).toBeCloseTo(99.997, 12);
    expect(trueSlopeDistance({ ...reading, appliedPpm: 50 }, null)).toBe(100);
  });
});

describe('the ray', () => {
  const sights = fc.record({
    east: real(-700, 700),
    north: real(-700, 700).filter((n) => Math.abs(n) > 5),
    height: real(-150, 150),
    k: real(-1, 1.2),
    factor: real(0.999, 1.001),
  });

  it('reads what a sphere and a curved ray show, to 1e-8 rad and 5 µm within a kilometre', () => {
    fc.assert(
      fc.property(sights, ({ east, north, height, k, factor }) => {
        const surroundings = { ...DEFAULT_SURROUNDINGS, combinedFactor: factor };
        const ray = rayTo(east, north, height, k, surroundings);
        const from = { easting: 0, northing: 0, height: 0 };
        const sight = sightTo(from, { easting: east, northing: north, height }, k, surroundings);
        expect(Math.abs(wrapDifference(ray.azimuth - sight.azimuth))).toBeLessThan(1e-12);
        expect(Math.abs(ray.zenith - sight.zenith)).toBeLessThan(1e-8);
        expect(Math.abs(ray.slope - sight.slope)).toBeLessThan(5e-6);
      }),
      { numRuns: 500, seed: 6 },
    );
  });

  it('has the derivatives of its own values', () => {
    fc.assert(
      fc.property(sights, ({ east, north, height, k, factor }) => {
        const surroundings = { ...DEFAULT_SURROUNDINGS, combinedFactor: factor };
        const ray = rayTo(east, north, height, k, surroundings);
        const h = 1e-3;
        const along = (by: number) => {
          const stretch = (ray.grid + by) / ray.grid;
          return rayTo(east * stretch, north * stretch, height, k, surroundings);
        };
        const above = (by: number) => rayTo(east, north, height + by, k, surroundings);
        const slope = (of: (by: number) => number) => (of(h) - of(-h)) / (2 * h);
        const azimuth = (by: number) =>
          wrapDifference(rayTo(east + by, north, height, k, surroundings).azimuth - ray.azimuth);
        const close = (value: number, expected: number) =>
          expect(Math.abs(value - expected)).toBeLessThan(1e-6 * Math.max(1e-3, Math.abs(expected)));
        close(ray.azimuthEast, slope(azimuth));
        close(
          ray.zenithGrid,
          slope((by) => along(by).zenith),
        );
        close(
          ray.slopeGrid,
          slope((by) => along(by).slope),
        );
        close(
          ray.zenithHeight,
          slope((by) => above(by).zenith),
        );
        close(
          ray.slopeHeight,
          slope((by) => above(by).slope),
        );
      }),
      { numRuns: 200, seed: 6 },
    );
  });

  it('leads back to the mark that it was read to, by zenith angle or by known elevation', () => {
    fc.assert(
      fc.property(sights, real(0, 6.28), real(0, 3), (sight, orientation, targetHeight) => {
        const { east, north, height, k, factor } = sight;
        const surroundings = { ...DEFAULT_SURROUNDINGS, combinedFactor: factor };
        const ray = rayTo(east, north, height, k, surroundings);
        const station = { easting: 5000, northing: 7000, axis: 300, orientation, refraction: k };
        const direction = ray.azimuth - orientation;
        const reading = { direction, zenith: ray.zenith, distance: ray.slope, targetHeight };
        const elevation = 300 + height - targetHeight;
        const point = polarPoint(station, reading, surroundings);
        const known = polarPointAtElevation(station, { ...reading, elevation }, surroundings);
        for (const place of [point, known]) {
          expect(Math.abs(place.easting - 5000 - east)).toBeLessThan(1e-7);
          expect(Math.abs(place.northing - 7000 - north)).toBeLessThan(1e-7);
          expect(Math.abs(place.elevation - elevation)).toBeLessThan(1e-7);
        }
      }),
      { numRuns: 300, seed: 6 },
    );
  });
});

describe('the lie of the sights', () => {
  it.each([
    ['all around', [0, 120, 240], 240, true],
    ['over the circle’s zero', [350, 10, 30], 40, false],
    ['half a turn apart', [0, 180], 180, false],
    ['just more than half a turn apart', [0, 90, 180.001], 180.001, true],
    ['twice the same', [45, 45], 0, false],
    ['one alone', [45], 0, false],
  ])('%s', (_, degrees, spread, inside) => {
    const geometry = sightGeometry(degrees.map((d) => d * DEGREE));
    expect(geometry.spread / DEGREE).toBeCloseTo(spread, 9);
    expect(geometry.inside).toBe(inside);
  });
});

describe('angles', () => {
  it('wrap into [0, 2π) and (−π, π], the same direction as before', () => {
    const angle = fc.oneof(
      real(-100, 100),
      real(-1e-15, 1e-15),
      fc.constantFrom(-1e-20, 2 * Math.PI, -Math.PI),
    );
    fc.assert(
      fc.property(angle, (radians) => {
        const turn = wrapTurn(radians);
        const difference = wrapDifference(radians);
        expect(turn).toBeGreaterThanOrEqual(0);
        expect(turn).toBeLessThan(2 * Math.PI);
        expect(difference).toBeGreaterThan(-Math.PI);
        expect(difference).toBeLessThanOrEqual(Math.PI);
        for (const same of [turn, difference]) {
          expect(Math.cos(same)).toBeCloseTo(Math.cos(radians), 12);
          expect(Math.sin(same)).toBeCloseTo(Math.sin(radians), 12);
        }
      }),
      { numRuns: 1000, seed: 2 },
    );
  });

  it.each(['124-30-15.2', '124 30 15.2', '124°30\'15.2"', ' 124d30m15.2s ', '124° 30′ 15.2″'])(
    'read %s as 124.5042…°',
    (text) => {
      expect(parseDms(text)! / DEGREE).toBeCloseTo(124 + 30 / 60 + 15.2 / 3600, 12);
    },
  );

  it('read a negative angle whose degrees are zero', () => {
    expect(parseDms('-0-30-00')! / DEGREE).toBeCloseTo(-0.5, 12);
  });

  it.each([
    '12-60-00',
    '12-00-60',
    '12-00',
    '12.5',
    '',
    'N',
    '12-0x-00',
    '12-00-00-00',
    '1e2-00-00',
    '--1-0-0',
  ])('refuse %j', (text) => {
    expect(parseDms(text)).toBeNull();
  });
});

describe('lengths', () => {
  it('come out as they came in, to fifteen digits', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -999_999_999, max: 999_999_999 }),
        fc.integer({ min: 0, max: 5 }),
        fc.constantFrom('m', 'ft', 'ftUS'),
        (digits, places, unit) => {
          const value = Number(`${digits}e-${places}`);
          expect(fromMetres(toMetres(value, unit), unit)).toBe(value);
        },
      ),
      { numRuns: 1000, seed: 2 },
    );
  });
});
