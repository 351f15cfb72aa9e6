import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { deviationStatistics, isWithin, windowRule } from '@/lib/compute/grade/acceptance';
import {
  benchMixUp,
  benchReading,
  GROSS_ERROR,
  isGross,
  isOffByOffset,
} from '@/lib/compute/grade/benchCheck';
import { conformance, deviationFrom } from '@/lib/compute/grade/conformance';
import { gradeLabel } from '@/lib/compute/grade/label';
import { planeSurface } from '@/lib/compute/grade/surface';
import { surfaceBytes, surfaceFromBytes } from '@/lib/compute/grade/surfaceBytes';
import { type Tin, tinSurface } from '@/lib/compute/grade/tin';
import { triangulate } from '@/lib/compute/grade/triangulate';

const real = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const HAIR = 1e-9;

const anyPlane = fc.record({
  easting: real(0, 800_000),
  northing: real(0, 6_000_000),
  elevation: real(-100, 4000),
  azimuth: real(0, 2 * Math.PI),
  slope: real(-0.5, 0.5),
});

describe('a design surface', () => {
  it('through coplanar points is their plane, in height and gradient, anywhere inside', () => {
    const offsets = fc.array(fc.tuple(real(-200, 200), real(-200, 200)), { minLength: 1, maxLength: 40 });
    fc.assert(
      fc.property(anyPlane, offsets, offsets, (definition, inside, asked) => {
        const plane = planeSurface(definition);
        const corners = [
          [-201, -201],
          [201, -201],
          [201, 201],
          [-201, 201],
        ];
        const points = Float64Array.from(
          [...corners, ...inside].flatMap(([east, north]) => {
            const [e, n] = [definition.easting + east, definition.northing + north];
            return [e, n, plane.at(e, n)!.elevation];
          }),
        );
        const surface = tinSurface({ points, triangles: triangulate(points) });
        for (const [east, north] of [...asked, ...inside, ...corners]) {
          const [e, n] = [definition.easting + east, definition.northing + north];
          const height = surface.at(e, n);
          const expected = plane.at(e, n)!;
          expect(height).not.toBeNull();
          expect(Math.abs(height!.elevation - expected.elevation)).toBeLessThan(1e-6);
        }
        expect(surface.at(definition.easting + 202, definition.northing)).toBeNull();
        expect(surface.at(definition.easting, definition.northing - 202)).toBeNull();
      }),
      { numRuns: 100, seed: 3 },
    );
  });

  it('of sixty thousand slivers that meet at one point gives the height of their cone', () => {
    const [count, radius, peak] = [60_000, 300, 40];
    const points = new Float64Array(3 * (count + 1));
    points.set([1000, 2000, peak]);
    for (let i = 0; i < count; i++) {
      const angle = (2 * Math.PI * i) / count;
      points.set([1000 + radius * Math.cos(angle), 2000 + radius * Math.sin(angle), 0], 3 * (i + 1));
    }
    const triangles = Uint32Array.from({ length: 3 * count }, (_, i) =>
      i % 3 === 0 ? 0 : 1 + ((Math.floor(i / 3) + (i % 3) - 1) % count),
    );
    const cone = tinSurface({ points, triangles });
    for (const share of [0.1, 0.5, 0.9])
      expect(cone.at(1000 + share * radius, 2000)!.elevation).toBeCloseTo(peak * (1 - share), 6);
    expect(cone.at(1000 + radius, 2000 + radius)).toBeNull();
  });

  it('rises towards its azimuth by its slope', () => {
    // 2 % towards the east, from 100 m.
    const plane = planeSurface({
      easting: 10,
      northing: 20,
      elevation: 100,
      azimuth: Math.PI / 2,
      slope: 0.02,
    });
    expect(plane.at(60, 500)!.elevation).toBeCloseTo(101, 12);
    expect(plane.at(60, 500)!.gradientEast).toBeCloseTo(0.02, 15);
    expect(plane.at(60, 500)!.gradientNorth).toBeCloseTo(0, 15);
  });

  it('has the gradient of the triangle that a place lies in, and none beside or in a hole', () => {
    // Two triangles of a square with the ridge between them; the third is vertical and carries no height.
    const tin: Tin = {
      points: Float64Array.of(0, 0, 0, 10, 0, 1, 10, 10, 0, 0, 10, 2),
      triangles: Uint32Array.of(0, 1, 2, 0, 0, 2),
    };
    const surface = tinSurface(tin);
    const height = surface.at(8, 2)!;
    expect(height.elevation).toBeCloseTo(0.8 - 0.2, 12);
    expect(height.gradientEast).toBeCloseTo(0.1, 12);
    expect(height.gradientNorth).toBeCloseTo(-0.1, 12);
    expect(height.triangle).toBe(0);
    expect(surface.at(2, 8)).toBeNull();
    expect(surface.at(11, 5)).toBeNull();
  });

  it('comes back from its bytes, equal content from equal bytes', () => {
    const tin = { points: Float64Array.of(0, 0, 5, 9, 0, 6, 0, 9, 7.5), triangles: Uint32Array.of(0, 1, 2) };
    const bytes = surfaceBytes({ kind: 'tin', tin });
    expect(surfaceBytes({ kind: 'tin', tin: { ...tin, points: tin.points.slice() } })).toEqual(bytes);
    expect(surfaceFromBytes(bytes).at(2, 3)).toEqual(tinSurface(tin).at(2, 3));
    const plane = { easting: 1, northing: 2, elevation: 3, azimuth: 0.4, slope: 0.05 };
    const planeBytes = surfaceBytes({ kind: 'plane', plane });
    expect(surfaceFromBytes(planeBytes).at(7, 8)).toEqual(planeSurface(plane).at(7, 8));
    expect(() => surfaceFromBytes(new Uint8Array(64))).toThrow();
  });
});

