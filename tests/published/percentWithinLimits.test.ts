import { describe, expect, it } from 'vitest';
import { deviationStatistics, percentUnder } from '@/lib/compute/grade/acceptance';

/** Quality index at which so many percent lie within the limit, by bisection. */
function indexOf(percent: number, n: number): number {
  let [low, high] = [0, 3];
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (percentUnder(middle, n) < percent) low = middle;
    else high = middle;
  }
  return low;
}

// FHWA Technical Advisory T 5080.12, Table 1B (fhwa.dot.gov/legsregs/directives/techadvs/508012tb.htm), standard
// deviation method, rows 73 to 57: quality index for n = 3, 4, 5, 6, 7, 8, 9 and 10 to 11. At 67 % and n = 5 the
// table prints 0.47, which is a misprint of 0.48 (0.4836).
const TABLE_1B: Record<number, number[]> = {
  73: [0.76, 0.69, 0.66, 0.65, 0.64, 0.63, 0.63, 0.63],
  72: [0.74, 0.66, 0.63, 0.62, 0.61, 0.6, 0.6, 0.6],
  71: [0.71, 0.63, 0.6, 0.59, 0.58, 0.57, 0.57, 0.57],
  70: [0.68, 0.6, 0.57, 0.56, 0.55, 0.55, 0.54, 0.54],
  69: [0.65, 0.57, 0.54, 0.53, 0.52, 0.52, 0.51, 0.51],
  68: [0.62, 0.54, 0.51, 0.5, 0.49, 0.49, 0.48, 0.48],
  67: [0.59, 0.51, 0.48, 0.47, 0.46, 0.46, 0.46, 0.45],
  66: [0.56, 0.48, 0.45, 0.44, 0.44, 0.43, 0.43, 0.43],
  65: [0.52, 0.45, 0.43, 0.41, 0.41, 0.4, 0.4, 0.4],
  64: [0.49, 0.42, 0.4, 0.39, 0.38, 0.38, 0.37, 0.37],
  63: [0.46, 0.39, 0.37, 0.36, 0.35, 0.35, 0.35, 0.34],
  62: [0.43, 0.36, 0.34, 0.33, 0.32, 0.32, 0.32, 0.32],
  61: [0.39, 0.33, 0.31, 0.3, 0.3, 0.29, 0.29, 0.29],
  60: [0.36, 0.3, 0.28, 0.27, 0.27, 0.27, 0.26, 0.26],
  59: [0.32, 0.27, 0.25, 0.25, 0.24, 0.24, 0.24, 0.24],
  58: [0.29, 0.24, 0.23, 0.22, 0.21, 0.21, 0.21, 0.21],
  57: [0.25, 0.21, 0.2, 0.19, 0.19, 0.19, 0.18, 0.18],
};
const SIZES = [3, 4, 5, 6, 7, 8, 9, 10];

describe('percent within limits, FHWA T 5080.12 table 1B', () => {
  it.each(Object.entries(TABLE_1B))('has the printed quality indices at %s %%', (percent, printed) => {
    expect(SIZES.map((n) => Math.round(100 * indexOf(Number(percent), n)) / 100)).toEqual(printed);
  });

  it('mirrors negative indices', () => {
    for (const n of SIZES) {
      for (const q of [0.2, 0.7, 1.1]) expect(percentUnder(-q, n)).toBeCloseTo(100 - percentUnder(q, n), 10);
    }
  });

  // Closed forms of the symmetric beta model behind AASHTO R 9 (formula from memory, evaluated by hand):
  // n = 4 is 50 + 100Q/3.
  it('is 73.0 at Q = 0.69 with four readings, and 83.636 at Q = 1 with five', () => {
    expect(percentUnder(0.69, 4)).toBeCloseTo(73.0, 3);
    expect(percentUnder(1, 5)).toBeCloseTo(83.636, 3);
  });

  // Quality indices for n = 5 recomputed with scipy.stats.beta.
  it.each([
    [70, 0.572],
    [80, 0.88],
    [85, 1.047],
    [90, 1.229],
    [95, 1.441],
    [99, 1.671],
  ])('is %i %% at Q = %f with five readings', (percent, q) => {
    expect(Math.abs(indexOf(percent, 5) - q)).toBeLessThanOrEqual(0.0005);
  });

  it('adds up what lies within the upper and the lower limit', () => {
    // Four readings with mean 0.005 and s = 0.01: Q upper 1.5 holds all, Q lower 2.5 holds all; then Q upper 0.5.
    const readings = [0.005 + 0.01 * Math.sqrt(1.5), 0.005 - 0.01 * Math.sqrt(1.5), 0.005, 0.005];
    const share = (above: number) =>
      deviationStatistics(readings, { below: 0.02, above }).percentWithinLimits;
    expect(share(0.02)).toBeCloseTo(100, 9);
    expect(share(0.01)).toBeCloseTo(50 + (0.5 * 100) / 3, 9);
  });
});
