import { ASSUMED_SIGHT } from './accuracy';
import type { LevelSight } from './book';
import { stationsOf } from './book';

/** A levelled difference of height between two marks, as a network takes it; metres. */
export interface HeightDifference {
  from: string;
  to: string;
  /** To minus from: collimation, curvature and refraction are taken off. */
  difference: number;
  /** One run over this length; the collimation's own error is not in it. */
  sigma: number;
  /** Backsights and foresights together; 30 m a sight where none was measured. */
  length: number;
  standings: number;
  /** Backsights minus foresights: an error c of the collimation is in the difference with c × arm. */
  arm: number;
  /** Lines of the book that it was read on, the first and the last. */
  lines: readonly [number, number];
}

/** What a run's sights are reduced by, as `LevelRunInput` has it. */
export interface SightReduction {
  sigma: number;
  collimation: number;
  curvature: number;
}

/**
 * Cuts a run at the marks that it turned on. Turning points that are no marks carry names of one day: TP-1 of two runs
 * is not one point, so that they stay inside. Points read between hang on a single reading and are no part of it.
 *
 * @param sights a book without faults
 * @param isMark whether a name stands for one point of the site; both ends count as marks in any case
 */
export function heightDifferences(
  sights: readonly LevelSight[],
  { sigma, collimation, curvature }: SightReduction,
  isMark: (name: string) => boolean,
): HeightDifference[] {
  const measured = sights[0].backsightDistance !== null;
  const found: HeightDifference[] = [];
  let from = 0;
  let sums = { difference: 0, length: 0, standings: 0, arm: 0 };
  for (const { back, fore } of stationsOf(sights)) {
    const b = sights[back].backsightDistance ?? ASSUMED_SIGHT;
    const f = sights[fore].foresightDistance ?? ASSUMED_SIGHT;
    const arm = measured ? b - f : 0;
    const reduction = measured ? collimation * arm + curvature * (b * b - f * f) : 0;
    sums = {
      difference: sums.difference + (sights[back].backsight ?? 0) - (sights[fore].foresight ?? 0) - reduction,
      length: sums.length + b + f,
      standings: sums.standings + 1,
      arm: sums.arm + arm,
    };
    if (fore < sights.length - 1 && !isMark(sights[fore].point)) continue;
    found.push({
      from: sights[from].point,
      to: sights[fore].point,
      ...sums,
      sigma: sigma * Math.sqrt(sums.length),
      lines: [from, fore],
    });
    from = fore;
    sums = { difference: 0, length: 0, standings: 0, arm: 0 };
  }
  return found;
}
