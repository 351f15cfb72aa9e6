const TURN = 2 * Math.PI;

/** The same direction in [0, 2π). */
export function wrapTurn(radians: number): number {
  const wrapped = radians % TURN;
  return wrapped < 0 ? wrapped + TURN : wrapped;
}

/** The same direction in (−π, π]: what a difference of two directions is. */
export function wrapDifference(radians: number): number {
  const wrapped = wrapTurn(radians);
  return wrapped > Math.PI ? wrapped - TURN : wrapped;
}
