import { factor, solveLower } from '@/lib/compute/adjustment/cholesky';
import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import type { Suspect } from '@/lib/compute/adjustment/suspects';
import type { Reading } from './faces';
import { axisKey, HeightGroups, pointKey } from './networkHeights';
import type { LevelDifference, NetworkInput, RoverBaseline, RoverPosition } from './networkInput';
import { lineariseRay, RAY, RAY_PLACES, type RayReading } from './networkRay';
import type { SetupReadings } from './networkReadings';
import type { LeftOut, NetworkObservation } from './networkResult';
import { SetupPlaces } from './networkSetup';
import type { NetworkStart, StartSetup } from './networkStart';
import { ABSENT, AXES, NetworkUnknowns, type Place } from './networkUnknowns';

/** What an observation is. */
export interface ObservationName
  extends Pick<NetworkObservation, 'kind' | 'source' | 'from' | 'to' | 'component' | 'set' | 'shots'> {
  /** Points and free stations that it touches. */
  near: readonly Neighbour[];
}

/** An observation of the model, and where the tests of its error are found. */
export interface ModelObservation {
  name: ObservationName;
  sigma: number;
  /** Index of its suspect and which of the suspect's errors it is. */
  suspect: number;
  error: number;
  /** What its residual is made of: Σ factor × residual of the suspect's rows. */
  factors: readonly number[];
}

export interface Neighbour {
  of: 'point' | 'station';
  name: string;
}

export interface NetworkModel extends AdjustmentModel {
  readonly start: Float64Array;
  readonly places: NetworkUnknowns;
  readonly heights: HeightGroups;
  readonly observations: readonly ModelObservation[];
  readonly suspects: readonly Suspect[];
  readonly leftOut: readonly LeftOut[];
  /** Orientation of each setup that has one. */
  readonly orientations: ReadonlyMap<string, Place>;
  /** Instrument height's own error of each occupied setup that has one. */
  readonly instrumentHeights: ReadonlyMap<string, Place>;
}

/** value − Σ coefficient × place. */
interface LinearRow {
  places: Place[];
  coefficients: readonly number[];
  value: number;
}

/**
 * A network of setups, levelled differences and rover positions as one least-squares problem, all unknowns shared.
 *
 * As in a single setup, what several readings have in common is an unknown with a pseudo-observation of its own: the
 * centring of the instrument and its height, centring and height of each reflector as it stood on its mark, refraction,
 * and what single faces and an unknown atmosphere leave in. Correlated coordinates of a rover become rows of unit
 * weight, C = LLᵀ and L⁻¹(ℓ − x).
 */
export function networkModel(
  input: NetworkInput,
  readings: readonly SetupReadings[],
  start: NetworkStart,
): NetworkModel {
  return new Builder(input, start, readings).build();
}

class Builder {
  private readonly heights: HeightGroups;
  private readonly places: NetworkUnknowns;
  private readonly rows = new RowBuilder();
  private readonly rays: RayReading[] = [];
  private readonly linear: LinearRow[] = [];
  private readonly observations: ModelObservation[] = [];
  private readonly suspects: Suspect[] = [];
  private readonly leftOut: LeftOut[] = [];
  private readonly orientations = new Map<string, Place>();
  private readonly instrumentHeights = new Map<string, Place>();
  /** Pseudo-observations, which come behind everything observed. */
  private readonly assumed: { place: Place; value: number; sigma: number; name: ObservationName }[] = [];

  constructor(
    private readonly input: NetworkInput,
    private readonly start: NetworkStart,
    private readonly readings: readonly SetupReadings[],
  ) {
    this.heights = new HeightGroups(input, readings, start);
    this.places = new NetworkUnknowns(input, start, this.heights.floating);
  }

