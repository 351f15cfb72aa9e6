import type { CoordinateDatum, NetworkInput, NetworkPoint } from './networkInput';
import type { NetworkStart } from './networkStart';

export const AXES = ['easting', 'northing', 'elevation'] as const;
export type Axis = (typeof AXES)[number];

/** Unknown of that index, or, below zero, the constant of index −1 − place. The first constant is zero. */
export type Place = number;
export const ABSENT: Place = -1;
const NOTHING_MADE: readonly Place[] = [ABSENT, ABSENT, ABSENT];

/** What an unknown stands for. */
export interface UnknownName {
  kind: 'easting' | 'northing' | 'elevation' | 'orientation' | 'own';
  /** Name of a point, or null where it belongs to a setup. */
  point: string | null;
  setup: string | null;
}

/**
 * The unknowns of a network, made when an observation first touches them: coordinates of points and free stations,
 * counted from `origin`, orientations, and the errors that readings share. What is held is a constant.
 */
export class NetworkUnknowns {
  readonly origin: { easting: number; northing: number; elevation: number };
  /** Start values. */
  readonly start: number[] = [];
  readonly names: UnknownName[] = [];
  readonly constants: number[] = [0];
  private readonly points = new Map<string, Place[]>();
  private readonly setups = new Map<string, Place[]>();
  private readonly given: ReadonlyMap<string, NetworkPoint>;
  /** Coordinates that float with nothing to hold them but one, which is held at its start value. */
  private readonly settled: ReadonlySet<string>;

  /** @param settled keys of heights that are held because nothing leads to them: `point name` or `setup id` */
  constructor(
    input: NetworkInput,
    private readonly at: NetworkStart,
    settled: ReadonlySet<string>,
  ) {
    this.given = new Map(input.points.map((point) => [point.name, point]));
    this.settled = settled;
    const plans = [...at.plan.values()];
    const heights = [...at.heights.values()];
    this.origin = {
      easting: Math.round(mean(plans.map((plan) => plan.easting))),
      northing: Math.round(mean(plans.map((plan) => plan.northing))),
      elevation: Math.round(mean(heights)),
    };
  }

  datum(point: string, axis: Axis): CoordinateDatum {
    const given = this.given.get(point);
    if (!given) return 'new';
    return axis === 'elevation' ? given.verticalDatum : given.horizontalDatum;
  }

  /** Place of a point's coordinate, made where it is new. */
  point(name: string, axis: Axis): Place {
    const index = AXES.indexOf(axis);
    let places = this.points.get(name);
    if (!places) {
      places = [ABSENT, ABSENT, ABSENT];
      this.points.set(name, places);
    }
    if (places[index] === ABSENT) {
      const from = axis === 'elevation' ? this.at.heights.get(name)! : this.at.plan.get(name)![axis];
      const value = from - this.origin[axis];
      const held =
        this.datum(name, axis) === 'held' || (axis === 'elevation' && this.settled.has(`point ${name}`));
      places[index] = held
        ? this.constant(value)
        : this.unknown(value, { kind: axis, point: name, setup: null });
    }
    return places[index];
  }

  /** Place of a coordinate of a free station, the height that of the tilting axis. */
  station(id: string, axis: Axis): Place {
    const index = AXES.indexOf(axis);
    let places = this.setups.get(id);
    if (!places) {
      places = [ABSENT, ABSENT, ABSENT];
      this.setups.set(id, places);
    }
    if (places[index] === ABSENT) {
      const setup = this.at.setups.get(id)!;
      const value = (axis === 'elevation' ? setup.axis! : setup[axis]) - this.origin[axis];
      const held = axis === 'elevation' && this.settled.has(`setup ${id}`);
      places[index] = held
        ? this.constant(value)
        : this.unknown(value, { kind: axis, point: null, setup: id });
    }
    return places[index];
  }

  /** Places of a point's or a station's coordinates that observations touch; ABSENT for others. */
  made(of: 'point' | 'station', name: string): readonly Place[] {
    return (of === 'point' ? this.points : this.setups).get(name) ?? NOTHING_MADE;
  }

  /** Points that observations touch, in the order in which they were first touched. */
  pointNames(): string[] {
    return [...this.points.keys()];
  }

  /** Unknowns that have a part in a free datum. */
  freePlaces(): Int32Array {
    const free: number[] = [];
    for (const [name, places] of this.points) {
      places.forEach((place, index) => {
        if (place >= 0 && this.datum(name, AXES[index]) === 'free') free.push(place);
      });
    }
    return Int32Array.from(free);
  }

  /** How many coordinates that observations touch are of a kind. */
  count(datum: CoordinateDatum): number {
    let count = 0;
    for (const [name, places] of this.points) {
      places.forEach((place, index) => {
        if (place !== ABSENT && this.datum(name, AXES[index]) === datum) count++;
      });
    }
    return count;
  }

  unknown(start: number, name: UnknownName): Place {
    this.start.push(start);
    this.names.push(name);
    return this.start.length - 1;
  }

  constant(value: number): Place {
    this.constants.push(value);
    return -this.constants.length;
  }
}

function mean(values: readonly number[]): number {
  return values.length === 0 ? 0 : values.reduce((sum, value) => sum + value, 0) / values.length;
}