describe('the deviation of ground from its layer', () => {
  const level = { elevation: 100, gradientEast: 0, gradientNorth: 0, triangle: null };

  it('is positive where ground is high, and counts the layer’s offset', () => {
    expect(deviationFrom(level, 0, 100.12, null).deviation).toBeCloseTo(0.12, 12);
    expect(deviationFrom(level, -0.5, 99.4, null).deviation).toBeCloseTo(-0.1, 12);
    expect(deviationFrom(level, 0, 100, null).standardDeviation).toBeNull();
  });

  it('is shorter across a slope: 1 : 2 makes 2/√5 of it', () => {
    const slope = { ...level, gradientEast: 0.5 };
    expect(deviationFrom(slope, 0, 101, null).normal).toBeCloseTo(2 / Math.sqrt(5), 12);
  });

  it('has the standard deviation of height minus gradient times place', () => {
    const entry = real(-1, 1);
    fc.assert(
      fc.property(fc.array(entry, { minLength: 9, maxLength: 9 }), entry, entry, (a, east, north) => {
        // Any covariance is AAᵀ; the deviation is the product of (−east, −north, 1) with the place.
        const covariance = Array.from({ length: 9 }, (_, i) => {
          const [r, c] = [Math.floor(i / 3), i % 3];
          return a[3 * r] * a[3 * c] + a[3 * r + 1] * a[3 * c + 1] + a[3 * r + 2] * a[3 * c + 2];
        });
        const along = [0, 1, 2].map((k) => -east * a[k] - north * a[3 + k] + a[6 + k]);
        const design = { ...level, gradientEast: east, gradientNorth: north };
        const { standardDeviation } = deviationFrom(design, 0, 100, covariance);
        expect(standardDeviation).toBeCloseTo(Math.hypot(...along), 6);
      }),
    );
  });
});

