import { standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import {
  chiSquareQuantile,
  chiSquareTail,
  ELLIPSE_95,
  fDistribution,
  fQuantile,
} from '@/lib/compute/statistics/distributions';
import { type Congruence, type Displacements, inDatumOf, PointsCongruence, quadratic } from './congruence';
import type { CongruenceTest, EpochComparison, PointDisplacement } from './epochComparison';
import { type AdjustedNetwork, solveNetwork } from './network';
import { pointKey } from './networkHeights';
import type { NetworkInput } from './networkInput';
import { NetworkError } from './networkResult';
import { ABSENT, AXES, type Place } from './networkUnknowns';

/**
 * Which points moved between two epochs: both are adjusted with a free datum, control believed no more than any other
 * point, and their common points tested for congruence (Pelzer 1971; Caspary, Concepts of Network and Deformation
 * Analysis, §6). While the test fails, the point that brings in most is taken out of the datum. Displacements are in the
 * datum of the points that stayed.
 *
 * @throws NetworkError where an epoch cannot be computed
 */
export function compareEpochs(before: NetworkInput, after: NetworkInput): EpochComparison {
  const epochs = [solveNetwork(unbelieved(before)), solveNetwork(unbelieved(after))] as const;
  const common = new CommonPoints(...epochs);
  const noise = new Noise(...epochs);
  const all = common.displacements(noise.scale);

  const stable = new Set(common.names.keys());
  const moved: number[] = [];
  let placed = inDatumOf(all, stable);
  const points = placed && congruenceOf(placed, common.names);
  let found = placed && points ? points.of(placed.values) : null;
  const first = noise.test(found);
  let remaining = first;
  while (points && found && !remaining.passed) {
    const worst = [...found.ofPoint].reduce((a, b) => (perFreedom(b[1]) > perFreedom(a[1]) ? b : a))[0];
    const rest = new Set([...stable].filter((point) => point !== worst));
    const next = inDatumOf(all, rest);
    // What is left does not settle the movements any more: which of the last ones moved cannot be told.
    if (!next || coordinates(all, rest) <= all.movements.length) break;
    stable.delete(worst);
    moved.push(worst);
    placed = next;
    points.leave(worst);
    found = points.of(placed.values);
    remaining = noise.test(found);
  }
  const shown = placed ?? all;
  return {
    congruence: first,
    remaining,
    scale: noise.scale,
    points: common.names.map((name, index) => displacement(name, index, shown, noise, moved.includes(index))),
    moved: moved.map((index) => common.names[index]),
    onlyBefore: common.onlyBefore,
    onlyAfter: common.onlyAfter,
  };
}

/** @throws NetworkError where an epoch leaves more open between its points than how the whole lies */
function congruenceOf(placed: Displacements, names: readonly string[]): PointsCongruence {
  const congruence = ifDetermined(() => new PointsCongruence(placed));
  if (!congruence) throw new NetworkError('not_determined', names);
  return congruence;
}

/** The network with all its control free. */
function unbelieved(input: NetworkInput): NetworkInput {
  return {
    ...input,
    points: input.points.map((point) => ({
      ...point,
      horizontalDatum: point.horizontalDatum === 'new' ? 'new' : 'free',
      verticalDatum: point.verticalDatum === 'new' ? 'new' : 'free',
    })),
  };
}

const perFreedom = ({ value, degreesOfFreedom }: Congruence) => value / Math.max(1, degreesOfFreedom);

function coordinates(all: Displacements, points: ReadonlySet<number>): number {
  return [...points].reduce((sum, point) => sum + all.points[point].length, 0);
}

/** Pooled variance factor of two epochs, and the tests that follow from it. */
class Noise {
  readonly scale: number;
  /** Of the estimate of the variance factor; null where the a-priori one stands. */
  private readonly freedom: number | null;

  constructor(before: AdjustedNetwork, after: AdjustedNetwork) {
    const squares = before.solution.weightedSquares + after.solution.weightedSquares;
    const freedom = before.solution.degreesOfFreedom + after.solution.degreesOfFreedom;
    const failed = freedom > 0 && squares > chiSquareQuantile(0.95, freedom);
    this.scale = failed ? Math.sqrt(squares / freedom) : 1;
    this.freedom = failed ? freedom : null;
  }

  test(found: Congruence | null): CongruenceTest {
    if (!found || found.degreesOfFreedom <= 0) {
      return { value: 0, critical: 0, degreesOfFreedom: 0, passed: true };
    }
    const { degreesOfFreedom } = found;
    const value = found.value / degreesOfFreedom;
    const critical = this.critical(degreesOfFreedom) / degreesOfFreedom;
    return { value, critical, degreesOfFreedom, passed: value <= critical };
  }

  /** 95 % point of dᵀQ⁻¹d. */
  critical(degreesOfFreedom: number): number {
    return this.freedom === null
      ? chiSquareQuantile(0.95, degreesOfFreedom)
      : degreesOfFreedom * fQuantile(0.95, degreesOfFreedom, this.freedom);
  }

  /** Upper tail of dᵀQ⁻¹d of one point. */
  tail(value: number, degreesOfFreedom: number): number {
    if (degreesOfFreedom === 0) return 1;
    return this.freedom === null
      ? chiSquareTail(value, degreesOfFreedom as 1 | 2 | 3)
      : 1 - fDistribution(value / degreesOfFreedom, degreesOfFreedom, this.freedom);
  }

  /** From the standard to the 95 % ellipse. */
  get ellipseFactor(): number {
    return this.freedom === null ? ELLIPSE_95 : Math.sqrt(this.critical(2));
  }
}

/** The points of two adjusted networks and the coordinates that both know. */
class CommonPoints {
  readonly names: string[];
  readonly onlyBefore: string[];
  readonly onlyAfter: string[];

  constructor(
    private readonly before: AdjustedNetwork,
    private readonly after: AdjustedNetwork,
  ) {
    const known = (network: AdjustedNetwork) =>
      network.model.places.pointNames().filter((name) => placesOf(network, name).some((place) => place >= 0));
    const [earlier, later] = [new Set(known(before)), new Set(known(after))];
    const both = [...earlier].filter((name) => later.has(name));
    this.names = both.filter((name) => this.axesOf(name).length > 0).sort();
    this.onlyBefore = [...earlier].filter((name) => !this.names.includes(name)).sort();
    this.onlyAfter = [...later].filter((name) => !this.names.includes(name)).sort();
  }

  displacements(scale: number): Displacements {
    const axes = this.names.map((name) => this.axesOf(name));
    const coordinates = this.names.flatMap((name, point) =>
      axes[point].map((axis) => ({ name, point, axis })),
    );
    const n = coordinates.length;
    const values = new Float64Array(n);
    const covariance = new Float64Array(n * n);
    for (const [sign, network] of [
      [-1, this.before],
      [1, this.after],
    ] as const) {
      const { solution, cofactors, model } = network;
      const places = coordinates.map(({ name, axis }) => placesOf(network, name)[axis]);
      coordinates.forEach(({ axis }, i) => {
        values[i] += sign * (solution.unknowns[places[i]] + model.places.origin[AXES[axis]]);
        const unit = new Float64Array(model.unknowns);
        unit[places[i]] = scale * scale;
        const column = cofactors.times(unit);
        places.forEach((place, j) => {
          covariance[j * n + i] += column[place];
        });
      });
    }
    const points = this.names.map((_, point) =>
      coordinates.flatMap((coordinate, i) => (coordinate.point === point ? i : [])),
    );
    return { values, covariance, points, axes, movements: this.movements(coordinates) };
  }

  /** What either epoch leaves undetermined, as changes of the common coordinates. */
  private movements(coordinates: readonly { name: string; axis: number }[]): Float64Array[] {
    const free = new Set([...this.before.free, ...this.after.free]);
    const at = ({ name }: { name: string }, axis: number) =>
      this.before.solution.unknowns[placesOf(this.before, name)[axis]];
    const centre = [0, 1].map((axis) => {
      const plan = coordinates.filter((coordinate) => coordinate.axis === axis);
      return plan.reduce((sum, coordinate) => sum + at(coordinate, axis) / plan.length, 0);
    });
    return [...free].flatMap((name): Float64Array | [] => {
      const movement = Float64Array.from(coordinates, (coordinate) => {
        if (name !== 'rotation') return AXES[coordinate.axis] === name ? 1 : 0;
        if (coordinate.axis === 2) return 0;
        return coordinate.axis === 0 ? at(coordinate, 1) - centre[1] : centre[0] - at(coordinate, 0);
      });
      return movement.some((value) => value !== 0) ? movement : [];
    });
  }

  /** Plan in both epochs or in none, heights by themselves. */
  private axesOf(name: string): number[] {
    const [a, b] = [placesOf(this.before, name), placesOf(this.after, name)];
    const plan = [0, 1].every((axis) => a[axis] >= 0 && b[axis] >= 0) ? [0, 1] : [];
    return a[2] >= 0 && b[2] >= 0 ? [...plan, 2] : plan;
  }
}

/** Unknowns of a point's coordinates; ABSENT where its height has no frame. */
function placesOf({ model }: AdjustedNetwork, name: string): readonly Place[] {
  const places = model.places.made('point', name);
  return model.heights.isBased(pointKey(name)) ? places : [places[0], places[1], ABSENT];
}

function displacement(
  name: string,
  index: number,
  { values, covariance, points, axes }: Displacements,
  noise: Noise,
  moved: boolean,
): PointDisplacement {
  const rows = points[index];
  const n = values.length;
  const own = new Map(axes[index].map((axis, k) => [axis, rows[k]]));
  const block = Float64Array.from({ length: 9 }, (_, k) => {
    const [a, b] = [own.get(Math.floor(k / 3)), own.get(k % 3)];
    return a === undefined || b === undefined ? 0 : covariance[a * n + b];
  });
  const at = (axis: number) => (own.has(axis) ? values[own.get(axis)!] : null);
  const ellipse = standardEllipse(block[0], block[4], block[1]);
  const { value, degreesOfFreedom } = quadratic(
    rows.map((i) => values[i]),
    rows.flatMap((i) => rows.map((j) => covariance[i * n + j])),
  );
  return {
    name,
    easting: at(0),
    northing: at(1),
    elevation: at(2),
    covariance: block,
    ellipse95: {
      ...ellipse,
      semiMajor: ellipse.semiMajor * noise.ellipseFactor,
      semiMinor: ellipse.semiMinor * noise.ellipseFactor,
    },
    value,
    degreesOfFreedom,
    critical: degreesOfFreedom > 0 ? noise.critical(degreesOfFreedom) : 0,
    probability: noise.tail(value, degreesOfFreedom),
    moved,
  };
}
