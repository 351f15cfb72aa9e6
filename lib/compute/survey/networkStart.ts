import { wrapDifference } from '@/lib/compute/units/angles';
import type { ReadingKind } from './faces';
import type { NetworkInput } from './networkInput';
import type { SetupReadings } from './networkReadings';
import { offsetFromHeight, offsetFromZenith } from './ray';
import type { ControlMark } from './shots';
import { sightsOf } from './sights';
import { startValues } from './startValues';

export interface Plan {
  easting: number;
  northing: number;
}

/** Where points and setups are to begin with; what no observation leads to is missing. */
export interface NetworkStart {
  plan: Map<string, Plan>;
  heights: Map<string, number>;
  setups: Map<string, StartSetup>;
}

export interface StartSetup extends Plan {
  /** Of the tilting axis; null where no height leads to it. */
  axis: number | null;
  /** Null where the setup has no directions. */
  orientation: number | null;
}

/**
 * Start values of a network, from its given coordinates outwards: setups are placed by the targets that are known,
 * unknown targets by the setups that are placed, round by round, so that the order of the observations plays no part.
 */
export function networkStart(input: NetworkInput, readings: readonly SetupReadings[]): NetworkStart {
  const start: NetworkStart = { plan: new Map(), heights: new Map(), setups: new Map() };
  for (const { name, easting, northing, elevation } of input.points) {
    if (easting !== null && northing !== null) start.plan.set(name, { easting, northing });
    if (elevation !== null) start.heights.set(name, elevation);
  }
  addProposed(start.plan, medianPlan, (propose) => {
    for (const position of input.positions) propose(position.point, position);
  });
  const places = readings.map((own) => new Placing(own, input));
  const search = new PlanSearch(input, places, start);
  while (search.round());
  addHeights(input, places, start);
  return start;
}

/** Adds to `known` the middle of what is proposed for keys that are not known; answers what was added. */
function addProposed<Value>(
  known: Map<string, Value>,
  middle: (values: Value[]) => Value,
  collect: (propose: (key: string, value: Value) => void) => void,
): string[] {
  const proposals = new Map<string, Value[]>();
  collect((key, value) => {
    if (known.has(key)) return;
    const list = proposals.get(key);
    if (list) list.push(value);
    else proposals.set(key, [value]);
  });
  for (const [key, list] of proposals) known.set(key, middle(list));
  return [...proposals.keys()];
}

function medianPlan(plans: Plan[]): Plan {
  return {
    easting: median(plans.map(({ easting }) => easting)),
    northing: median(plans.map(({ northing }) => northing)),
  };
}

function median(values: number[]): number {
  values.sort((a, b) => a - b);
  const middle = values.length >> 1;
  return values.length % 2 ? values[middle] : (values[middle - 1] + values[middle]) / 2;
}

/** One setup's first reading of each kind to each reflector. */
class Placing {
  readonly first: Partial<Record<ReadingKind, number>>[];
  /** Longest distance read, m. */
  private readonly farthest: number;

  constructor(
    readonly own: SetupReadings,
    private readonly input: NetworkInput,
  ) {
    this.first = own.erections.map(() => ({}));
    for (const { kind, erection, value } of own.readings) this.first[erection][kind] ??= value;
    this.farthest = Math.max(1, ...this.first.map(({ distance }) => distance ?? 0));
  }

  get id(): string {
    return this.own.setup.id;
  }

  /** Grid distance and rise to a reflector as read; the rise null without a zenith angle. */
  offset(erection: number): { grid: number; rise: number | null } | null {
    const { zenith, distance } = this.first[erection];
    const { surroundings } = this.input;
    if (distance === undefined) return null;
    if (zenith === undefined) return { grid: offsetFromHeight(0, distance, surroundings).grid, rise: null };
    const { grid, height } = offsetFromZenith(zenith, distance, surroundings.refraction, surroundings);
    return { grid, rise: height };
  }

