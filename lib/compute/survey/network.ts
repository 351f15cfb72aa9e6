import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { SingularError } from '@/lib/compute/adjustment/model';
import { movableUnknowns } from '@/lib/compute/adjustment/movable';
import { type Removal, snoop } from '@/lib/compute/adjustment/snooping';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { unseenMovements } from './networkDatum';
import { acquitted, grossSuspects, isObserved, judgedByOthers, robustStart } from './networkGross';
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
  if (!bare.observations.some(({ name }) => isObserved(name))) {
    throw new NetworkError('no_observations', [], sourcesOf(input));
  }
  const { names, datum } = unseenMovements(bare);
  if (datum && datum.chosen.length === 0) throw new NetworkError('no_datum');
  const placed: NetworkModel = datum ? { ...bare, datum } : bare;

  if (!input.snooping) {
    const solution = solveOrName(placed, placed.start);
    return {
      model: placed,
      solution,
      cofactors: new Cofactors(solution),
      free: names,
      removals: [],
      ended: null,
    };
  }
  const weights = placed.weights.slice();
  const leave = (removed: readonly Removal[]) => {
    for (const { rows } of removed) for (const row of rows) weights[row] = 0;
  };
  const again = (from: Float64Array) => solveOrName({ ...placed, weights: weights.slice() }, from);
  const begun = solveWithoutGross(placed);
  let { solution } = begun;
  const removals: Removal[] = begun.removals;
  leave(removals);
  let cofactors = new Cofactors(solution);
  const most = Math.max(
    1,
    Math.floor(MOST_REMOVED * bare.observations.filter(({ name }) => isObserved(name)).length),
  );
  // Where the last pass still takes something out, nobody knows what is left.
  let ended: NetworkResult['snoopingEnded'] = 'too_many';
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    const found = snoop(solution, cofactors, bare.suspects, Math.max(0, most - removals.length));
    if (found.removals.length === 0) {
      ended = found.ended;
      break;
    }
    removals.push(...found.removals);
    leave(found.removals);
    solution = again(solution.unknowns);
    cofactors = new Cofactors(solution);
    if (found.ended === 'too_many') break;
  }
  if (removals.length > most) ended = 'too_many';
  return { model: placed, solution, cofactors, free: names, removals, ended };
}

/** σ₀ from which single observations are looked for that least squares would spread over all others. */
const GROSSLY_LARGE = 3;

interface Begun {
  solution: Solution;
  removals: Removal[];
}

/**
 * The solution to begin snooping from: of all observations, or, where they contradict each other too grossly for that, of
 * those that a robust start leaves. What the others then do not contradict comes back.
 */
function solveWithoutGross(model: NetworkModel): Begun {
  let plain: Begun;
  try {
    plain = { solution: solveOrName(model, model.start), removals: [] };
  } catch (error) {
    if (!(error instanceof NetworkError) || error.code !== 'contradiction') throw error;
    const robust = solveRobustly(model);
    if (!robust) throw error;
    return robust;
  }
  const { weightedSquares, degreesOfFreedom } = plain.solution;
  if (!(weightedSquares > GROSSLY_LARGE ** 2 * degreesOfFreedom)) return plain;
  return solveRobustly(model) ?? plain;
}

/** Null where nothing stands out, there is no robust start, or what does is all that determines something. */
function solveRobustly(model: NetworkModel): Begun | null {
  const start = robustStart(model);
  if (!start) return null;
  let gross = grossSuspects(model, start);
  if (gross.length === 0) return null;
  const without = (suspects: readonly number[]) => {
    const weights = model.weights.slice();
    for (const suspect of suspects) for (const row of model.suspects[suspect].rows) weights[row] = 0;
    return solveOrName({ ...model, weights }, start);
  };
  try {
    let solution = without(gross);
    const free = new Set(acquitted(judgedByOthers(model, solution, gross)).map(({ suspect }) => suspect));
    if (free.size > 0) {
      gross = gross.filter((suspect) => !free.has(suspect));
      solution = without(gross);
    }
    return { solution, removals: judgedByOthers(model, solution, gross) };
  } catch (error) {
    if (error instanceof NetworkError) return null;
    throw error;
  }
}

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
