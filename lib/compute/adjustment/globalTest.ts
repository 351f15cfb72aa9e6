import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';

export interface GlobalTest {
  /** √(vᵀPv/ν); 1 where nothing is redundant. */
  sigma0: number;
  degreesOfFreedom: number;
  value: number;
  /** 5 % and 95 % points of χ². */
  lower: number;
  upper: number;
  /** Upper-tail test at 95 %: the residuals are no larger than the stated accuracies allow. */
  passed: boolean;
  /** vᵀPv under the lower point: the accuracies are stated too wide, a note and not a fault. */
  low: boolean;
}

/**
 * Global test of an adjustment, vᵀPv against χ² with ν degrees of freedom and an a-priori variance factor of 1
 * (NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.5.8). Without redundancy nothing can be tested: passed.
 */
export function globalTest(weightedSquares: number, degreesOfFreedom: number): GlobalTest {
  if (degreesOfFreedom <= 0) {
    return {
      sigma0: 1,
      degreesOfFreedom: 0,
      value: weightedSquares,
      lower: 0,
      upper: 0,
      passed: true,
      low: false,
    };
  }
  const lower = chiSquareQuantile(0.05, degreesOfFreedom);
  const upper = chiSquareQuantile(0.95, degreesOfFreedom);
  return {
    sigma0: Math.sqrt(weightedSquares / degreesOfFreedom),
    degreesOfFreedom,
    value: weightedSquares,
    lower,
    upper,
    passed: weightedSquares <= upper,
    low: weightedSquares < lower,
  };
}
