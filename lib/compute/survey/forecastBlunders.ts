import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { externalReliability, reliability } from '@/lib/compute/adjustment/reliability';
import type { ReadingKind } from './faces';
import type { AdjustedStation } from './stationAdjustment';
import { AXIS, EASTING, NORTHING } from './stationModel';

/** A reading that bears on the station by less than this for an error of one standard deviation does not, m. */
const NO_BEARING = 1e-9;

export interface Blunder {
  target: string;
  kind: ReadingKind;
  /** The smallest error that would show, rad or m; null where the others do not control the reading. */
  size: number | null;
}

export interface Blunders {
  /** Of each kind the reading in which the largest error may hide. */
  largest: Blunder[];
  /** How far the station may be off by an error in one reading that just does not show, m; null: without limit. */
  undetected: { horizontal: number | null; vertical: number | null };
}

/**
 * How well a setup finds mistakes in single readings (Baarda, A Testing Procedure for Use in Geodetic Networks, 1968):
 * minimal detectable biases, and what they would do to the station where they just stay hidden.
 */
export function blundersOf({ model, solution, readings, erections }: AdjustedStation): Blunders {
  const cofactors = new Cofactors(solution);
  const { minimalDetectable } = reliability(solution, cofactors);
  const largest = new Map<ReadingKind, Blunder & { size: number }>();
  let [horizontal, vertical] = [0, 0];
  for (const [row, { kind, erection }] of readings.entries()) {
    const [east, north, up] = externalReliability(solution, cofactors, row, 1, [EASTING, NORTHING, AXIS]);
    const sigma = 1 / Math.sqrt(model.weights[row]);
    const [across, along] = [Math.hypot(east, north), model.heightDetermined ? Math.abs(up) : 0];
    // The zenith angle to a mark without an elevation, for one, is controlled by nothing and harms nothing.
    if (Math.max(across, along) * sigma < NO_BEARING) continue;
    const size = minimalDetectable[row];
    if (across * sigma >= NO_BEARING) horizontal = Math.max(horizontal, across * size);
    if (along * sigma >= NO_BEARING) vertical = Math.max(vertical, along * size);
    if (size > (largest.get(kind)?.size ?? 0))
      largest.set(kind, { target: erections[erection].target, kind, size });
  }
  return {
    largest: [...largest.values()].map((blunder) => ({ ...blunder, size: finite(blunder.size) })),
    undetected: { horizontal: finite(horizontal), vertical: finite(vertical) },
  };
}

function finite(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
