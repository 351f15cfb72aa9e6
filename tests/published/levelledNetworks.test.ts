import { describe, expect, it } from 'vitest';
import type { LevelDifference } from '@/lib/compute/survey/networkInput';
import { adjustHeights, heightOf } from '@/tests/compute/heightsOnly';

// Budapest University of Technology and Economics, open lab tutorials, level_net.rst (2012–2014), by the network
// adjustment that level runs go into; the same by the bare engine stands in levelNetworks.test.ts. The standard
// deviation is 0.7 mm per kilometre of length, not of its root.
describe('the levelling network of the Budapest open lab tutorials, as a network of level runs', () => {
  const lines = [
    ['1', '2', -0.749, 1.1],
    ['1', '3', -1.274, 1.8],
    ['1', '4', -2.89, 1.4],
    ['2', '3', -0.53, 1.5],
    ['2', '4', -2.141, 1.9],
    ['3', '4', -1.614, 0.9],
  ] as const;
  const differences = lines.map(
    ([from, to, difference, km]): LevelDifference => ({
      id: `${from}-${to}`,
      from,
      to,
      difference,
      weight: { by: 'sigma', sigma: 0.0007 * km },
    }),
  );
  const { result, point, observation } = adjustHeights([heightOf('4', 101.345, 'held')], differences);

  it('has the printed heights, and their standard deviations with the printed σ₀', () => {
    const printed = { '1': [104.235, 1.13], '2': [103.4868, 1.19], '3': [102.9588, 0.91] } as const;
    for (const [name, [height, sigma]] of Object.entries(printed)) {
      expect(point(name).elevation).toBeCloseTo(height, 4);
      // Printed figures are scaled by σ₀; ours only where the global test fails.
      const scaled = (point(name).sigma / result.scale) * result.test.sigma0;
      expect(Math.abs(scaled * 1000 - sigma)).toBeLessThanOrEqual(0.0051);
    }
    expect(result.test.sigma0).toBeCloseTo(1.654998, 5);
    expect(result.test.degreesOfFreedom).toBe(3);
  });

  // Printed to a tenth; more digits recomputed with numpy.
  it('has the printed redundancy, standardised residuals and detectable errors', () => {
    const redundancy = [0.31403, 0.68648, 0.51121, 0.54656, 0.70735, 0.23438];
    const standardised = [1.8798, 2.0853, 0.0044, 2.5918, 0.7224, 0.5903];
    const detectable = [5.678, 6.284, 5.664, 5.869, 6.534, 5.377];
    differences.forEach(({ id }, i) => {
      const row = observation(id);
      expect(row.redundancy).toBeCloseTo(redundancy[i], 4);
      expect(Math.abs(row.standardised ?? Number.NaN)).toBeCloseTo(standardised[i], 3);
      // Computed with δ₀ = 4.1321; ours is Baarda's rounded 4.13.
      expect(((row.minimalDetectable ?? Number.NaN) * 1000 * 4.1321) / 4.13).toBeCloseTo(detectable[i], 2);
    });
  });
});

// Ghilani, Adjustment Computations, ch. 12, differential levelling example, unit weights (from memory; S₀ from a
// recomputation).
it('has the heights of the unweighted levelling network of Ghilani, chapter 12', () => {
  const lines = [
    ['X', 'A', 5.1],
    ['A', 'Y', 2.34],
    ['Y', 'C', -1.25],
    ['C', 'X', -6.13],
    ['A', 'B', -0.68],
    ['Y', 'B', -3],
    ['B', 'C', 1.7],
  ] as const;
  const { result, point } = adjustHeights(
    [heightOf('X', 100, 'held'), heightOf('Y', 107.5, 'held')],
    lines.map(([from, to, difference]) => ({
      id: `${from}-${to}`,
      from,
      to,
      difference,
      weight: { by: 'setups', setups: 1, sigmaPerSetup: 1 },
    })),
  );
  expect(point('A').elevation).toBeCloseTo(105.141, 3);
  expect(point('B').elevation).toBeCloseTo(104.483, 3);
  expect(point('C').elevation).toBeCloseTo(106.188, 3);
  expect(result.test.sigma0).toBeCloseTo(0.05, 3);
  expect(result.test.degreesOfFreedom).toBe(4);
});
