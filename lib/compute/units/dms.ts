import { ANGLE } from './table';

const SEXAGESIMAL =
  /^\s*(-?)(\d{1,3})(?:\s*[°d-]\s*|\s+)(\d{1,2})(?:\s*['′m-]\s*|\s+)(\d{1,2}(?:\.\d+)?)\s*(?:["″s]|'')?\s*$/;

/**
 * Degrees, minutes and seconds (`124-30-15.2`, `124 30 15.2`, `124°30'15.2"`) to radians; `null` where the text
 * is not of that form or minutes or seconds reach 60.
 */
export function parseDms(text: string): number | null {
  const match = SEXAGESIMAL.exec(text);
  if (!match) return null;
  const [, sign, degrees, minutes, seconds] = match;
  if (Number(minutes) >= 60 || Number(seconds) >= 60) return null;
  const total = Number(degrees) + Number(minutes) / 60 + Number(seconds) / 3600;
  return (sign ? -total : total) * ANGLE.deg;
}
