import type { Lengths } from '@/lib/services/lengths';

/** What a conversion of units leaves over, m. */
const SAME = 1e-6;

/** Whether two offsets are the same. */
export function isSameOffset(a: number, b: number): boolean {
  return Math.abs(a - b) <= SAME;
}

/** An offset with its sign: `−0.50 ft`; more decimals where it would read like another one that it is not. */
export function offsetFigure(offset: number, length: Lengths, other: number | null = null): string {
  const figure = (value: number, decimals?: number) => {
    const sign = value === 0 ? '' : value < 0 ? '−' : '+';
    return `${sign}${length.text(Math.abs(value), decimals)}`;
  };
  if (other === null || isSameOffset(offset, other) || figure(offset) !== figure(other))
    return figure(offset);
  return figure(offset, 6);
}