  /**
   * Where the setup stands and how its circle lies, from what is known; null where that does not suffice. `reach` says
   * how far what is known lies apart beside the farthest sight: what a small error there grows to here.
   */
  place({ plan, heights }: NetworkStart): { setup: StartSetup; reach: number } | null {
    const { setup, erections, readings } = this.own;
    const known = erections.flatMap(({ target }, e) => {
      const mark = plan.get(target);
      return mark && target !== setup.occupied ? { target, mark, direction: this.first[e].direction } : [];
    });
    const at = setup.occupied === null ? undefined : plan.get(setup.occupied);
    if (at) {
      if (!readings.some(({ kind }) => kind === 'direction')) {
        return { setup: { ...at, axis: null, orientation: null }, reach: 1 };
      }
      const turns = known.flatMap(({ mark, direction }) =>
        direction === undefined
          ? []
          : Math.atan2(mark.easting - at.easting, mark.northing - at.northing) - direction,
      );
      if (turns.length === 0) return null;
      const from = turns.map((turn) => wrapDifference(turn - turns[0]));
      const farthest = Math.max(...known.map(({ mark }) => apart(mark, at)));
      const orientation = turns[0] + median(from);
      return { setup: { ...at, axis: null, orientation }, reach: farthest / this.farthest };
    }
    if (known.length < 2) return null;
    const control = new Map(
      known.map(({ target, mark }): [string, ControlMark] => {
        return [target, { ...UNWEIGHTED, ...mark, name: target, elevation: heights.get(target) ?? null }];
      }),
    );
    const { surroundings } = this.input;
    // Where it may be one of two places, more of its marks are to be known first.
    const [found, ...others] = startValues(
      sightsOf(erections, readings, control, surroundings),
      surroundings,
    );
    if (!found || others.length > 0) return null;
    const widest = Math.max(...known.map(({ mark }) => apart(mark, known[0].mark)));
    return { setup: { ...found, axis: null }, reach: widest / this.farthest };
  }
}

function apart(a: Plan, b: Plan): number {
  return Math.hypot(a.easting - b.easting, a.northing - b.northing);
}

const UNWEIGHTED = { version: 0, horizontalSigma: 0, verticalSigma: 0, status: 'trusted' } as const;

/** Setups whose known marks lie this far apart beside their farthest sight are placed at once, others best first. */
const FAR_REACHING = 0.5;

/** The way outwards in plan. */
class PlanSearch {
  private readonly candidates = new Map<Placing, { setup: StartSetup; reach: number }>();
  private readonly naming = new Map<string, Placing[]>();
  /** Setups that something new is known for. */
  private readonly changed: Set<Placing>;

  constructor(
    private readonly input: NetworkInput,
    private readonly places: readonly Placing[],
    private readonly start: NetworkStart,
  ) {
    this.changed = new Set(places);
    for (const place of places) {
      const { setup, erections } = place.own;
      for (const name of new Set([...erections.map(({ target }) => target), setup.occupied ?? ''])) {
        const list = this.naming.get(name);
        if (list) list.push(place);
        else this.naming.set(name, [place]);
      }
    }
  }

  /** One round; answers whether anything was found. */
  round(): boolean {
    const { plan, setups } = this.start;
    for (const place of this.changed) {
      const candidate = setups.has(place.id) ? null : place.place(this.start);
      if (candidate) this.candidates.set(place, candidate);
    }
    this.changed.clear();
    const chosen = this.choose();
    for (const place of chosen) {
      setups.set(place.id, this.candidates.get(place)!.setup);
      this.candidates.delete(place);
    }
    const added = addProposed(plan, medianPlan, (propose) => {
      for (const place of chosen) radiate(place, setups.get(place.id)!, propose);
      for (const { from, to, easting, northing } of this.input.baselines) {
        const [a, b] = [plan.get(from), plan.get(to)];
        if (a) propose(to, { easting: a.easting + easting, northing: a.northing + northing });
        if (b) propose(from, { easting: b.easting - easting, northing: b.northing - northing });
      }
    });
    if (chosen.length + added.length === 0) {
      added.push(...addProposed(plan, medianPlan, (propose) => intersect(this.places, this.start, propose)));
    }
    for (const name of added) for (const place of this.naming.get(name) ?? []) this.changed.add(place);
    return chosen.length + added.length > 0;
  }

  private choose(): Placing[] {
    const all = [...this.candidates];
    const far = all.flatMap(([place, { reach }]) => (reach >= FAR_REACHING ? place : []));
    if (far.length > 0 || all.length === 0) return far;
    const [[best]] = all.sort(([a, { reach: x }], [b, { reach: y }]) => y - x || (a.id < b.id ? -1 : 1));
    return [best];
  }
}

/** Proposes the mark under a placed setup and the targets that it reads by direction and distance. */
function radiate(place: Placing, setup: StartSetup, propose: (name: string, plan: Plan) => void): void {
  const { occupied } = place.own.setup;
  if (occupied !== null) propose(occupied, setup);
  const { orientation } = setup;
  if (orientation === null) return;
  place.own.erections.forEach(({ target }, e) => {
    const { direction } = place.first[e];
    const offset = place.offset(e);
    if (direction === undefined || !offset) return;
    const azimuth = orientation + direction;
    propose(target, {
      easting: setup.easting + offset.grid * Math.sin(azimuth),
      northing: setup.northing + offset.grid * Math.cos(azimuth),
    });
  });
}

