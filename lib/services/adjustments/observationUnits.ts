import type { NetworkObservation } from '@/lib/compute/survey/networkResult';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { LengthUnit } from '@/lib/compute/units/table';
import type { Lengths } from '@/lib/services/lengths';

type Kind = NetworkObservation['kind'];

const ANGLES: ReadonlySet<Kind> = new Set(['direction', 'zenith', 'collimation', 'verticalIndex']);

export type ObservationUnit = 'arcsec' | 'ppm' | 'unit' | LengthUnit;

/** The unit that an observation's figures are answered in, and the way there from SI. */
export function unitOf(kind: Kind, length: Lengths): { unit: ObservationUnit; out: (si: number) => number } {
  if (ANGLES.has(kind)) return { unit: 'arcsec', out: toArcseconds };
  if (kind === 'scale') return { unit: 'ppm', out: (value) => Number((value * 1e6).toPrecision(15)) };
  if (kind === 'refraction') return { unit: 'unit', out: (value) => value };
  return { unit: length.unit, out: (value) => length.out(value) };
}

/** `12.3″`, `0.045 ft`, as sentences carry it. */
export function figureOf({ kind }: Pick<NetworkObservation, 'kind'>, si: number, length: Lengths): string {
  const { unit, out } = unitOf(kind, length);
  if (unit === 'arcsec') return `${out(si).toFixed(1)}″`;
  if (unit === 'ppm') return `${out(si).toFixed(1)} ppm`;
  if (unit === 'unit') return out(si).toFixed(2);
  return length.text(si, length.unit === 'm' ? 4 : 3);
}
