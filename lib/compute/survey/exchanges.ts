import { LENGTH } from '@/lib/compute/units/table';
import type { ControlMark } from './shots';
import { type AdjustedStation, adjustStation, StationError } from './stationAdjustment';

/** The same shots to marks that stand elsewhere. */
export interface Exchange {
  fault: 'targetsSwapped' | 'wrongFoot';
  subject: string[];
  weightedSquares: number;
}

/** Marks among which exchanges are tried: of more, those that fit worst. */
const MOST_MARKS = 10;
/** The right exchange fits at once; what needs more steps is a wrong one. */
const MAX_ITERATIONS = 6;
/** A shift by the other foot below so many standard deviations of the mark shows in nothing. */
const TELLING = 4;

/** Setups in which two targets carry each other's name, or one mark came in the other foot. */
export function exchangesOf(adjusted: AdjustedStation): Exchange[] {
  const { control } = adjusted.input;
  const marks = worstFitting(adjusted).map((name) => control.get(name)!);
  const exchanges: Exchange[] = [];
  const attempt = (fault: Exchange['fault'], changed: ControlMark[]) => {
    const weightedSquares = squaresWith(adjusted, changed);
    if (weightedSquares !== null)
      exchanges.push({ fault, subject: changed.map(({ name }) => name), weightedSquares });
  };
  marks.forEach((one, i) => {
    for (const other of marks.slice(i + 1))
      attempt('targetsSwapped', [placed(one, other), placed(other, one)]);
    for (const ratio of [LENGTH.ftUS / LENGTH.ft, LENGTH.ft / LENGTH.ftUS]) {
      const shift = Math.hypot(one.easting, one.northing) * Math.abs(ratio - 1);
      if (shift > TELLING * one.horizontalSigma) attempt('wrongFoot', [scaled(one, ratio)]);
    }
  });
  return exchanges;
}

function placed(mark: ControlMark, at: ControlMark): ControlMark {
  const { easting, northing, elevation, horizontalSigma, verticalSigma } = at;
  return { ...mark, easting, northing, elevation, horizontalSigma, verticalSigma };
}

function scaled(mark: ControlMark, ratio: number): ControlMark {
  const { easting, northing, elevation } = mark;
  return {
    ...mark,
    easting: easting * ratio,
    northing: northing * ratio,
    elevation: elevation === null ? null : elevation * ratio,
  };
}

/** vᵀPv of the same shots with some marks elsewhere; null where that makes no setup. */
function squaresWith({ input }: AdjustedStation, changed: readonly ControlMark[]): number | null {
  const control = new Map(input.control);
  for (const mark of changed) control.set(mark.name, mark);
  try {
    const { solution } = adjustStation({ ...input, control }, MAX_ITERATIONS);
    return solution.converged ? solution.weightedSquares : null;
  } catch (error) {
    if (error instanceof StationError) return null;
    throw error;
  }
}

function worstFitting({ model, solution }: AdjustedStation): string[] {
  if (model.marks.length <= MOST_MARKS) return [...model.marks];
  const squares = new Float64Array(model.marks.length);
  for (let row = 0; row < model.weights.length; row++) {
    const block = solution.normals.rowBlock(row);
    if (block >= 0) squares[block] += model.weights[row] * solution.residuals[row] ** 2;
  }
  return model.marks
    .map((name, block) => ({ name, squares: squares[block] }))
    .sort((a, b) => b.squares - a.squares)
    .slice(0, MOST_MARKS)
    .map(({ name }) => name);
}
