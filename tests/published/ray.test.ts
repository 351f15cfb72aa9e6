import { describe, expect, it } from 'vitest';
import { polarPoint } from '@/lib/compute/survey/polarPoint';
import { offsetFromZenith, rayTo } from '@/lib/compute/survey/ray';
import { DEFAULT_SURROUNDINGS, type Surroundings } from '@/lib/compute/survey/surroundings';
import { fromMetres, toMetres } from '@/lib/compute/units/convert';
import { parseDms } from '@/lib/compute/units/dms';

const DEGREE = Math.PI / 180;
const FLAT: Surroundings = { ...DEFAULT_SURROUNDINGS, earthRadius: 1e15 };

// Geoscience Australia, open geodesy library, tutorial 'EDM Corrections': a plane reduction of 145.2670656 m.
it('reduces a slope distance to the printed 145.2374597 m and −2.9326875 m on a flat earth', () => {
  const { grid, height } = offsetFromZenith(91.15678 * DEGREE, 145.2670656, 0, FLAT);
  expect(Math.abs(grid - 145.2374597)).toBeLessThan(1e-7);
  expect(Math.abs(height - -2.9326875)).toBeLessThanOrEqual(1e-7);
});

// University lecture notes 'Leveling Theory and Trig Leveling' (coursehero.com/file/6257444): curvature and combined
// correction in feet, R = 20,906,000 ft, refraction 0.14 of the curvature.
describe.each([
  [500, 0.005979, 0.005142],
  [1000, 0.023917, 0.020568],
  [2000, 0.095666, 0.082273],
  [5000, 0.597914, 0.514206],
  [10000, 2.391658, 2.056826],
])('a level line over %i ft', (distance, curvature, combined) => {
  const earth: Surroundings = { ...DEFAULT_SURROUNDINGS, earthRadius: 20906000 };

  it.each([
    [0, curvature],
    [0.14, combined],
  ])('with k = %f strikes %f ft above its level', (k, rise) => {
    // What stands so much above the axis' level is seen level: the difference in height at 90° is below 10⁻⁶ ft.
    const ray = rayTo(0, distance, rise, k, earth);
    expect(Math.abs(ray.zenith - Math.PI / 2) * distance).toBeLessThan(1e-6);
  });
});

// Mahun, open-access surveying text, Elevations chapter C, solution (jerrymahun.com, 181-elevations-chap-c-4).
describe('trigonometric levelling of Mahun’s chapter C', () => {
  it.each([
    ['101', '-', '4-24-10', 145.25, 144.82, 756.31],
    ['102', '+', '6-00-25', 89.32, 88.83, 735.81],
    ['103', '+', '2-58-30', 118.95, 118.79, 738.99],
  ])('gives shot %s its printed distance and elevation', (_, side, angle, slope, horizontal, elevation) => {
    const below = (side === '+' ? 1 : -1) * parseDms(angle)!;
    const reading = { direction: 0, zenith: Math.PI / 2 + below, distance: toMetres(slope, 'ft') };
    const axis = toMetres(745.39 + 5.41, 'ft');
    const station = { easting: 0, northing: 0, axis, orientation: 0, refraction: 0.13 };
    const point = polarPoint(
      station,
      { ...reading, targetHeight: toMetres(5.64, 'ft') },
      DEFAULT_SURROUNDINGS,
    );
    expect(Math.abs(fromMetres(point.northing, 'ft') - horizontal)).toBeLessThanOrEqual(0.005);
    expect(Math.abs(fromMetres(point.elevation, 'ft') - elevation)).toBeLessThanOrEqual(0.005);
  });
});
