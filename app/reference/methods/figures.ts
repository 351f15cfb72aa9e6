import { ARCSECOND, LENGTH, MILLIMETRE } from '@/lib/compute/units/table';

/** A figure to so many significant digits, without zeros behind. */
export function figure(value: number, digits = 6): string {
  return String(Number(value.toPrecision(digits))).replace('-', '−');
}

export const arcseconds = (radians: number) => `${figure(radians / ARCSECOND)}″`;
export const millimetres = (metres: number) => `${figure(metres / MILLIMETRE)} mm`;
export const metres = (value: number) => `${figure(value)} m`;
export const feet = (value: number, decimals = 2) => `${(value / LENGTH.ft).toFixed(decimals)} ft`;
export const percent = (share: number) => `${figure(100 * share)} %`;
