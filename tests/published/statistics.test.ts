import { describe, expect, it } from 'vitest';
import { ellipseFactor95 } from '@/lib/compute/adjustment/ellipse';
import {
  CRITICAL_W,
  chiSquareQuantile,
  DELTA_0,
  ELLIPSE_95,
  NORMAL_95,
  normalCdf,
} from '@/lib/compute/statistics/distributions';

// Mahun, open-access surveying text, Least Squares Lite, self-study solution 4 (jerrymahun.com, xv-least-squares-lite):
// standard and 95 % axes of two points; 3 degrees of freedom follow from their ratio.
describe('95 % ellipses of Mahun’s least-squares self-study', () => {
  it.each([
    ['G', 0.0075, 0.0066, 0.033, 0.029],
    ['H', 0.0145, 0.0084, 0.0634, 0.037],
  ])('scales the axes of point %s as printed', (_, major, minor, major95, minor95) => {
    const factor = ellipseFactor95(3);
    expect(Math.abs(major * factor - major95)).toBeLessThan(0.0005);
    expect(Math.abs(minor * factor - minor95)).toBeLessThan(0.0005);
  });

  // √(2F₀.₉₅(2, ν)) recomputed with scipy.stats.f.
  it.each([
    [1, 19.975],
    [2, 6.1644],
    [3, 4.3708],
    [4, 3.7267],
    [5, 3.4018],
    [10, 2.8645],
  ])('with %i degrees of freedom the factor is %f', (freedom, factor) => {
    expect(Math.abs(ellipseFactor95(freedom) - factor)).toBeLessThan(0.0005);
  });

  it('is √5.991 = 2.4477 where nothing was estimated', () => {
    expect(ellipseFactor95(null)).toBeCloseTo(2.4477, 4);
    expect(ellipseFactor95(null) ** 2).toBeCloseTo(5.991, 3);
  });
});

// Standard χ² table, NIST/SEMATECH e-Handbook 1.3.6.7.4 (from memory; confirmed with scipy.stats.chi2).
it.each([
  [1, 0.000982, 5.024],
  [3, 0.216, 9.348],
  [10, 3.247, 20.483],
])('χ² with %i degrees of freedom has its 2.5 and 97.5 %% points at %f and %f', (freedom, lower, upper) => {
  expect(Math.abs(chiSquareQuantile(0.025, freedom) - lower)).toBeLessThan(0.0005);
  expect(Math.abs(chiSquareQuantile(0.975, freedom) - upper)).toBeLessThan(0.0005);
});

// Baarda (1968), nomogram values of the B-method (from memory): α₀ = 0.001, power 0.80, δ₀ = 4.13.
it('finds a bias of δ₀ = 4.13 with α₀ = 0.001 and power 0.80', () => {
  expect(DELTA_0).toBe(4.13);
  expect(2 * (1 - normalCdf(CRITICAL_W))).toBeCloseTo(0.001, 5);
  expect(normalCdf(DELTA_0 - CRITICAL_W)).toBeCloseTo(0.8, 3);
});

// FGDC-STD-007.3-1998, National Standard for Spatial Data Accuracy (from memory).
it('has the 95 % multipliers of the NSSDA: 1.9600 for heights, 1.7308 of the radial RMSE', () => {
  expect(NORMAL_95).toBeCloseTo(1.96, 4);
  expect(ELLIPSE_95 / Math.SQRT2).toBeCloseTo(1.7308, 4);
});