describe('conformance with a tolerance', () => {
  const tolerance = { below: 0.1, above: 0.05 };
  const verdict = (deviation: number, u: number | null) => conformance(deviation, u, tolerance);
  // 95 % and 5 % points of the standard normal distribution (tables: Φ(1.64485) = 0.95).
  const Z = 1.6448536269514722;
  const u = 0.01;

  it.each([
    ['above', 0.05, 1],
    ['below', -0.1, -1],
  ])('passes at p = 0.95, holds short of it, and fails from p = 0.05 on, %s', (_, limit, side) => {
    const at = (distance: number) => verdict(limit + side * distance * u, u);
    expect(at(-Z - 1e-6).verdict).toBe('pass');
    expect(at(-Z + 1e-6).verdict).toBe('hold');
    expect(at(-Z).probability).toBeCloseTo(0.95, 9);
    expect(at(0).probability).toBeCloseTo(0.5, 9);
    expect(at(Z - 1e-6).verdict).toBe('hold');
    expect(at(Z + 1e-6).verdict).toBe('fail');
    expect(at(Z).probability).toBeCloseTo(0.05, 9);
  });

  it('is not capable where twice 1.96 u exceeds the tolerance’s width', () => {
    const limit = 0.15 / (2 * 1.959963984540054);
    expect(verdict(0, limit * (1 - 1e-6)).notCapable).toBe(false);
    expect(verdict(0, limit * (1 + 1e-6)).notCapable).toBe(true);
    expect(verdict(-0.025, limit * (1 + 1e-6)).verdict).toBe('hold');
  });

  it('is judged as read without an uncertainty, the limits included', () => {
    for (const none of [null, 0]) {
      expect(verdict(0.05, none)).toMatchObject({ probability: 1, verdict: 'pass', notCapable: false });
      expect(verdict(-0.1, none).verdict).toBe('pass');
      expect(verdict(0.05 + HAIR, none)).toMatchObject({ probability: 0, verdict: 'fail' });
      expect(verdict(-0.1 - HAIR, none).verdict).toBe('fail');
    }
  });

  it('is a probability, largest in the middle of the tolerance', () => {
    fc.assert(
      fc.property(real(-1, 1), real(0.0001, 1), (deviation, uncertainty) => {
        const { probability } = verdict(deviation, uncertainty);
        expect(probability).toBeGreaterThanOrEqual(0);
        expect(probability).toBeLessThanOrEqual(verdict(-0.025, uncertainty).probability + 1e-12);
      }),
    );
  });
});

describe('the trade’s label', () => {
  it.each([
    [0.12, 2, 'C 0.12'],
    [-0.05, 2, 'F 0.05'],
    [0.004, 2, 'GRADE'],
    [-0.004, 2, 'GRADE'],
    [0, 3, 'GRADE'],
    [-0, 3, 'GRADE'],
    [0.0051, 2, 'C 0.01'],
    [-0.0004, 3, 'GRADE'],
    [-0.0006, 3, 'F 0.001'],
    [12.3456, 2, 'C 12.35'],
  ])('of %f to %i places is %s', (deviation, decimals, label) => {
    expect(gradeLabel(deviation, decimals)).toBe(label);
  });
});

