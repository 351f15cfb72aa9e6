/**
 * The trade's label of a deviation: `C 0.12` where ground is high and must be cut, `F 0.05` where it is low and
 * must be filled, `GRADE` where it rounds to zero.
 *
 * @param deviation in the unit shown
 */
export function gradeLabel(deviation: number, decimals: number): string {
  const figure = Math.abs(deviation).toFixed(decimals);
  if (Number(figure) === 0) return 'GRADE';
  return `${deviation > 0 ? 'C' : 'F'} ${figure}`;
}
