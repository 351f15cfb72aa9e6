import { describe, expect, it } from 'vitest';
import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { globalTest } from '@/lib/compute/adjustment/globalTest';
import { reliability } from '@/lib/compute/adjustment/reliability';
import { solve } from '@/lib/compute/adjustment/solve';
import { linear, type SmallObservation, smallModel } from './smallModel';

/** A levelled height difference between unknowns, or from or to a known height. */
function levelled(from: number | null, to: number | null, known: number, value: number, sigma: number) {
  const terms: Record<number, number> = {};
  let constant = 0;
  if (from === null) constant -= known;
  else terms[from] = -1;
  if (to === null) constant += known;
  else terms[to] = 1;
  return linear(terms, value, sigma, constant);
}

// Budapest University of Technology and Economics, open lab tutorials, level_net.rst (2012–2014): a levelling
// network with data snooping. Printed values; the standard deviation is 0.7 mm per kilometre of length.
describe('levelling network of the Budapest open lab tutorials', () => {
  const mm = 1e-3;
  const known = 101.345;
  const lines = [
    [1, 2, -0.749, 1.1],
    [1, 3, -1.274, 1.8],
    [1, 4, -2.89, 1.4],
    [2, 3, -0.53, 1.5],
    [2, 4, -2.141, 1.9],
    [3, 4, -1.614, 0.9],
  ];
  const unknown = (point: number) => (point === 4 ? null : point - 1);
  const model = smallModel(
    3,
    lines.map(([from, to, dh, km]): SmallObservation => {
      return levelled(unknown(from), unknown(to), known, dh, 0.7 * mm * km);
    }),
  );
  const solution = solve(model, Float64Array.of(104, 103, 102));
  const cofactors = new Cofactors(solution);
  const statistics = reliability(solution, cofactors);
  const { sigma0, value, degreesOfFreedom } = globalTest(solution.weightedSquares, solution.degreesOfFreedom);
  const each = (expected: number[], actual: (i: number) => number, tolerance: number) =>
    expected.forEach((figure, i) => {
      expect(Math.abs(actual(i) - figure), `${figure} at ${i}`).toBeLessThanOrEqual(tolerance);
    });

  it('gives the printed heights and their standard deviations', () => {
    expect(solution.converged).toBe(true);
    each([104.235, 103.4868, 102.9588], (i) => solution.unknowns[i], 0.00005);
    each([1.13, 1.19, 0.91], (i) => (sigma0 * Math.sqrt(cofactors.of(i, i))) / mm, 0.005);
  });

  it('gives the printed corrections, which are fitted minus observed', () => {
    each([0.81, -2.18, 0.0, 2.01, -0.81, 0.18], (i) => -solution.residuals[i] / mm, 0.005);
  });

  it('gives the printed standard deviations of the fitted height differences', () => {
    const { rowStart, columns } = model;
    const fitted = (i: number) =>
      Math.sqrt(cofactors.variance(columns, solution.coefficients, rowStart[i], rowStart[i + 1]));
    each([1.06, 1.17, 1.13, 1.17, 1.19, 0.91], (i) => (sigma0 * fitted(i)) / mm, 0.005);
  });

  it('gives the printed σ₀ and vᵀPv with three degrees of freedom', () => {
    expect(degreesOfFreedom).toBe(3);
    expect(value).toBeCloseTo(8.217, 3);
    expect(sigma0).toBeCloseTo(1.65, 2);
  });

  it('gives the printed redundancy numbers and standardised corrections', () => {
    each([0.3, 0.7, 0.5, 0.5, 0.7, 0.2], (i) => statistics.redundancy[i], 0.05);
    each([1.9, 2.1, 0.0, 2.6, 0.7, 0.6], (i) => Math.abs(statistics.standardised[i]), 0.05);
    each([1.1, 1.3, 0.0, 1.6, 0.4, 0.4], (i) => Math.abs(statistics.standardised[i]) / sigma0, 0.05);
  });

  // The same network recomputed to more digits with numpy (not printed in the source).
  it('gives redundancy, standardised corrections and detectable biases to more digits', () => {
    const redundancy = [0.31403, 0.68648, 0.51121, 0.54656, 0.70735, 0.23438];
    each(redundancy, (i) => statistics.redundancy[i], 5e-6);
    each([1.8798, 2.0853, 0.0044, 2.5918, 0.7224, 0.5903], (i) => Math.abs(statistics.standardised[i]), 5e-5);
    // Computed with δ₀ = 4.1321; the engine's is Baarda's rounded 4.13.
    const bias = (i: number) => (statistics.minimalDetectable[i] * 4.1321) / 4.13 / mm;
    each([5.678, 6.284, 5.664, 5.869, 6.534, 5.377], bias, 0.0006);
    expect(statistics.redundancy.reduce((sum, r) => sum + r, 0)).toBeCloseTo(3, 12);
    expect(sigma0).toBeCloseTo(1.654998, 6);
  });
});

// Ghilani, Adjustment Computations, ch. 12, differential levelling example, unit weights (from memory; S₀ from
// a recomputation).
it('gives the heights of the unweighted levelling network of Ghilani, chapter 12', () => {
  const [X, Y] = [100, 107.5];
  const [A, B, C] = [0, 1, 2];
  const model = smallModel(3, [
    levelled(null, A, X, 5.1, 1),
    levelled(A, null, Y, 2.34, 1),
    levelled(null, C, Y, -1.25, 1),
    levelled(C, null, X, -6.13, 1),
    levelled(A, B, 0, -0.68, 1),
    levelled(null, B, Y, -3.0, 1),
    levelled(B, C, 0, 1.7, 1),
  ]);
  const solution = solve(model, new Float64Array(3));
  expect(solution.unknowns[A]).toBeCloseTo(105.141, 3);
  expect(solution.unknowns[B]).toBeCloseTo(104.483, 3);
  expect(solution.unknowns[C]).toBeCloseTo(106.188, 3);
  expect(solution.degreesOfFreedom).toBe(4);
  expect(Math.sqrt(solution.weightedSquares / 4)).toBeCloseTo(0.05, 2);
});