describe('a lot', () => {
  const tolerance = { below: 0.1, above: 0.05 };

  it('counts what is within its limits, the limits included', () => {
    expect(isWithin(0.05, tolerance)).toBe(true);
    expect(isWithin(0.05 + HAIR, tolerance)).toBe(false);
    expect(isWithin(-0.1, tolerance)).toBe(true);
    expect(isWithin(-0.1 - HAIR, tolerance)).toBe(false);
  });

  it('has a mean, a standard deviation by n − 1 and a root mean square about zero', () => {
    // 2, 4, 4, 4, 5, 5, 7, 9: mean 5, sum of squares 232, squares about the mean 32.
    const readings = [2, 4, 4, 4, 5, 5, 7, 9].map((v) => v / 100);
    const statistics = deviationStatistics(readings, tolerance);
    expect(statistics.count).toBe(8);
    expect(statistics.mean).toBeCloseTo(0.05, 12);
    expect(statistics.standardDeviation).toBeCloseTo(Math.sqrt(32 / 7) / 100, 12);
    expect(statistics.rmse).toBeCloseTo(Math.sqrt(29) / 100, 12);
    expect(statistics.withinTolerance).toBe(6);
  });

  it('states no spread of one reading, no percentage of two, and nothing of none', () => {
    const of = (readings: number[]) => deviationStatistics(readings, tolerance);
    expect(of([])).toMatchObject({ count: 0, mean: null, standardDeviation: null, rmse: null });
    expect(of([0.01])).toMatchObject({ mean: 0.01, standardDeviation: null, percentWithinLimits: null });
    expect(of([0.01, 0.02]).percentWithinLimits).toBeNull();
    expect(of([0.01, 0.01, 0.01]).percentWithinLimits).toBe(100);
    expect(of([0.06, 0.06, 0.06]).percentWithinLimits).toBe(0);
  });

  it('passes the window rule where every run of readings holds enough', () => {
    const rule = (text: string) =>
      windowRule(
        [...text].map((c) => c === '+'),
        4,
        5,
      );
    expect(rule('++++')).toBeNull();
    expect(rule('++++-')).toBe(true);
    expect(rule('+++--')).toBe(false);
    expect(rule('-++++-++++')).toBe(true);
    // Eight of ten are within, but the fifth to ninth hold two outside.
    expect(rule('+++++-++-+')).toBe(false);
  });

  it('passes the window rule as counting every window by itself does', () => {
    const list = fc.array(fc.boolean(), { minLength: 5, maxLength: 60 });
    fc.assert(
      fc.property(list, fc.integer({ min: 1, max: 5 }), (within, required) => {
        const windows = within.slice(4).map((_, i) => within.slice(i, i + 5).filter(Boolean).length);
        expect(windowRule(within, required, 5)).toBe(windows.every((inside) => inside >= required));
      }),
    );
  });
});

describe('a cutting edge on a mark', () => {
  it('passes at the tolerance and fails beyond, low and high', () => {
    expect(benchReading(100, [100.05], 0.05 + 1e-12).verdict).toBe('pass');
    expect(benchReading(100, [100.0500001], 0.05).verdict).toBe('fail');
    const low = benchReading(100, [99.88, 99.88], 0.05);
    expect(low.verdict).toBe('fail');
    expect(low.difference).toBeCloseTo(-0.12, 12);
  });

  it('holds where its repeats differ by more than the tolerance', () => {
    expect(benchReading(0, [0.02, -0.02], 0.04)).toMatchObject({ verdict: 'pass', unsteady: false });
    expect(benchReading(0, [0.0201, -0.02], 0.04)).toMatchObject({ verdict: 'hold', unsteady: true });
    expect(benchReading(100, [100.01], 0.05).spread).toBeNull();
  });

  it('is off by an offset either way, within the tolerance, and never by an offset of zero', () => {
    for (const offset of [-0.5, 0.5]) {
      expect([0.45, 0.5, 0.55, -0.5].map((d) => isOffByOffset(d, offset, 0.05))).toEqual(Array(4).fill(true));
      expect([0.449, 0.551, 0].map((d) => isOffByOffset(d, offset, 0.05))).toEqual(Array(3).fill(false));
    }
    expect(isOffByOffset(0.01, 0, 0.05)).toBe(false);
    expect(isOffByOffset(0.5, null, 0.05)).toBe(false);
  });

  it('shows a gross error where no repeat comes near, and metres among feet', () => {
    expect(isGross(100, [100 + GROSS_ERROR])).toBe(false);
    expect(isGross(100, [100.7, 99.2])).toBe(true);
    expect(isGross(100, [10, 100])).toBe(false);
    expect(benchMixUp(377.5, 1238.44)).toBe('metresAsFeet');
    expect(benchMixUp(1238.44, 377.5)).toBe('feetAsMetres');
    expect(benchMixUp(1230, 1238.44)).toBeNull();
  });
});
