import { MILE } from '@/lib/compute/units/table';
import { perRootMetre } from './accuracy';

/** What a run may fail to close by: a figure times the root of its length or of the number of standings. */
export interface LevelLimit {
  per: 'length' | 'setup';
  /** m per √m, or m per √standing. */
  factor: number;
}

/**
 * Third order levelling, 12 mm√km, the same as 0.05 ft√mile (Federal Geodetic Control Committee, Standards and
 * Specifications for Geodetic Control Networks, 1984; from memory). Common practice on a site; editable per project.
 */
export const THIRD_ORDER: LevelLimit = { per: 'length', factor: perRootMetre(12) };

/** A figure per √mile, in metres, as metres per √metre. */
export function perRootMile(metres: number): number {
  return metres / Math.sqrt(MILE);
}

/** The same, back: metres per √mile. */
export function ofRootMile(perRoot: number): number {
  return perRoot * Math.sqrt(MILE);
}

/** @param length of the whole run, m */
export function allowedMisclosure({ per, factor }: LevelLimit, length: number, standings: number): number {
  return factor * Math.sqrt(per === 'length' ? length : standings);
}
