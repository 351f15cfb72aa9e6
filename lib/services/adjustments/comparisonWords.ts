import type {
  CongruenceTest,
  EpochComparison,
  PointDisplacement,
} from '@/lib/compute/survey/epochComparison';
import { toDegrees } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';

/** Whether the points that were not found moved are known to have stayed. */
const stayed = ({ degreesOfFreedom, passed }: CongruenceTest) => degreesOfFreedom > 0 && passed;

const OBSERVE_MORE =
  'Observe more of the same points in both, three at the least and better five, so that one can be told from the others.';

/** What a comparison of two epochs says as a whole: which points moved, that none did, or that it cannot be told. */
export function wordsOfComparison({
  moved,
  points,
  remaining,
}: Pick<EpochComparison, 'moved' | 'points' | 'remaining'>): { text: string; action: string | null } {
  const count = points.length === 1 ? '1 common point' : `${points.length} common points`;
  if (points.length === 0)
    return { text: 'The two have no point in common: nothing can be compared.', action: null };
  if (moved.length > 0) {
    const rest = stayed(remaining)
      ? 'the others stayed'
      : 'the others do not agree either, and which of them moved cannot be told';
    return {
      text: `Moved: ${moved.join(', ')}; ${rest}.`,
      action:
        'Look at the marks in the field; call them suspect, and set up on the others until they have new coordinates.',
    };
  }
  if (stayed(remaining))
    return {
      text: `None of ${count} has moved beyond what the observations explain.`,
      action: null,
    };
  if (remaining.degreesOfFreedom === 0)
    return {
      text: `The two have ${count}, too little to compare: whether anything moved cannot be told.`,
      action: OBSERVE_MORE,
    };
  return {
    text: `The ${count} no longer lie to each other as they did, but which of them moved cannot be told.`,
    action: OBSERVE_MORE,
  };
}

/** @param remaining the test of the points that were not found moved */
export function wordsOfDisplacement(
  { easting, northing, elevation, moved, name }: PointDisplacement,
  remaining: CongruenceTest,
  length: Lengths,
): string {
  const fine = (metres: number) => length.text(metres, length.unit === 'm' ? 4 : 3);
  const plan =
    easting === null || northing === null
      ? []
      : [
          `${fine(Math.hypot(easting, northing))} in plan towards ${toDegrees((Math.atan2(easting, northing) + 2 * Math.PI) % (2 * Math.PI)).toFixed(0)}°`,
        ];
  const height = elevation === null ? [] : [`${fine(Math.abs(elevation))} ${elevation < 0 ? 'down' : 'up'}`];
  const figures = [...plan, ...height].join(' and ');
  if (moved) return `${name} moved: ${figures}.`;
  if (stayed(remaining)) return `${name} stayed; it differs by ${figures}, as the errors allow.`;
  if (remaining.degreesOfFreedom === 0) return `Whether ${name} moved cannot be told.`;
  return `${name} differs by ${figures}; whether it moved cannot be told.`;
}