  build(): NetworkModel {
    for (const own of this.readings) this.addSetup(own);
    for (const difference of this.input.levelDifferences) this.addLevelDifference(difference);
    for (const position of this.input.positions) this.addPosition(position);
    for (const baseline of this.input.baselines) this.addBaseline(baseline);
    this.addControl();
    for (const { place, value, sigma, name } of this.assumed) {
      this.observeOne(this.addLinear({ places: [place], coefficients: ALONE, value }, sigma), sigma, name);
    }

    const { places, rays, linear, input } = this;
    const structure = this.rows.build();
    const start = Float64Array.from(places.start);
    const constants = Float64Array.from(places.constants);
    const partials = new Float64Array(RAY_PLACES);
    return {
      ...structure,
      unknowns: start.length,
      shared: start.length,
      blocks: Int32Array.of(start.length),
      start,
      places,
      heights: this.heights,
      observations: this.observations,
      suspects: this.suspects,
      leftOut: this.leftOut,
      orientations: this.orientations,
      instrumentHeights: this.instrumentHeights,
      linearise(x, coefficients, misclosures) {
        const value = (place: Place) => (place >= 0 ? x[place] : constants[-1 - place]);
        let e = 0;
        for (let i = 0; i < rays.length; i++) {
          misclosures[i] = lineariseRay(rays[i], value, input.surroundings, partials);
          const own = rays[i].places;
          for (let k = 0; k < RAY_PLACES; k++) if (own[k] >= 0) coefficients[e++] = partials[k];
        }
        for (let i = 0; i < linear.length; i++) {
          const { places: own, coefficients: factors, value: observed } = linear[i];
          let misclosure = observed;
          for (let k = 0; k < own.length; k++) {
            misclosure -= factors[k] * value(own[k]);
            if (own[k] >= 0) coefficients[e++] = factors[k];
          }
          misclosures[rays.length + i] = misclosure;
        }
      },
    };
  }

  private addSetup(own: SetupReadings): void {
    const { setup, erections, readings, shots } = own;
    const at = this.start.setups.get(setup.id);
    if (!at) {
      const all = setup.shots.map((shot) => shot.id);
      this.leftOut.push({ kind: 'setup', source: setup.id, shots: all, reason: 'not_connected' });
      return;
    }
    const shared = new SetupPlaces(own, this.places, (value, sigma, name) => this.assume(value, sigma, name));
    const zeniths = new Set(readings.flatMap(({ kind, erection }) => (kind === 'zenith' ? erection : [])));
    const unseen = new Set<string>();
    readings.forEach((reading, index) => {
      const { kind, erection } = reading;
      const { target } = erections[erection];
      if (!this.usable(kind, target, at)) {
        for (const shot of shots[index]) unseen.add(shot);
        return;
      }
      if (kind === 'distance' && !zeniths.has(erection) && !this.levelEnds(setup.id, target, at)) {
        const left = { kind, source: setup.id, shots: shots[index], reason: 'zenith_wanted' } as const;
        this.leftOut.push(left);
        return;
      }
      this.addReading(reading, shots[index], own, shared, at);
    });
    if (shared.orientation !== ABSENT) this.orientations.set(setup.id, shared.orientation);
    if (shared.instrumentHeight !== ABSENT) this.instrumentHeights.set(setup.id, shared.instrumentHeight);
    if (unseen.size > 0) {
      this.leftOut.push({ kind: 'shot', source: setup.id, shots: [...unseen], reason: 'not_connected' });
    }
  }

  private usable(kind: Reading['kind'], target: string, at: StartSetup): boolean {
    if (!this.start.plan.has(target)) return false;
    if (kind === 'direction') return at.orientation !== null;
    return kind === 'distance' || (at.axis !== null && this.start.heights.has(target));
  }

  /** The heights of both ends are known in one frame, so that a slope distance is worth something by itself. */
  private levelEnds(id: string, target: string, at: StartSetup): boolean {
    const known = at.axis !== null && this.start.heights.has(target);
    return known && this.heights.comparable(axisKey(id), pointKey(target));
  }

