import type * as z from 'zod';
import { toRadians } from '@/lib/compute/units/convert';
import { parseDms } from '@/lib/compute/units/dms';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { SubmissionUnits } from '@/openapi/schemas/units';

export type Units = z.output<typeof SubmissionUnits>;

const TURN = 2 * Math.PI;

/** A declared angle in radians, or what is wrong with it. */
export function readAngle(
  value: number | string,
  unit: Units['angle'],
  pointer: string,
): number | ProblemItem {
  if (unit === undefined)
    return problemItem('/units/angle', 'units_required', 'An angle was sent, but units.angle is missing.');
  if (unit === 'dms') {
    if (typeof value !== 'string')
      return problemItem(pointer, 'angle_invalid', `${value} is a number; units.angle is dms.`);
    return (
      parseDms(value) ??
      problemItem(
        pointer,
        'angle_invalid',
        `${JSON.stringify(value)} is no angle in degrees, minutes and seconds.`,
      )
    );
  }
  if (typeof value !== 'number') {
    return problemItem(pointer, 'angle_invalid', `${JSON.stringify(value)} is text; units.angle is ${unit}.`);
  }
  return toRadians(value, unit);
}

/** A horizontal circle reading: [0, 360°), a full turn counting as 0. */
export function readHorizontal(
  value: number | string,
  unit: Units['angle'],
  pointer: string,
): number | ProblemItem {
  const angle = readAngle(value, unit, pointer);
  if (typeof angle !== 'number') return angle;
  if (angle < 0 || angle > TURN) {
    return problemItem(
      pointer,
      'angle_out_of_range',
      `${value} is not a horizontal reading between 0 and a full turn.`,
    );
  }
  return angle === TURN ? 0 : angle;
}

/** A zenith reading that fits its face. */
export function readZenith(
  value: number | string,
  unit: Units['angle'],
  face: 'left' | 'right',
  pointer: string,
): number | ProblemItem {
  const angle = readAngle(value, unit, pointer);
  if (typeof angle !== 'number') return angle;
  if (angle <= 0 || angle >= TURN || angle === Math.PI) {
    return problemItem(
      pointer,
      'angle_out_of_range',
      `${value} is no zenith angle: straight up, straight down or beyond a turn.`,
    );
  }
  if (angle < Math.PI !== (face === 'left')) {
    const side = face === 'left' ? 'between 0 and half a turn' : 'between half a turn and a turn';
    return problemItem(pointer, 'face_mismatch', `Face ${face} reads zenith angles ${side}, not ${value}.`);
  }
  return angle;
}
