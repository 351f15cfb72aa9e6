import betaCdf from '@stdlib/stats-base-dists-beta-cdf';
import chiSquareQuantileOf from '@stdlib/stats-base-dists-chisquare-quantile';
import normalCdfOf from '@stdlib/stats-base-dists-normal-cdf';

/** Standard normal distribution function Φ(x). */
export function normalCdf(x: number): number {
  return normalCdfOf(x, 0, 1);
}

const quantiles = new Map<string, number>();

/** Quantile of χ² with `degreesOfFreedom`; remembered, since a site asks for the same few again and again. */
export function chiSquareQuantile(probability: number, degreesOfFreedom: number): number {
  const key = `${probability}/${degreesOfFreedom}`;
  let value = quantiles.get(key);
  if (value === undefined) {
    value = chiSquareQuantileOf(probability, degreesOfFreedom);
    if (quantiles.size < 4096) quantiles.set(key, value);
  }
  return value;
}

/**
 * Quantile of Fisher's F with 2 and `degreesOfFreedom` degrees of freedom. With two in the numerator the upper
 * tail is (1 + 2F/ν)^(−ν/2) (Abramowitz and Stegun 26.6.4), so F = ν/2·((1−p)^(−2/ν) − 1).
 */
export function fQuantileTwo(probability: number, degreesOfFreedom: number): number {
  return (degreesOfFreedom / 2) * ((1 - probability) ** (-2 / degreesOfFreedom) - 1);
}

/** Regularised incomplete beta function: distribution function of Beta(a, b). */
export function betaDistribution(x: number, a: number, b: number): number {
  return betaCdf(x, a, b);
}

/** Two-sided 95 % point of the standard normal distribution. */
export const NORMAL_95 = 1.959963984540054;
/** 95 % radius factor of a bivariate normal distribution, √(−2 ln 0.05) = √5.991. */
export const ELLIPSE_95 = Math.sqrt(-2 * Math.log(0.05));
/** Critical standardised residual at α₀ = 0.001, two-sided (Baarda 1968; common practice). */
export const CRITICAL_W = 3.29;
/** Non-centrality δ₀ for α₀ = 0.001 and power 0.80 (Baarda 1968). */
export const DELTA_0 = 4.13;

/** Distribution function of Fisher's F (Abramowitz and Stegun 26.6.2). */
export function fDistribution(f: number, numerator: number, denominator: number): number {
  if (!(f > 0)) return 0;
  const x = (numerator * f) / (numerator * f + denominator);
  return betaDistribution(x, numerator / 2, denominator / 2);
}

/** Quantile of Fisher's F, by bisection of its distribution function. */
export function fQuantile(probability: number, numerator: number, denominator: number): number {
  let [low, high] = [0, 1];
  while (fDistribution(high, numerator, denominator) < probability) high *= 2;
  while (high - low > 1e-12 * high) {
    const middle = (low + high) / 2;
    if (fDistribution(middle, numerator, denominator) < probability) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Upper tail of χ² with one to three degrees of freedom (Abramowitz and Stegun 26.4.4, 26.4.5). */
export function chiSquareTail(value: number, degreesOfFreedom: 1 | 2 | 3): number {
  if (!(value > 0)) return 1;
  if (degreesOfFreedom === 2) return Math.exp(-value / 2);
  const normal = 2 * normalCdf(-Math.sqrt(value));
  if (degreesOfFreedom === 1) return normal;
  return normal + Math.sqrt((2 * value) / Math.PI) * Math.exp(-value / 2);
}
