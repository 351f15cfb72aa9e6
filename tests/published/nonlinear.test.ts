import { describe, expect, it } from 'vitest';
import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { solve } from '@/lib/compute/adjustment/solve';
import { type SmallObservation, smallModel } from './smallModel';

// NIST Statistical Reference Datasets, nonlinear regression, BoxBOD (higher level of difficulty): certified values.
describe('NIST BoxBOD, y = b₁(1 − exp(−b₂x))', () => {
  const x = [1, 2, 3, 5, 7, 10];
  const y = [109, 149, 149, 191, 213, 224];
  const model = smallModel(
    2,
    x.map(
      (at, i): SmallObservation => ({
        columns: [0, 1],
        value: y[i],
        sigma: 1,
        at: ([b1, b2]) => ({
          value: b1 * (1 - Math.exp(-b2 * at)),
          derivatives: [1 - Math.exp(-b2 * at), b1 * at * Math.exp(-b2 * at)],
        }),
      }),
    ),
  );

  it('comes to the certified values from start 2', () => {
    const solution = solve(model, Float64Array.of(100, 0.75));
    const certified = (value: number, figure: number) => expect(value / figure).toBeCloseTo(1, 8);
    expect(solution.converged).toBe(true);
    expect(solution.degreesOfFreedom).toBe(4);
    certified(solution.unknowns[0], 2.1380940889e2);
    certified(solution.unknowns[1], 5.4723748542e-1);
    certified(solution.weightedSquares, 1.1680088766e3);
    const deviation = Math.sqrt(solution.weightedSquares / 4);
    certified(deviation, 1.7088072423e1);
    const cofactors = new Cofactors(solution);
    certified(deviation * Math.sqrt(cofactors.of(0, 0)), 1.2354515176e1);
    certified(deviation * Math.sqrt(cofactors.of(1, 1)), 1.0455993237e-1);
  });

  // Start 1 is meant to be hard: Gauss-Newton runs into the plateau of large b₂.
  it('says from start 1 that it did not converge', () => {
    expect(solve(model, Float64Array.of(1, 1)).converged).toBe(false);
  });
});
