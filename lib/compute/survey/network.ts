import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { SingularError } from '@/lib/compute/adjustment/model';
import { movableUnknowns } from '@/lib/compute/adjustment/movable';
import { type Removal, snoop } from '@/lib/compute/adjustment/snooping';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { unseenMovements } from './networkDatum';
import type { NetworkInput } from './networkInput';
import { type NetworkModel, networkModel } from './networkModel';
import { setupReadings } from './networkReadings';
import { NetworkReport } from './networkReport';
import { NetworkError, type NetworkResult } from './networkResult';
import { networkStart } from './networkStart';

/** Of the observations, beyond which it is no longer they that are wrong. */
const MOST_REMOVED = 0.1;
/** Removals are computed by updates of a linear model; a solution without them shows whether more are left. */
const MOST_PASSES = 8;

export interface AdjustedNetwork {
  model: NetworkModel;
  solution: Solution;
  cofactors: Cofactors;
  free: NetworkResult['datum']['free'];
  removals: readonly Removal[];
  ended: NetworkResult['snoopingEnded'];
}

/**
 * Adjusts a network of setups, levelled differences and rover positions in one least-squares solution.
 *
 * @throws NetworkError where it cannot be computed at all
 */
export function adjustNetwork(input: NetworkInput): NetworkResult {
  return new NetworkReport(input, solveNetwork(input)).result();
}

/** The adjustment itself, from observations to the solution. */
export function solveNetwork(input: NetworkInput): AdjustedNetwork {
  const readings = input.setups.map(setupReadings);
  const start = networkStart(input, readings);
  if (start.plan.size === 0 && start.heights.size === 0) throw new NetworkError('no_datum');
  const bare = networkModel(input, readings, start);
  if (!bare.observations.some(isObserved)) {
    throw new NetworkError('no_observations', [], sourcesOf(input));
  }
  const { names, datum } = unseenMovements(bare);
  if (datum && datum.chosen.length === 0) throw new NetworkError('no_datum');
  const placed: NetworkModel = datum ? { ...bare, datum } : bare;

  let solution = solveOrName(placed, placed.start);
  let cofactors = new Cofactors(solution);
  if (!input.snooping) {
    return { model: placed, solution, cofactors, free: names, removals: [], ended: null };
  }
  const most = Math.max(1, Math.floor(MOST_REMOVED * bare.observations.filter(isObserved).length));
  const removals: Removal[] = [];
  const weights = placed.weights.slice();
  let ended: NetworkResult['snoopingEnded'] = 'clean';
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const found = snoop(solution, cofactors, bare.suspects, most - removals.length);
    ended = found.ended;
    if (found.removals.length === 0) break;
    removals.push(...found.removals);
    for (const { rows } of found.removals) for (const row of rows) weights[row] = 0;
    solution = solveOrName({ ...placed, weights: weights.slice() }, solution.unknowns);
    cofactors = new Cofactors(solution);
    if (ended === 'too_many') break;
  }
  return { model: placed, solution, cofactors, free: names, removals, ended };
}

const OTHER_KINDS = new Set(['levelDifference', 'position', 'baseline']);

const isObserved = ({ name: { kind, shots } }: NetworkModel['observations'][number]) =>
  shots.length > 0 || OTHER_KINDS.has(kind);

function sourcesOf(input: NetworkInput): string[] {
  return [...input.setups, ...input.levelDifferences, ...input.positions, ...input.baselines].map(
    ({ id }) => id,
  );
}

/** @throws NetworkError that names what is not determined, or what contradicts the rest most */
function solveOrName(model: NetworkModel, start: Float64Array): Solution {
  let solution: Solution;
  try {
    solution = solve(model, start);
  } catch (error) {
    if (!(error instanceof SingularError)) throw error;
    const names = movableUnknowns(model, start).map((unknown) => model.places.names[unknown]);
    throw new NetworkError(
      'not_determined',
      [...new Set(names.flatMap(({ point }) => point ?? []))],
      [...new Set(names.flatMap(({ setup }) => setup ?? []))],
    );
  }
  if (solution.converged) return solution;
  const misfit = new Map<string, number>();
  for (const { name, suspect } of model.observations) {
    for (const row of model.suspects[suspect].rows) {
      const size = Math.abs(solution.residuals[row]) * Math.sqrt(model.weights[row]);
      misfit.set(name.source, Math.max(misfit.get(name.source) ?? 0, size));
    }
  }
  const worst = [...misfit].sort(([, a], [, b]) => b - a).slice(0, 5);
  throw new NetworkError(
    'contradiction',
    [],
    worst.map(([source]) => source),
  );
}
