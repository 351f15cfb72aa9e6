import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { type GlobalTest, globalTest } from '@/lib/compute/adjustment/globalTest';
import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import { solve } from '@/lib/compute/adjustment/solve';
import { conformance } from '@/lib/compute/grade/conformance';
import { COLLIMATION_LIMIT, readingSigma } from './accuracy';

/** One standing of the level between or beside the two pegs, m. */
export interface PegStanding {
  readingA: number;
  distanceA: number;
  readingB: number;
  distanceB: number;
}

export interface PegTest {
  /** B above A, m. */
  heightDifference: number;
  /** Rise of the line of sight per metre, rad: positive where readings are too high. */
  collimation: number;
  standardDeviation: number;
  limit: number;
  verdict: 'pass' | 'hold' | 'fail';
  reasons: PegReason[];
  /** Of the standings among each other; two determine both unknowns and test nothing. */
  test: GlobalTest;
  /** The farthest staff of the last standing, with the reading that an adjusted level shows there. */
  adjustTo: { staff: 'A' | 'B'; read: number; wanted: number };
}

export type PegReason =
  | 'collimation_within'
  | 'collimation_over'
  | 'collimation_unclear'
  | 'method_not_capable'
  | 'standings_disagree';

/** Standings whose differences of distances are alike by less than this, m, tell no collimation. */
export const LEAST_ARM = 1;

/** How far the standings' differences of distances lie apart, m. */
export function pegArm(standings: readonly PegStanding[]): number {
  const arms = standings.map(({ distanceA, distanceB }) => distanceA - distanceB);
  return Math.max(...arms) - Math.min(...arms);
}

/**
 * Two-peg test: from the middle the collimation falls out of the difference of height, from near one peg it stays in
 * (common practice). Every standing gives a − b = Δh + c(dA − dB) once curvature and refraction are off; Δh and c are
 * found by least squares, so that repeats and other standings may come along. Judged with its uncertainty (JCGM 106), which grows
 * by σ₀ where the standings disagree:
 * a level that passes is within the limit at 95 %.
 *
 * @param standings two or more, their arms apart by `LEAST_ARM` at least
 * @param sigma of one-way levelling, m per √m
 * @param curvature what curvature and refraction add to a reading, per m² of distance
 * @param limit largest collimation, rad
 */
export function pegTest(
  standings: readonly PegStanding[],
  sigma: number,
  curvature: number,
  limit = COLLIMATION_LIMIT,
): PegTest {
  const solution = solve(modelOf(standings, sigma, curvature), new Float64Array(2));
  const test = globalTest(solution.weightedSquares, solution.degreesOfFreedom);
  const scale = test.passed ? 1 : test.sigma0;
  const standardDeviation = scale * Math.sqrt(new Cofactors(solution).of(1, 1));
  const [heightDifference, collimation] = solution.unknowns;
  const { verdict, notCapable } = conformance(collimation, standardDeviation, { below: limit, above: limit });
  const reasons: PegReason[] = [];
  if (!test.passed) reasons.push('standings_disagree');
  if (verdict === 'fail') reasons.push('collimation_over');
  else if (verdict === 'hold') reasons.push(notCapable ? 'method_not_capable' : 'collimation_unclear');
  else if (test.passed) reasons.push('collimation_within');
  return {
    heightDifference,
    collimation,
    standardDeviation,
    limit,
    verdict: verdict === 'pass' && !test.passed ? 'hold' : verdict,
    reasons,
    test,
    adjustTo: adjustedReading(standings[standings.length - 1], collimation),
  };
}

function modelOf(standings: readonly PegStanding[], sigma: number, curvature: number): AdjustmentModel {
  const rows = new RowBuilder();
  for (const { distanceA, distanceB } of standings) {
    rows.add([0, 1], Math.hypot(readingSigma(sigma, distanceA), readingSigma(sigma, distanceB)));
  }
  const structure = rows.build();
  return {
    ...structure,
    unknowns: 2,
    shared: 2,
    blocks: Int32Array.of(2),
    linearise(x, coefficients, misclosures) {
      standings.forEach(({ readingA, distanceA, readingB, distanceB }, i) => {
        const arm = distanceA - distanceB;
        const observed = readingA - readingB - curvature * (distanceA ** 2 - distanceB ** 2);
        coefficients[structure.rowStart[i]] = 1;
        coefficients[structure.rowStart[i] + 1] = arm;
        misclosures[i] = observed - (x[0] + arm * x[1]);
      });
    },
  };
}

/** An adjusted level's line is horizontal: curvature and refraction stay in its reading, the collimation does not. */
function adjustedReading(
  { readingA, distanceA, readingB, distanceB }: PegStanding,
  collimation: number,
): PegTest['adjustTo'] {
  return distanceA > distanceB
    ? { staff: 'A', read: readingA, wanted: readingA - collimation * distanceA }
    : { staff: 'B', read: readingB, wanted: readingB - collimation * distanceB };
}
