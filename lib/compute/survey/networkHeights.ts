import type { NetworkInput } from './networkInput';
import type { SetupReadings } from './networkReadings';
import type { NetworkStart } from './networkStart';

/**
 * Which heights hang together: points by their names and tilting axes of setups by their ids, joined by zenith angles,
 * instrument heights, levelled differences and baselines. A group in which no height has a part in the datum floats:
 * only differences of heights count in it.
 */
export class HeightGroups {
  private readonly parent = new Map<string, string>();
  private readonly based = new Set<string>();
  /** One key of each floating group, the first in the alphabet. */
  readonly floating: ReadonlySet<string>;

  constructor(input: NetworkInput, readings: readonly SetupReadings[], start: NetworkStart) {
    for (const { setup, erections, readings: own } of readings) {
      if (!start.setups.has(setup.id)) continue;
      const axis = axisKey(setup.id);
      if (setup.occupied !== null && setup.instrumentHeight !== null)
        this.join(axis, pointKey(setup.occupied));
      for (const { kind, erection } of own) {
        const { target } = erections[erection];
        if (kind === 'zenith' && start.plan.has(target)) this.join(axis, pointKey(target));
      }
    }
    for (const { from, to } of [...input.levelDifferences, ...input.baselines]) {
      if (start.heights.has(from) && start.heights.has(to)) this.join(pointKey(from), pointKey(to));
    }
    const datum = input.points.flatMap(({ name, verticalDatum }) => (verticalDatum === 'new' ? [] : name));
    for (const name of [...datum, ...input.positions.map(({ point }) => point)]) {
      this.based.add(this.root(pointKey(name)));
    }
    const first = new Map<string, string>();
    for (const key of [...this.parent.keys()].sort().reverse()) {
      if (!this.isBased(key)) first.set(this.root(key), key);
    }
    this.floating = new Set(first.values());
  }

  /** Two heights of one frame: of the datum, or floating together. */
  comparable(a: string, b: string): boolean {
    return (this.isBased(a) && this.isBased(b)) || this.root(a) === this.root(b);
  }

  isBased(key: string): boolean {
    return this.based.has(this.root(key));
  }

  private join(a: string, b: string): void {
    this.parent.set(this.root(a), this.root(b));
  }

  private root(key: string): string {
    let root = key;
    for (let up = this.parent.get(root); up !== undefined && up !== root; up = this.parent.get(root))
      root = up;
    for (let at = key; at !== root; ) {
      const up = this.parent.get(at)!;
      this.parent.set(at, root);
      at = up;
    }
    if (!this.parent.has(root)) this.parent.set(root, root);
    return root;
  }
}

export const pointKey = (name: string) => `point ${name}`;
export const axisKey = (id: string) => `setup ${id}`;
