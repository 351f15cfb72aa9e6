const TURN = 2 * Math.PI;

/** The same direction in [0, 2π). */
export function wrapTurn(radians: number): number {
  const remainder = radians % TURN;
  const wrapped = remainder < 0 ? remainder + TURN : remainder;
  // A hair under zero plus a turn rounds to the turn itself.
  return wrapped < TURN ? wrapped : 0;
}

/** The same direction in (−π, π]: what a difference of two directions is. */
export function wrapDifference(radians: number): number {
  const wrapped = wrapTurn(radians);
  return wrapped > Math.PI ? wrapped - TURN : wrapped;
}