  private addReading(
    { kind, erection, set, value, sigma, face }: Reading,
    shots: readonly string[],
    { setup, erections }: SetupReadings,
    shared: SetupPlaces,
    at: StartSetup,
  ): void {
    const { target, targetHeight } = erections[erection];
    const places = new Array<Place>(RAY_PLACES).fill(ABSENT);
    let rise = targetHeight;
    let ownFactor = 1;
    places[RAY.targetEasting] = this.places.point(target, 'easting');
    places[RAY.targetNorthing] = this.places.point(target, 'northing');
    [places[RAY.easting], places[RAY.northing]] = shared.plan();
    [places[RAY.instrumentAlong], places[RAY.instrumentAcross]] = shared.centring();
    [places[RAY.targetAlong], places[RAY.targetAcross]] = shared.reflector(erection);
    // The instrument's centring turns with its circle.
    if (kind === 'direction' || places[RAY.instrumentAlong] !== ABSENT) {
      places[RAY.orientation] = shared.circle(at.orientation);
    }
    if (kind !== 'direction') {
      places[RAY.targetElevation] = this.places.point(target, 'elevation');
      places[RAY.targetHeight] = shared.reflectorHeight(erection);
      [places[RAY.axis], places[RAY.instrumentHeight]] = shared.axis();
      if (setup.occupied !== null) rise -= setup.instrumentHeight ?? 0;
    }
    if (kind === 'zenith') places[RAY.refraction] = shared.refraction(this.input.surroundings);
    if (kind === 'distance') places[RAY.own] = shared.scale(this.input.surroundings);
    if (kind !== 'distance' && face !== 0) {
      places[RAY.own] = kind === 'direction' ? shared.collimation() : shared.verticalIndex();
      ownFactor = kind === 'direction' ? face / this.sineOfZenith(target, targetHeight, at) : face;
    }
    this.rays.push({ kind, value, places, rise, ownFactor });
    const row = this.rows.add(
      places.filter((place) => place >= 0),
      sigma,
    );
    this.observeOne(row, sigma, {
      ...{ kind, source: setup.id, from: setup.occupied, to: target, component: null, set, shots },
      near: [shared.standing, { of: 'point', name: target }],
    });
  }

  /** Sine of the zenith angle to a target, by which collimation grows; as good as level where heights are wanting. */
  private sineOfZenith(target: string, targetHeight: number, at: StartSetup): number {
    const height = this.start.heights.get(target);
    const mark = this.start.plan.get(target)!;
    if (height === undefined || at.axis === null) return 1;
    const grid = Math.hypot(mark.easting - at.easting, mark.northing - at.northing);
    return grid / Math.hypot(grid, height + targetHeight - at.axis);
  }

  private addLevelDifference({ id, from, to, difference, weight }: LevelDifference): void {
    if (!this.start.heights.has(from) || !this.start.heights.has(to)) {
      this.leftOut.push({ kind: 'levelDifference', source: id, shots: [], reason: 'not_connected' });
      return;
    }
    const sigma =
      weight.by === 'length'
        ? weight.sigmaPerRootKilometre * Math.sqrt(weight.length / 1000)
        : weight.by === 'setups'
          ? weight.sigmaPerSetup * Math.sqrt(weight.setups)
          : weight.sigma;
    const places = [this.places.point(to, 'elevation'), this.places.point(from, 'elevation')];
    const row = this.addLinear({ places, coefficients: [1, -1], value: difference }, sigma);
    this.observeOne(row, sigma, {
      ...{ kind: 'levelDifference', source: id, from, to, component: null, set: null, shots: [] },
      near: [from, to].map((name) => ({ of: 'point', name })),
    });
  }

  private addPosition({ id, point, covariance, ...position }: RoverPosition): void {
    const places = AXES.map((axis) => this.places.point(point, axis));
    const observed = AXES.map((axis) => position[axis] - this.places.origin[axis]);
    this.addVector(observed, covariance, (k) => ({ places: [places[k]], coefficients: [1] }), {
      ...{ kind: 'position', source: id, from: null, to: point },
    });
  }

