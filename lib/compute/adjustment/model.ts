/**
 * What an adjustment solves: minimise Σ pᵢ(ℓᵢ − fᵢ(x))² over the unknowns x.
 *
 * Observations are uncorrelated rows, each touching few unknowns (compressed rows). What several readings have
 * in common — a mark's coordinates, a centring, refraction — is an unknown with a pseudo-observation of its own,
 * so that repeats never shrink it.
 *
 * The unknowns are ordered: first `shared` ones, then blocks. A row touches shared unknowns and at most one
 * block. A problem with few shared unknowns and many small blocks (a setup and its marks) is solved by
 * eliminating block after block; one without blocks (a network) is all shared.
 */
export interface AdjustmentModel {
  readonly unknowns: number;
  /** Unknowns [0, shared) belong to no block. */
  readonly shared: number;
  /** Block b holds the unknowns [blocks[b], blocks[b+1]); blocks[0] = shared, the last entry = unknowns. */
  readonly blocks: Int32Array;
  /** Row i has its entries at [rowStart[i], rowStart[i+1]) of `columns` and of the coefficients. */
  readonly rowStart: Int32Array;
  readonly columns: Int32Array;
  /** pᵢ = 1/σᵢ² with a-priori standard deviations; 0 where a row is left out. */
  readonly weights: Float64Array;
  /**
   * Writes ∂fᵢ/∂x into `coefficients` (aligned with `columns`) and ℓᵢ − fᵢ(x) into `misclosures`, angles
   * wrapped into (−π, π].
   */
  linearise(x: Float64Array, coefficients: Float64Array, misclosures: Float64Array): void;
  /** Where the rows leave the unknowns free to move together: how they are placed all the same. */
  readonly datum?: FreeDatum;
}

/**
 * A free datum: among all solutions, which differ by movements that no row sees, the one in which the corrections of
 * the chosen unknowns to their reference values have the least sum of squares.
 */
export interface FreeDatum {
  /** The movements at x, independent of each other: how much each unknown moves (`unknowns` long). */
  movements(x: Float64Array): Float64Array[];
  readonly chosen: Int32Array;
  /** What corrections count from (`unknowns` long). */
  readonly reference: Float64Array;
}

/** The solution does not exist: some unknown is not determined by the observations. */
export class SingularError extends Error {
  constructor(
    /** The first that was found. */
    readonly unknown: number,
    /** All that can move unseen, as far as they were looked for. */
    readonly movable: readonly number[] = [unknown],
  ) {
    super(`Unknown ${unknown} is not determined by the observations.`);
    this.name = 'SingularError';
  }
}

/** The answer of an attempt, null where the observations do not determine it. */
export function ifDetermined<T>(attempt: () => T): T | null {
  try {
    return attempt();
  } catch (error) {
    if (error instanceof SingularError) return null;
    throw error;
  }
}
