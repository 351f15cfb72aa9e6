import type { Ellipse } from '@/lib/compute/adjustment/ellipse';

export interface CongruenceTest {
  /** dᵀQ⁺d/h. */
  value: number;
  /** 95 % point of F(h, ν), or of χ²(h)/h where the a-priori variance factor stands. */
  critical: number;
  degreesOfFreedom: number;
  /** True too where there is no degree of freedom, so that nothing was tested. */
  passed: boolean;
}

/** How one common point fared between two epochs. */
export interface PointDisplacement {
  name: string;
  /** Later minus earlier, m, in the datum of the points that stayed; null where either epoch lacks it. */
  easting: number | null;
  northing: number | null;
  elevation: number | null;
  /** Of the displacement, 3 × 3 row by row, m²; zero where null. */
  covariance: Float64Array;
  ellipse95: Ellipse;
  /** dᵀQ⁻¹d of the point alone, with its degrees of freedom and its 95 % point. */
  value: number;
  degreesOfFreedom: number;
  critical: number;
  /** Probability that so large a displacement comes about by the errors of the observations alone. */
  probability: number;
  /**
   * Found by the congruence test; else it is part of the datum of the comparison, and stayed where what remained was
   * tested and passed.
   */
  moved: boolean;
}

/** Two epochs of a network compared by the congruence of their common points. */
export interface EpochComparison {
  /** All common points at once. */
  congruence: CongruenceTest;
  /** Those that stayed, after the moved ones were taken out of the datum. */
  remaining: CongruenceTest;
  /** Pooled σ₀ of both epochs where their common global test failed high, else 1: in the covariances. */
  scale: number;
  points: readonly PointDisplacement[];
  /** In the order in which they were found. */
  moved: readonly string[];
  /** Points of only one epoch. */
  onlyBefore: readonly string[];
  onlyAfter: readonly string[];
}
