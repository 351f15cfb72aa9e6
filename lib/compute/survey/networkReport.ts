import { ellipseFactor95, standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { type GlobalTest, globalTest } from '@/lib/compute/adjustment/globalTest';
import { ErrorTests } from '@/lib/compute/adjustment/suspects';
import { DELTA_0 } from '@/lib/compute/statistics/distributions';
import { wrapTurn } from '@/lib/compute/units/angles';
import type { AdjustedNetwork } from './network';
import { axisKey, pointKey } from './networkHeights';
import type { NetworkInput } from './networkInput';
import type { ModelObservation } from './networkModel';
import type {
  AdjustedPoint,
  AdjustedSetup,
  NetworkObservation,
  NetworkResult,
  PointEffect,
  RemovedObservation,
} from './networkResult';
import { ABSENT, AXES, type Place } from './networkUnknowns';

/** Says in plain data what a solved network found. */
export class NetworkReport {
  private readonly test: GlobalTest;
  private readonly scale: number;
  private readonly tests: ErrorTests;
  private readonly out: ReadonlySet<number>;

  constructor(
    private readonly input: NetworkInput,
    private readonly adjusted: AdjustedNetwork,
  ) {
    const { solution, cofactors, model, removals } = adjusted;
    this.test = globalTest(solution.weightedSquares, solution.degreesOfFreedom);
    this.scale = this.test.passed ? 1 : this.test.sigma0;
    this.tests = new ErrorTests(model.suspects, solution, cofactors);
    this.out = new Set(removals.map(({ suspect }) => suspect));
  }

  result(): NetworkResult {
    const { solution, model, free, ended } = this.adjusted;
    return {
      converged: solution.converged,
      iterations: solution.iterations,
      unknowns: model.unknowns,
      test: this.test,
      scale: this.scale,
      datum: { free, held: model.places.count('held'), weighted: model.places.count('weighted') },
      points: this.points(),
      setups: this.setups(),
      observations: model.observations.map((observation) => this.observation(observation)),
      removed: this.removed(),
      snoopingEnded: ended,
      leftOut: model.leftOut,
    };
  }

  private value(place: Place, axis: (typeof AXES)[number]): number {
    const { model, solution } = this.adjusted;
    const own = place >= 0 ? solution.unknowns[place] : model.places.constants[-1 - place];
    return own + model.places.origin[axis];
  }

  private covariance(places: readonly Place[]): Float64Array {
    const { cofactors } = this.adjusted;
    return Float64Array.from({ length: 9 }, (_, k) => {
      const [a, b] = [places[Math.floor(k / 3)], places[k % 3]];
      return a >= 0 && b >= 0 ? cofactors.of(a, b) * this.scale * this.scale : 0;
    });
  }

  private spread(places: readonly Place[]): Pick<AdjustedSetup, 'covariance' | 'ellipse95'> {
    const covariance = this.covariance(places);
    const axes = standardEllipse(covariance[0], covariance[4], covariance[1]);
    const factor = ellipseFactor95(this.test.passed ? null : this.test.degreesOfFreedom);
    return {
      covariance,
      ellipse95: { ...axes, semiMajor: axes.semiMajor * factor, semiMinor: axes.semiMinor * factor },
    };
  }

  private points(): AdjustedPoint[] {
    const { model } = this.adjusted;
    const given = new Map(this.input.points.map((point) => [point.name, point]));
    const names = new Set([...given.keys(), ...model.places.pointNames()]);
    return [...names].map((name): AdjustedPoint => {
      const places = model.places.made('point', name).slice();
      if (!model.heights.isBased(pointKey(name))) places[2] = ABSENT;
      const at = AXES.map((axis, i) => (places[i] === ABSENT ? null : this.value(places[i], axis)));
      const shift = AXES.map((axis, i) => {
        const from = given.get(name)?.[axis] ?? null;
        return at[i] === null || from === null ? null : at[i] - from;
      });
      const { covariance, ellipse95 } = this.spread(places);
      return {
        name,
        horizontalDatum: model.places.datum(name, 'easting'),
        verticalDatum: model.places.datum(name, 'elevation'),
        easting: at[0],
        northing: at[1],
        elevation: at[2],
        shift: { easting: shift[0], northing: shift[1], elevation: shift[2] },
        covariance,
        ellipse95,
        elevationSigma: Math.sqrt(covariance[8]),
      };
    });
  }

  private setups(): AdjustedSetup[] {
    const { model, solution } = this.adjusted;
    return this.input.setups.flatMap(({ id, occupied, instrumentHeight }): AdjustedSetup | [] => {
      const station = model.places.made('station', id);
      const point = occupied === null ? station : model.places.made('point', occupied);
      if (point[0] === ABSENT) return [];
      const overPoint = station[2] === ABSENT && occupied !== null;
      const based = model.heights.isBased(axisKey(id));
      const up = !based ? ABSENT : overPoint ? point[2] : station[2];
      const own = model.instrumentHeights.get(id) ?? ABSENT;
      const rise = overPoint ? (instrumentHeight ?? 0) + (own >= 0 ? solution.unknowns[own] : 0) : 0;
      const orientation = model.orientations.get(id);
      return {
        id,
        occupied,
        easting: this.value(point[0], 'easting'),
        northing: this.value(point[1], 'northing'),
        axis: up === ABSENT ? null : this.value(up, 'elevation') + rise,
        orientation: orientation === undefined ? null : wrapTurn(solution.unknowns[orientation]),
        ...this.spread([point[0], point[1], up]),
      };
    });
  }

  private observation(observation: ModelObservation): NetworkObservation {
    const { model, solution } = this.adjusted;
    const { name, sigma, suspect, error, factors } = observation;
    const { kind, source, from, to, component, set, shots } = name;
    const { rows } = model.suspects[suspect];
    let residual = 0;
    for (let i = 0; i < rows.length; i++) residual += factors[i] * solution.residuals[rows[i]];
    const removed = this.out.has(suspect);
    const test = this.tests.test(suspect, error);
    const tested = !removed && !Number.isNaN(test.standardised);
    const { redundancy, standardised } = test;
    const minimalDetectable = tested ? DELTA_0 * test.sigma : null;
    return {
      kind,
      source,
      from,
      to,
      component,
      set,
      shots,
      sigma,
      residual,
      redundancy: removed ? null : redundancy,
      standardised: tested ? standardised : null,
      minimalDetectable,
      effect: minimalDetectable === null ? null : this.effect(observation, minimalDetectable),
      biasToNoise: tested ? DELTA_0 * Math.sqrt((1 - redundancy) / redundancy) : null,
      removed,
    };
  }

  /** QAᵀPc∇ at the points that the observation touches (Baarda 1968), the one that moves most. */
  private effect({ name, suspect, error }: ModelObservation, bias: number): PointEffect | null {
    const { model, solution, cofactors } = this.adjusted;
    const { rows, errors } = model.suspects[suspect];
    let most: PointEffect | null = null;
    let length = -1;
    const shift = [0, 0, 0];
    for (const neighbour of name.near) {
      const places = model.places.made(neighbour.of, neighbour.name);
      shift.fill(0);
      for (let axis = name.kind === 'levelDifference' ? 2 : 0; axis < 3; axis++) {
        if (places[axis] < 0) continue;
        for (let i = 0; i < rows.length; i++) {
          const weighted = bias * solution.model.weights[rows[i]] * errors[error][i];
          if (weighted === 0) continue;
          for (let e = model.rowStart[rows[i]]; e < model.rowStart[rows[i] + 1]; e++) {
            const cofactor = cofactors.of(places[axis], model.columns[e]);
            shift[axis] += weighted * solution.coefficients[e] * cofactor;
          }
        }
      }
      const size = Math.hypot(shift[0], shift[1], shift[2]);
      if (size <= length) continue;
      length = size;
      most = { point: neighbour.name, easting: shift[0], northing: shift[1], elevation: shift[2] };
    }
    return most;
  }

  private removed(): RemovedObservation[] {
    const { model, removals } = this.adjusted;
    const indexOf = new Map<string, number>();
    model.observations.forEach(({ suspect, error }, i) => {
      indexOf.set(`${suspect}/${error}`, i);
    });
    return removals.map(({ suspect, error, standardised, redundancy, estimate, sigma, alternatives }) => ({
      observation: indexOf.get(`${suspect}/${error}`)!,
      standardised,
      redundancy,
      error: estimate,
      errorSigma: sigma,
      alternatives: alternatives.map((other) => indexOf.get(`${other}/0`)!),
    }));
  }
}
