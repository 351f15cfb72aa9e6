import { describe, expect, it } from 'vitest';
import { isNear } from '@/lib/compute/survey/dangerCircle';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import { circleThrough } from '@/lib/compute/survey/loci';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { StationError } from '@/lib/compute/survey/stationAdjustment';
import { fitStation } from '@/lib/compute/survey/stationFit';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { parseDms } from '@/lib/compute/units/dms';

// Burtch, SURE 215 Surveying Calculations, Three Point Resection Problem (Ferris State University): A, B, C, clockwise
// from P, with the angles APB = 109°30′45″ and BPC = 115°05′20″; P solved by several closed forms.
const PLACES = {
  A: { easting: 1000, northing: 5300 },
  B: { easting: 2200, northing: 6300 },
  C: { easting: 3100, northing: 5000 },
};

function resected(readings: Record<string, number>) {
  const control = new Map(
    Object.entries(PLACES).map(([name, place]): [string, ControlMark] => [
      name,
      {
        ...place,
        name,
        version: 1,
        elevation: null,
        horizontalSigma: 0.002,
        verticalSigma: 0.002,
        status: 'trusted',
      },
    ]),
  );
  const shots = Object.entries(readings).flatMap(([target, direction]) =>
    (['left', 'right'] as const).map(
      (face): Shot => ({
        id: `${target}/${face}`,
        target,
        purpose: 'orient',
        face,
        set: 1,
        direction: direction + (face === 'left' ? 0 : Math.PI),
        zenith: null,
        distance: null,
        targetHeight: 0,
        targetCentringSigma: null,
        targetHeightSigma: null,
      }),
    ),
  );
  return fitStation({
    shots,
    control,
    accuracy: DEFAULT_ACCURACY,
    surroundings: DEFAULT_SURROUNDINGS,
    ppm: null,
  });
}

describe('the three point resection of Burtch', () => {
  const alpha = parseDms('109-30-45')!;
  // 115°05′20″ as the solution takes it, in degrees of four decimals: the last printed digit hangs on it.
  const beta = 115.0889 * (Math.PI / 180);

  it.each([0, 1, 3, 5.9])('finds the printed P = (2128.3903, 5578.1443), the circle turned by %f', (turn) => {
    const { station, test, converged } = resected({ A: turn, B: turn + alpha, C: turn + alpha + beta });
    expect(converged).toBe(true);
    expect(Math.abs(station.easting - 2128.3903)).toBeLessThan(1e-4);
    expect(Math.abs(station.northing - 5578.1443)).toBeLessThan(1e-4);
    expect(test.degreesOfFreedom).toBe(0);
  });

  it('finds the other place, (2071.978, 5585.769), where the angles are exchanged', () => {
    const { station } = resected({ A: 0, B: beta, C: alpha + beta });
    expect(Math.abs(station.easting - 2071.978)).toBeLessThan(1e-3);
    expect(Math.abs(station.northing - 5585.769)).toBeLessThan(1e-3);
  });

  // Derived from the example's marks with numpy: centre, radius, and the distance of P from the centre.
  it('lies well within its danger circle: 0.32 of the radius from the centre', () => {
    const circle = circleThrough(Object.values(PLACES))!;
    expect(Math.abs(circle.easting - 2063.4146)).toBeLessThan(1e-4);
    expect(Math.abs(circle.northing - 5243.9024)).toBeLessThan(1e-4);
    expect(Math.abs(circle.radius - 1064.8932)).toBeLessThan(1e-4);
    const { danger } = resected({ A: 0, B: alpha, C: alpha + beta });
    expect(Math.abs(danger!.distance - (340.4988 - 1064.8932))).toBeLessThan(1e-3);
    expect(isNear(danger!)).toBe(false);
  });

  it.each([30, 100, 200, 260, 320])(
    'is refused on the danger circle, at azimuth %i° of its centre',
    (azimuth) => {
      const angle = (azimuth * Math.PI) / 180;
      const [e, n] = [2063.4146341 + 1064.8932 * Math.sin(angle), 5243.902439 + 1064.8932 * Math.cos(angle)];
      const seen = Object.entries(PLACES).map(([name, { easting, northing }]) => [
        name,
        (Math.atan2(easting - e, northing - n) + 2 * Math.PI) % (2 * Math.PI),
      ]);
      expect(() => resected(Object.fromEntries(seen))).toThrow(
        new StationError('danger_circle', ['A', 'B', 'C']),
      );
    },
  );
});
