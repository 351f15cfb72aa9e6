import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Identification, IdentificationError } from '@/lib/compute/survey/identify';
import type { ControlMark } from '@/lib/compute/survey/shots';
import { wrapTurn } from '@/lib/compute/units/angles';
import { seededChance } from '@/tests/simulator/chance';
import { amongPoints, crowdedSite } from '@/tests/simulator/crowdedSite';
import { REGULAR_LAYOUTS } from '@/tests/simulator/regularLayouts';
import { asTask, identified, namesOf, type Task } from './identifySite';

const RUNS = { numRuns: 60, seed: 9 };
const TURN = 2 * Math.PI;
const REPEATING = REGULAR_LAYOUTS.filter(([name]) => name.startsWith('pegs')).map(([, layout]) => layout);

/** Sites of all sorts, some that repeat themselves. */
const anyTask: fc.Arbitrary<Task> = fc
  .record({
    seed: fc.integer({ min: 1, max: 1_000_000 }),
    repeating: fc.boolean(),
    strays: fc.constantFrom(0, 1),
  })
  .map(({ seed, repeating, strays }) => {
    const chance = seededChance(seed);
    if (!repeating) return asTask(crowdedSite(chance, { points: [100, 600], strays }));
    const layout = REPEATING[seed % REPEATING.length];
    return asTask(amongPoints(chance, layout(chance), { strays: 0 }));
  });

function found(task: Task): Identification {
  const one = identified(task);
  if (one instanceof IdentificationError) throw one;
  return one;
}

/** Each shot's target, where there is one answer; how many answers there are, and how far apart they are. */
function same(task: Task, one: Identification, other: Identification, nameOf = (name: string) => name) {
  expect(other.ambiguous).toBe(one.ambiguous);
  expect(Math.abs(other.margin - one.margin)).toBeLessThan(1e-3);
  expect(other.rivals.length).toBe(one.rivals.length);
  expect(other.best.weightedSquares).toBeCloseTo(one.best.weightedSquares, 4);
  // Of answers that fit alike, rounding chooses which comes first.
  if (one.ambiguous) return;
  const [names, others] = [namesOf(one), namesOf(other)];
  for (const { id } of task.shots) {
    const name = names.get(id) ?? null;
    expect(others.get(id)).toBe(name === null ? null : nameOf(name));
  }
}

function withMarks(task: Task, change: (mark: ControlMark) => ControlMark): Task {
  const marks = [...task.marks.values()].map(change);
  return { ...task, marks: new Map(marks.map((mark) => [mark.name, mark])) };
}

describe('an identification', () => {
  it('turns and shifts with its control', () => {
    const metres = fc.double({ min: -5000, max: 5000, noNaN: true });
    const angles = fc.double({ min: 0, max: TURN, noNaN: true });
    fc.assert(
      fc.property(anyTask, angles, metres, metres, metres, (task, angle, east, north, up) => {
        const [first] = task.marks.values();
        const [s, c] = [Math.sin(angle), Math.cos(angle)];
        const moved = withMarks(task, (mark) => {
          const [e, n] = [mark.easting - first.easting, mark.northing - first.northing];
          return {
            ...mark,
            easting: first.easting + east + c * e + s * n,
            northing: first.northing + north + c * n - s * e,
            elevation: mark.elevation! + up,
          };
        });
        const [one, other] = [found(task), found(moved)];
        same(task, one, other);
        if (!one.ambiguous) {
          const turned = wrapTurn(
            other.best.station.orientation - one.best.station.orientation - angle + Math.PI,
          );
          expect(turned).toBeCloseTo(Math.PI, 6);
        }
      }),
      RUNS,
    );
  });

  it('does not depend on where the circle’s zero lies', () => {
    fc.assert(
      fc.property(anyTask, fc.double({ min: 0, max: TURN, noNaN: true }), (task, angle) => {
        const shots = task.shots.map((shot) => ({ ...shot, direction: wrapTurn(shot.direction! + angle) }));
        same(task, found(task), found({ ...task, shots }));
      }),
      RUNS,
    );
  });

  it('does not depend on what the points are called', () => {
    fc.assert(
      fc.property(anyTask, fc.string({ minLength: 1, maxLength: 3 }), (task, prefix) => {
        const nameOf = (name: string) => `${prefix}${[...name].reverse().join('')}`;
        const renamed = withMarks(task, (mark) => ({ ...mark, name: nameOf(mark.name) }));
        same(task, found(task), found(renamed), nameOf);
      }),
      RUNS,
    );
  });

  it('does not depend on the order of shots and points', () => {
    const anyOrder = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 700, maxLength: 700 });
    fc.assert(
      fc.property(anyTask, anyOrder, (task, keys) => {
        const shuffled = <T>(list: readonly T[]) =>
          list
            .map((item, i) => ({ item, key: keys[i % keys.length] }))
            .sort((a, b) => a.key - b.key)
            .map(({ item }) => item);
        const other = { ...task, shots: shuffled(task.shots), marks: new Map(shuffled([...task.marks])) };
        same(task, found(task), found(other));
      }),
      RUNS,
    );
  });
});
