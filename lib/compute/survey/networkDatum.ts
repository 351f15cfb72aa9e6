import type { AdjustmentModel, FreeDatum } from '@/lib/compute/adjustment/model';
import type { NetworkModel } from './networkModel';
import type { NetworkDatum } from './networkResult';
import { AXES, type UnknownName } from './networkUnknowns';

/** The ways in which a network can move as a whole. */
const MOVEMENTS = ['easting', 'northing', 'elevation', 'rotation'] as const;

/**
 * A movement is unseen where less than this of what it does to the parts of the observations remains in their sums: the
 * square of what rounding leaves, far below anything that is observed.
 */
const UNSEEN = 1e-13;

/** Which movements nothing sees, and the free datum that settles them. */
export interface UnseenMovements {
  names: NetworkDatum['free'];
  datum: FreeDatum | null;
}

/**
 * Finds the movements of the whole network that no row sees: shifts, and the rotation about the vertical. (Scale and
 * tilts are seen by distances and zenith angles.)
 */
export function unseenMovements(model: NetworkModel): UnseenMovements {
  const free = unseen(model, model.start);
  const amounts = free.map(({ amounts: own }) => own);
  const chosen = model.places.freePlaces();
  return {
    names: free.map(({ name }) => name),
    datum:
      free.length === 0
        ? null
        : {
            chosen,
            reference: model.start,
            movements: (x) => {
              const all = wholeMovements(model.places.names, x);
              return amounts.map((own) => {
                const sum = new Float64Array(x.length);
                own.forEach((amount, k) => {
                  if (amount !== 0) for (let i = 0; i < sum.length; i++) sum[i] += amount * all[k][i];
                });
                return sum;
              });
            },
          },
  };
}

/** Each of MOVEMENTS as a change of all unknowns; the rotation is clockwise about the origin of the unknowns. */
function wholeMovements(names: readonly UnknownName[], x: Float64Array): Float64Array[] {
  const movements = MOVEMENTS.map(() => new Float64Array(x.length));
  // An easting turns by its northing, which may be held: pairs are found by their owner.
  const eastingOf = new Map<string, number>();
  const owner = ({ point, setup }: UnknownName) => (point === null ? `setup ${setup}` : `point ${point}`);
  names.forEach((name, i) => {
    if (name.kind === 'easting') eastingOf.set(owner(name), i);
  });
  names.forEach((name, i) => {
    if (name.kind === 'own') return;
    if (name.kind === 'orientation') {
      movements[3][i] = 1;
      return;
    }
    movements[AXES.indexOf(name.kind)][i] = 1;
    if (name.kind !== 'northing') return;
    const easting = eastingOf.get(owner(name));
    if (easting === undefined) return;
    movements[3][easting] = x[i];
    movements[3][i] = -x[easting];
  });
  return movements;
}

/** Combinations of MOVEMENTS that no row sees, by elimination from their sums of squares over all rows. */
function unseen(
  model: AdjustmentModel & Pick<NetworkModel, 'places'>,
  x: Float64Array,
): { name: (typeof MOVEMENTS)[number]; amounts: number[] }[] {
  const movements = wholeMovements(model.places.names, x);
  const { rowStart, columns, weights } = model;
  const coefficients = new Float64Array(columns.length);
  model.linearise(x, coefficients, new Float64Array(weights.length));
  const n = MOVEMENTS.length;
  const gram = MOVEMENTS.map(() => new Array<number>(n).fill(0));
  /** The same with the parts of each row not cancelling. */
  const parts = new Array<number>(n).fill(0);
  const sums = new Array<number>(n).fill(0);
  for (let i = 0; i < weights.length; i++) {
    for (let k = 0; k < n; k++) {
      let [sum, size] = [0, 0];
      for (let e = rowStart[i]; e < rowStart[i + 1]; e++) {
        const part = coefficients[e] * movements[k][columns[e]];
        sum += part;
        size += Math.abs(part);
      }
      sums[k] = sum;
      parts[k] += weights[i] * size * size;
    }
    for (let k = 0; k < n; k++) for (let l = 0; l < n; l++) gram[k][l] += weights[i] * sums[k] * sums[l];
  }

  const pivots: number[] = [];
  const reduced = gram.map((row) => row.slice());
  const left: number[] = [];
  for (let k = 0; k < n; k++) {
    if (parts[k] === 0) continue;
    if (!(reduced[k][k] > UNSEEN * parts[k])) {
      left.push(k);
      continue;
    }
    pivots.push(k);
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const factor = reduced[i][k] / reduced[k][k];
      for (let j = 0; j < n; j++) reduced[i][j] -= factor * reduced[k][j];
    }
  }
  return left.map((k) => {
    const amounts = new Array<number>(n).fill(0);
    amounts[k] = 1;
    for (const pivot of pivots) amounts[pivot] = -reduced[pivot][k] / reduced[pivot][pivot];
    return { name: MOVEMENTS[k], amounts };
  });
}