  private addBaseline({ id, from, to, covariance, ...vector }: RoverBaseline): void {
    const { plan, heights } = this.start;
    if (![from, to].every((name) => plan.has(name) && heights.has(name))) {
      this.leftOut.push({ kind: 'baseline', source: id, shots: [], reason: 'not_connected' });
      return;
    }
    const places = AXES.map((axis) => [this.places.point(to, axis), this.places.point(from, axis)]);
    const observed = AXES.map((axis) => vector[axis]);
    this.addVector(observed, covariance, (k) => ({ places: places[k], coefficients: [1, -1] }), {
      ...{ kind: 'baseline', source: id, from, to },
    });
  }

  /** Three correlated coordinates as three rows of unit weight. */
  private addVector(
    observed: readonly number[],
    covariance: readonly number[],
    part: (axis: number) => Pick<LinearRow, 'places' | 'coefficients'>,
    name: Pick<ObservationName, 'kind' | 'source' | 'from' | 'to'>,
  ): void {
    const lower = Float64Array.from(covariance);
    factor(lower, 3);
    const whitening = Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1);
    solveLower(lower, 3, whitening, 3);
    const rows = AXES.map((_, i) => {
      const whitened = { places: [] as Place[], coefficients: [] as number[], value: 0 };
      for (let k = 0; k <= i; k++) {
        const w = whitening[i * 3 + k];
        const { places, coefficients } = part(k);
        whitened.places.push(...places);
        whitened.coefficients.push(...coefficients.map((c) => w * c));
        whitened.value += w * observed[k];
      }
      return this.addLinear(whitened, 1);
    });
    const near = [name.from, name.to].flatMap((point): Neighbour[] =>
      point === null ? [] : [{ of: 'point', name: point }],
    );
    AXES.forEach((component, k) => {
      this.observations.push({
        name: { ...name, component, set: null, shots: [], near },
        sigma: Math.sqrt(covariance[k * 4]),
        suspect: this.suspects.length,
        error: k,
        factors: AXES.map((_, i) => (i <= k ? lower[k * 3 + i] : 0)),
      });
    });
    this.suspects.push({ rows, errors: AXES.map((_, k) => AXES.map((_, i) => whitening[i * 3 + k])) });
  }

  /** Published coordinates that take part as observations. */
  private addControl(): void {
    for (const point of this.input.points) {
      this.places.made('point', point.name).forEach((place, index) => {
        const component = AXES[index];
        const given = point[component];
        if (place < 0 || given === null || this.places.datum(point.name, component) !== 'weighted') return;
        const sigma = component === 'elevation' ? point.verticalSigma : point.horizontalSigma;
        const value = given - this.places.origin[component];
        const row = this.addLinear({ places: [place], coefficients: [1], value }, sigma);
        this.observeOne(row, sigma, {
          ...{ kind: 'control', source: point.name, from: null, to: point.name, component },
          ...{ set: null, shots: [], near: [{ of: 'point', name: point.name }] },
        });
      });
    }
  }

  /** An error of its own, with the pseudo-observation that holds it; none where it is stated to be zero. */
  private assume(value: number, sigma: number, name: ObservationName): Place {
    if (!(sigma > 0)) return this.places.constant(value);
    const place = this.places.unknown(value, { kind: 'own', point: null, setup: name.source });
    this.assumed.push({ place, value, sigma, name });
    return place;
  }

  private addLinear(row: LinearRow, sigma: number): number {
    this.linear.push(row);
    return this.rows.add(
      row.places.filter((place) => place >= 0),
      sigma,
    );
  }

  private observeOne(row: number, sigma: number, name: ObservationName): void {
    this.observations.push({ name, sigma, suspect: this.suspects.length, error: 0, factors: ALONE });
    this.suspects.push({ rows: [row], errors: ALONE_ERRORS });
  }
}

const ALONE = [1];
const ALONE_ERRORS = [ALONE];