/** Rays that cross at less than this intersect nowhere in particular (common practice: 20°; enough to begin with). */
const LEAST_CROSSING = Math.sin(Math.PI / 36);

/** Points that only directions lead to, from the pair of rays that cross best. */
function intersect(
  places: readonly Placing[],
  { plan, setups }: NetworkStart,
  propose: (name: string, plan: Plan) => void,
): void {
  const rays = new Map<string, (Plan & { azimuth: number })[]>();
  for (const place of places) {
    const setup = setups.get(place.id);
    if (!setup || setup.orientation === null) continue;
    const { easting, northing, orientation } = setup;
    place.own.erections.forEach(({ target }, e) => {
      const { direction } = place.first[e];
      if (plan.has(target) || direction === undefined) return;
      const list = rays.get(target) ?? [];
      rays.set(target, [...list, { easting, northing, azimuth: orientation + direction }]);
    });
  }
  for (const [name, list] of rays) {
    let best: { crossing: number; at: Plan } | null = null;
    list.forEach((a, i) => {
      for (const b of list.slice(0, i)) {
        const crossing = Math.sin(b.azimuth - a.azimuth);
        if (Math.abs(crossing) < LEAST_CROSSING || Math.abs(crossing) <= (best?.crossing ?? 0)) continue;
        const [east, north] = [b.easting - a.easting, b.northing - a.northing];
        const along = (east * Math.cos(b.azimuth) - north * Math.sin(b.azimuth)) / -crossing;
        best = {
          crossing: Math.abs(crossing),
          at: {
            easting: a.easting + along * Math.sin(a.azimuth),
            northing: a.northing + along * Math.cos(a.azimuth),
          },
        };
      }
    });
    if (best) propose(name, (best as { at: Plan }).at);
  }
}

/**
 * Heights, round by round; where none leads to a group of points, the first of its setups by id begins at zero: only
 * differences of heights count there.
 */
function addHeights(input: NetworkInput, places: readonly Placing[], start: NetworkStart): void {
  const { heights } = start;
  addProposed(heights, median, (propose) => {
    for (const { point, elevation } of input.positions) propose(point, elevation);
  });
  const axes = new Map<string, number>();
  const read = new Map(places.map((place) => [place, rises(place, start)]));
  const sorted = [...places].sort((a, b) => (a.id < b.id ? -1 : 1));
  for (;;) {
    const found = addProposed(axes, median, (propose) => {
      for (const place of places) {
        const { occupied, instrumentHeight } = place.own.setup;
        const ground = occupied === null ? undefined : heights.get(occupied);
        if (ground !== undefined && instrumentHeight !== null) propose(place.id, ground + instrumentHeight);
        for (const { mark, rise } of read.get(place)!) {
          const height = heights.get(mark);
          if (height !== undefined) propose(place.id, height - rise);
        }
      }
    });
    const more = addProposed(heights, median, (propose) => {
      for (const place of places) {
        const axis = axes.get(place.id);
        if (axis === undefined) continue;
        const { occupied, instrumentHeight } = place.own.setup;
        if (occupied !== null && instrumentHeight !== null) propose(occupied, axis - instrumentHeight);
        for (const { mark, rise } of read.get(place)!) propose(mark, axis + rise);
      }
      const differences = [
        ...input.levelDifferences,
        ...input.baselines.map(({ from, to, elevation }) => ({ from, to, difference: elevation })),
      ];
      for (const { from, to, difference } of differences) {
        const [a, b] = [heights.get(from), heights.get(to)];
        if (a !== undefined) propose(to, a + difference);
        if (b !== undefined) propose(from, b - difference);
      }
    });
    if (found.length + more.length > 0) continue;
    const floating = sorted.find((place) => !axes.has(place.id) && read.get(place)!.length > 0);
    if (!floating) break;
    axes.set(floating.id, 0);
  }
  for (const [id, axis] of axes) {
    const setup = start.setups.get(id);
    if (setup) setup.axis = axis;
  }
}

/** Height of each mark above the tilting axis, as a setup reads it. */
function rises(place: Placing, { plan, setups }: NetworkStart): { mark: string; rise: number }[] {
  const setup = setups.get(place.id);
  if (!setup) return [];
  return place.own.erections.flatMap(({ target, targetHeight }, e) => {
    const { zenith } = place.first[e];
    const mark = plan.get(target);
    if (zenith === undefined || !mark) return [];
    const read = place.offset(e)?.rise;
    const grid = Math.hypot(mark.easting - setup.easting, mark.northing - setup.northing);
    return { mark: target, rise: (read ?? grid / Math.tan(zenith)) - targetHeight };
  });
}
