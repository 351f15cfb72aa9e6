import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Station } from '@/lib/compute/survey/polarPoint';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { accuracyAtWork } from '@/lib/compute/survey/workAccuracy';

const RADIUS = 150;
const real = (min: number, max: number) => fc.double({ min, max, noNaN: true });

function station(covariance: ArrayLike<number>): Station {
  return { easting: 0, northing: 0, axis: 0, orientation: 1, refraction: 0.13, covariance };
}

/** A diagonal covariance of easting, northing, axis, orientation and refraction. */
function diagonal(...variances: number[]): Float64Array {
  const covariance = new Float64Array(25);
  for (const [i, variance] of variances.entries()) covariance[6 * i] = variance;
  return covariance;
}

describe('the accuracy of a point at the working radius', () => {
  const at = (covariance: ArrayLike<number>, zenith = 0, factor = 1) =>
    accuracyAtWork(station(covariance), zenith, RADIUS, { ...DEFAULT_SURROUNDINGS, combinedFactor: factor });

  it('is 1.96 standard deviations of the station where nothing else errs', () => {
    expect(at(diagonal(0.003 ** 2, 0.002 ** 2, 0.004 ** 2)).horizontal).toBeCloseTo(1.96 * 0.003, 6);
    expect(at(diagonal(0.003 ** 2, 0.002 ** 2, 0.004 ** 2)).vertical).toBeCloseTo(1.96 * 0.004, 6);
  });

  it('has the orientation and the zenith angle as levers of the radius, the grid’s for the one', () => {
    expect(at(diagonal(0, 0, 0, 1e-10)).horizontal).toBeCloseTo(1.96 * 150e-5, 6);
    expect(at(diagonal(0, 0, 0, 1e-10), 0, 0.9).horizontal).toBeCloseTo(1.96 * 135e-5, 6);
    expect(at(diagonal(), 1e-5).vertical).toBeCloseTo(1.96 * 150e-5, 6);
  });

  it('has refraction with half the radius squared over the earth’s', () => {
    const { vertical } = at(diagonal(0, 0, 0, 0, 0.09));
    expect(vertical).toBeCloseTo((1.959964 * 0.3 * RADIUS ** 2) / 2 / 6371008.8, 9);
  });

  it('is the worst over all rays and directions, to a thousandth', () => {
    const root = fc.array(real(-1, 1), { minLength: 16, maxLength: 16 });
    fc.assert(
      fc.property(root, (a) => {
        // Any covariance of easting, northing and orientation is AAᵀ.
        const scale = [0.003, 0.003, 0, 3e-5];
        const row = (i: number) => [0, 1, 2, 3].map((k) => scale[i] * a[4 * i + k]);
        const covariance = new Float64Array(25);
        for (let i = 0; i < 4; i++) {
          for (let j = 0; j < 4; j++) {
            covariance[5 * i + j] = row(i).reduce((sum, value, k) => sum + value * row(j)[k], 0);
          }
        }
        let worst = 0;
        for (let ray = 0; ray < 180; ray++) {
          const azimuth = (ray * Math.PI) / 90;
          const lever = [RADIUS * Math.cos(azimuth), -RADIUS * Math.sin(azimuth)];
          for (let d = 0; d < 90; d++) {
            const [s, c] = [Math.sin((d * Math.PI) / 90), Math.cos((d * Math.PI) / 90)];
            const along = [s, c, 0, s * lever[0] + c * lever[1]];
            const combined = [0, 1, 2, 3].map((k) =>
              along.reduce((sum, value, i) => sum + value * row(i)[k], 0),
            );
            worst = Math.max(worst, Math.hypot(...combined));
          }
        }
        const { horizontal } = at(covariance);
        expect(horizontal / (1.959964 * worst)).toBeGreaterThan(0.997);
        expect(horizontal / (1.959964 * worst)).toBeLessThan(1.001);
      }),
      { numRuns: 20, seed: 4 },
    );
  });
});
