import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { type Erection, type FaceErrors, meanFaces, type Reading } from './faces';
import type { InstrumentAccuracy } from './instrument';
import type { ControlMark, Shot } from './shots';
import { startValues } from './startValues';
import { type StationModel, stationModel } from './stationModel';
import type { Surroundings } from './surroundings';

export interface StationInput {
  /** Orientation shots only, to marks of `control`. */
  shots: readonly Shot[];
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Atmospheric correction wanted; null where the atmosphere is unknown. */
  ppm: number | null;
}

export interface AdjustedStation {
  input: StationInput;
  erections: readonly Erection[];
  readings: readonly Reading[];
  faceErrors: FaceErrors | null;
  model: StationModel;
  solution: Solution;
}

/** Why a setup cannot be computed at all. */
export class StationError extends Error {
  constructor(readonly code: 'too_few_sights' | 'zenith_wanted' | 'not_determined') {
    super(code);
    this.name = 'StationError';
  }
}

/**
 * The adjustment of a free station, from shots to the solution.
 *
 * @param maxIterations fewer where only a solution near by is of interest
 * @throws StationError where the shots do not determine a station
 */
export function adjustStation(input: StationInput, maxIterations?: number): AdjustedStation {
  const { control, surroundings, ppm } = input;
  const means = meanFaces(input.shots, input.accuracy, ppm);
  const { erections, faceErrors } = means;
  const readings = reducible(means.readings, erections, control);
  const start = startValues(erections, readings, control, surroundings);
  if (!start)
    throw new StationError(readings.length < means.readings.length ? 'zenith_wanted' : 'too_few_sights');
  const model = stationModel({ ...input, erections, readings, start, atmosphereKnown: ppm !== null });
  return { input, erections, readings, faceErrors, model, solution: solveOrRefuse(model, maxIterations) };
}

/**
 * Leaves out slope distances that cannot be brought to the horizontal: those without a zenith angle, unless both ends
 * have a height, the mark's published and the instrument's from zenith angles to other marks.
 */
function reducible(
  readings: readonly Reading[],
  erections: readonly Erection[],
  control: ReadonlyMap<string, ControlMark>,
): Reading[] {
  const hasElevation = (erection: number) => control.get(erections[erection].target)!.elevation !== null;
  const zeniths = new Set(readings.flatMap(({ kind, erection }) => (kind === 'zenith' ? erection : [])));
  const axisKnown = [...zeniths].some(hasElevation);
  return readings.filter(
    ({ kind, erection }) =>
      kind !== 'distance' || zeniths.has(erection) || (axisKnown && hasElevation(erection)),
  );
}

function solveOrRefuse(model: StationModel, maxIterations?: number): Solution {
  try {
    return solve(model, model.start, { maxIterations });
  } catch (error) {
    if (error instanceof Error && error.name === 'SingularError') throw new StationError('not_determined');
    throw error;
  }
}
