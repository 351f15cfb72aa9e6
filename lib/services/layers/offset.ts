/** What a conversion of units leaves over, m. */
const SAME = 1e-6;

/** Whether two offsets are the same. */
export function isSameOffset(a: number, b: number): boolean {
  return Math.abs(a - b) <= SAME;
}
