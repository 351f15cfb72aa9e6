import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  logEvidence,
  logEvidenceOfFaults,
  logEvidenceOfSpread,
  shares,
} from '@/lib/compute/statistics/evidence';

const positive = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** The widths that a fault's prior is averaged over: as stated where they are defined. */
const WIDTHS = [0.3, 1, 3, 10, 30, 100, 300, 1000];

describe('the evidence of a fault', () => {
  it('is the likelihood averaged over its prior, as summed point by point', () => {
    fc.assert(
      fc.property(positive(-3, 3), positive(0.05, 2), positive(0.5, 3), (estimate, sigma, usual) => {
        let sum = 0;
        const step = sigma / 40;
        for (const width of WIDTHS) {
          const prior = width * usual;
          for (let fault = estimate - 8 * sigma; fault < estimate + 8 * sigma; fault += step) {
            const likelihood = Math.exp(-(((fault - estimate) / sigma) ** 2) / 2);
            const density = Math.exp(-((fault / prior) ** 2) / 2) / (prior * Math.sqrt(2 * Math.PI));
            sum += (likelihood * density * step) / WIDTHS.length;
          }
        }
        const covariance = Float64Array.of(sigma * sigma);
        const found = logEvidenceOfFaults(0, { estimate: [estimate], covariance, usual: [usual] });
        expect(found).toBeCloseTo(Math.log(sum), 5);
      }),
      { numRuns: 50 },
    );
  });

  it('of two parts that do not hang together is that of the one and the other, width by width', () => {
    const one = { estimate: [1.2], covariance: Float64Array.of(0.04), usual: [1] };
    const none = { estimate: [0], covariance: Float64Array.of(1e12), usual: [1] };
    const both = {
      estimate: [...one.estimate, ...none.estimate],
      covariance: Float64Array.of(0.04, 0, 0, 1e12),
      usual: [1, 1],
    };
    // A part that nothing determines costs nothing and gains nothing.
    expect(logEvidenceOfFaults(3, both)).toBeCloseTo(logEvidenceOfFaults(3, one), 6);
  });

  it('is less than that of no fault where there is none, and more where there is a large one', () => {
    const fault = (estimate: number) =>
      logEvidenceOfFaults(8, { estimate: [estimate], covariance: Float64Array.of(1), usual: [30] });
    expect(fault(0.5)).toBeLessThan(logEvidence(8 + 0.5 ** 2));
    expect(fault(12)).toBeGreaterThan(logEvidence(8 + 12 ** 2));
  });
});

describe('the evidence of a larger spread', () => {
  it('beats chance where everything is off together, and not where nothing is', () => {
    expect(logEvidenceOfSpread(8, 8)).toBeLessThan(logEvidence(8));
    expect(logEvidenceOfSpread(800, 8)).toBeGreaterThan(logEvidence(800));
  });
});

describe('shares', () => {
  it('sum to 1 whatever the evidence, and follow the odds where it says nothing', () => {
    fc.assert(
      fc.property(
        fc.array(fc.record({ evidence: positive(-1e6, 1e6), odds: positive(1e-6, 1) }), { minLength: 1 }),
        (models) => {
          expect(shares(models).reduce((a, b) => a + b, 0)).toBeCloseTo(1, 9);
        },
      ),
    );
    expect(
      shares([
        { evidence: -5, odds: 0.3 },
        { evidence: -5, odds: 0.1 },
      ]),
    ).toEqual([expect.closeTo(0.75, 12), expect.closeTo(0.25, 12)]);
  });
});
