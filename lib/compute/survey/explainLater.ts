import { globalTest } from '@/lib/compute/adjustment/globalTest';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import { solve } from '@/lib/compute/adjustment/solve';
import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import { logEvidenceOfFaults } from '@/lib/compute/statistics/evidence';
import type { FittedSetup, LaterShots } from './checkShots';
import { quadraticForm } from './displacement';
import { type EstimatedFault, movedStation, suspected } from './drift';
import { type Candidate, type Explanation, NOTHING_TO_EXPLAIN, noSingleFault, weighed } from './explain';
import { type LaterModel, laterModel, movable } from './laterModel';
import { AXIS, EASTING, NORTHING, ORIENTATION } from './stationModel';
import { USUAL } from './suspicions';

/** A shift is told where chance shows one so large once in a hundred times. */
const TOLD = 0.99;

const USUAL_MOVE: Readonly<Record<number, number>> = {
  [EASTING]: USUAL.shift,
  [NORTHING]: USUAL.shift,
  [AXIS]: USUAL.sinking,
  [ORIENTATION]: USUAL.turn,
};

/**
 * What would explain that later shots do not agree with a setup whose own shots agree among themselves: the instrument
 * has moved, all of them with it; one mark has moved, or one target height is wrong. Weighed as the faults of a fit are.
 */
export function explainLater(input: LaterShots & FittedSetup): Explanation[] {
  const model = ifDetermined(() => laterModel(input));
  if (!model) return [...NOTHING_TO_EXPLAIN];
  const { weightedSquares, degreesOfFreedom } = solve(model, new Float64Array(model.unknowns));
  if (globalTest(weightedSquares, degreesOfFreedom).passed) return [...NOTHING_TO_EXPLAIN];
  return weighed([
    ...noSingleFault(weightedSquares, degreesOfFreedom),
    ...instrumentMoved(input, model),
    ...marksMoved(model),
  ]);
}

function instrumentMoved(input: LaterShots & FittedSetup, model: LaterModel): Candidate[] {
  const marks = new Set(model.sights.map(({ mark }) => mark.name));
  const height = input.heightDetermined && model.sights.some(({ mark }) => mark.elevation !== null);
  const unknowns = movable(height).filter(
    (unknown) => marks.size > 1 || unknown === AXIS || unknown === ORIENTATION,
  );
  const moved = movedStation(input, unknowns);
  if (!moved) return [];
  const evidence = evidenceOf(
    moved,
    unknowns.map((unknown) => USUAL_MOVE[unknown]),
  );
  if (evidence === null) return [];
  const turn = moved.estimate[unknowns.indexOf(ORIENTATION)];
  return [{ fault: 'instrumentMoved', subject: [], size: shiftOf(moved, unknowns), turn, evidence }];
}

/** How far the instrument has gone, m; null where that is no more than chance and it has only turned. */
function shiftOf({ estimate, covariance, variance }: EstimatedFault, unknowns: readonly number[]) {
  const parts = unknowns.flatMap((unknown, i) => (unknown === ORIENTATION ? [] : i));
  const shift = Float64Array.from(parts, (i) => estimate[i]);
  const own = Float64Array.from(
    parts.flatMap((i) => parts.map((j) => variance * covariance[i * unknowns.length + j])),
  );
  const told = parts.length > 0 && quadraticForm(shift, own) > chiSquareQuantile(TOLD, parts.length);
  return told ? Math.hypot(...shift) : null;
}

/** Each mark, or the height at it, for itself: as shot minus as published. */
function marksMoved(model: LaterModel): Candidate[] {
  const names = [...new Set(model.sights.map(({ mark }) => mark.name))];
  return names.flatMap((name): Candidate[] => {
    const rows = model.rowsOfSight.flatMap((own, i) => (model.sights[i].mark.name === name ? own : []));
    const entriesOf = (axes: readonly number[]) =>
      rows.flatMap(({ row, place }) =>
        axes.flatMap((axis, fault) => (axis < place.length ? { row, fault, coefficient: place[axis] } : [])),
      );
    const hasHeight = rows.some(({ place }) => place.length === 3);
    const candidate = (
      fault: 'targetMoved' | 'heightOfTargetOrMark',
      axes: readonly number[],
      usual: readonly number[],
      sizeOf: (estimate: readonly number[]) => number,
    ): Candidate[] => {
      const found = suspected(model, entriesOf(axes), axes.length);
      const evidence = found && evidenceOf(found, usual);
      if (!found || evidence === null) return [];
      return [{ fault, subject: [name], size: sizeOf(found.estimate), evidence }];
    };
    const moved = [USUAL.moved, USUAL.moved, ...(hasHeight ? [USUAL.lifted] : [])];
    return [
      ...candidate('targetMoved', [...moved.keys()], moved, (estimate) => Math.hypot(...estimate)),
      ...(hasHeight ? candidate('heightOfTargetOrMark', [2], [USUAL.height], ([up]) => up) : []),
    ];
  });
}

function evidenceOf({ estimate, covariance, weightedSquares }: EstimatedFault, usual: readonly number[]) {
  return ifDetermined(() => logEvidenceOfFaults(weightedSquares, { estimate, covariance, usual }));
}
