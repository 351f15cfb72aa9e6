import { fromMetres, toMetres } from '@/lib/compute/units/convert';
import type { LengthUnit } from '@/lib/compute/units/table';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

/** Lengths between metres inside and one unit outside. */
export class Lengths {
  constructor(readonly unit: LengthUnit) {}

  out(metres: number): number {
    return fromMetres(metres, this.unit);
  }

  outOrNull(metres: number | null): number | null {
    return metres === null ? null : fromMetres(metres, this.unit);
  }

  in(value: number): number {
    return toMetres(value, this.unit);
  }

  /** A figure with its unit, as sentences carry it: `0.09 ft`. */
  text(metres: number, decimals = this.unit === 'm' ? 3 : 2): string {
    return `${fromMetres(metres, this.unit).toFixed(decimals)} ${this.name}`;
  }

  /** Words of the unit: both feet read `ft`; answers name which in `units`. */
  get name(): string {
    return this.unit === 'm' ? 'm' : 'ft';
  }
}

/**
 * A submission in the other foot than the project's frame is nearly always a mistake of the source: it is converted
 * only when that was confirmed. Metres cannot be mistaken for feet unseen.
 */
export function otherFoot(
  projectUnit: LengthUnit,
  sentUnit: LengthUnit,
  confirmed: boolean | undefined,
  pointer: string,
): ProblemItem | null {
  const bothFeet = projectUnit !== 'm' && sentUnit !== 'm';
  if (!bothFeet || projectUnit === sentUnit || confirmed) return null;
  return problemItem(
    pointer,
    'units_conflict',
    `The values are in ${sentUnit}, the project's frame is in ${projectUnit}.`,
  );
}
