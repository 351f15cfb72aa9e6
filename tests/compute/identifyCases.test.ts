import { beforeAll, describe, expect, it } from 'vitest';
import { type Identification, IdentificationError } from '@/lib/compute/survey/identify';
import { ControlIndex } from '@/lib/compute/survey/identifyControl';
import type { ControlMark } from '@/lib/compute/survey/shots';
import { seededChance } from '@/tests/simulator/chance';
import { amongPoints, type Crowd, crowdedSite } from '@/tests/simulator/crowdedSite';
import { REGULAR_LAYOUTS } from '@/tests/simulator/regularLayouts';
import { asTask, identified, namesOf, outcome, type Task } from './identifySite';

const BOTH = { faces: ['left', 'right'], sets: 2 } satisfies Crowd['programme'];

const taskOf = (seed: number, crowd: Crowd = {}) =>
  asTask(
    crowdedSite(seededChance(seed), {
      points: [400, 400],
      spacing: [15, 15],
      shots: [6, 6],
      strays: 0,
      ...crowd,
    }),
  );

function found(task: Task): Identification {
  const one = identified(task);
  if (one instanceof IdentificationError) throw one;
  return one;
}

function refusal(task: Task): IdentificationError {
  const one = identified(task);
  if (one instanceof IdentificationError) return one;
  throw new Error('It was identified.');
}

const targetsOf = (task: Task) => [...new Set(task.shots.map(({ target }) => target))];
const withMark = (task: Task, mark: ControlMark) => ({
  ...task,
  marks: new Map(task.marks).set(mark.name, mark),
});

describe('shots to one mark', () => {
  it('are one reflector in both faces and in all sets', () => {
    const task = taskOf(1, { programme: BOTH });
    expect(task.shots).toHaveLength(24);
    const { reflectors, best } = found(task);
    expect(reflectors.map(({ shots }) => shots.length)).toEqual([4, 4, 4, 4, 4, 4]);
    expect(best.matched).toBe(6);
    expect(outcome(task)).toBe('right');
  });

  it('are one mark at two target heights', () => {
    const task = taskOf(2);
    const [shot] = task.shots;
    const lifted = 0.4;
    const { slopeDistance } = shot.distance!;
    // The same mark seen 0.4 m higher on the pole, by the law of cosines in the vertical plane.
    const [across, up] = [
      slopeDistance * Math.sin(shot.zenith!),
      slopeDistance * Math.cos(shot.zenith!) + lifted,
    ];
    const higher = {
      ...shot,
      id: 'higher',
      face: 'left' as const,
      zenith: Math.atan2(across, up),
      distance: { ...shot.distance!, slopeDistance: Math.hypot(across, up) },
      targetHeight: shot.targetHeight + lifted,
    };
    const { reflectors } = found({
      ...task,
      shots: [...task.shots.filter(({ face }) => face === 'left'), higher],
    });
    expect(reflectors).toHaveLength(6);
    expect(reflectors.find(({ shots }) => shots.includes('higher'))?.shots).toContain(shot.id);
  });

  it('count a second face without distance to the mark on its line', () => {
    const task = taskOf(3, { programme: { faces: ['left', 'right'], sets: 1 } });
    const shots = task.shots.map((shot) => (shot.face === 'right' ? { ...shot, distance: null } : shot));
    expect(outcome({ ...task, shots })).toBe('right');
  });
});

describe('a stray', () => {
  it('has no mark, and says which point it misses and by how much', () => {
    const task = taskOf(4, { strays: 1, shots: [8, 8] });
    const [stray] = [...task.truth].flatMap(([name, mark]) => (mark === null ? name : []));
    const { strays, ambiguous, best } = found(task);
    expect(ambiguous).toBe(false);
    expect(best.matched).toBe(7);
    expect(strays).toHaveLength(1);
    expect(strays[0].shots.every((id) => id.startsWith(`${stray}/`))).toBe(true);
    expect(strays[0].nearest!.horizontal).toBeGreaterThan(0.1);
  });

  it('is a mark that was bumped since it was published', () => {
    const task = taskOf(5);
    const [bumped] = targetsOf(task);
    const mark = task.marks.get(bumped)!;
    const moved = withMark(task, { ...mark, easting: mark.easting + 0.15 });
    const { strays, ambiguous } = found(moved);
    expect(ambiguous).toBe(false);
    expect(strays.map(({ nearest }) => nearest?.target)).toEqual([bumped]);
    expect(strays[0].nearest!.horizontal).toBeGreaterThan(0.13);
    expect(strays[0].nearest!.horizontal).toBeLessThan(0.17);
  });

  it('may be two of five, the other three agreeing', () => {
    const task = taskOf(6, { strays: 2, shots: [5, 5] });
    expect(outcome(task)).toBe('right');
  });
});

describe('two points at one place', () => {
  const twin = (task: Task, changes: Partial<ControlMark>) => {
    const [name] = targetsOf(task);
    return { name, task: withMark(task, { ...task.marks.get(name)!, name: 'TWIN', ...changes }) };
  };

  it('are one, by the first name, and the other name is told', () => {
    const { name, task } = twin(taskOf(7), {});
    const { ambiguous, samePlace } = found(task);
    expect(ambiguous).toBe(false);
    expect(samePlace).toEqual([{ target: name, others: ['TWIN'] }]);
  });

  it('are the trusted one before a suspect one', () => {
    const { name, task } = twin(taskOf(7), {});
    const suspect = withMark(task, { ...task.marks.get(name)!, status: 'suspect' });
    expect(found(suspect).samePlace).toEqual([{ target: 'TWIN', others: [name] }]);
  });

  it('are ambiguous where they stand too near to be told apart and too far to be one', () => {
    const { task } = twin(taskOf(7), {});
    const mark = task.marks.get('TWIN')!;
    const near = withMark(task, { ...mark, easting: mark.easting + 2 * mark.horizontalSigma });
    const { ambiguous, margin, rivals } = found(near);
    expect(ambiguous).toBe(true);
    expect(margin).toBeLessThan(Math.log(1000));
    expect(rivals).toHaveLength(1);
  });

  it('are ambiguous in all of their marks where a second list is shifted a little', () => {
    const task = taskOf(8);
    const shifted = [...task.marks.values()].map((mark) => ({
      ...mark,
      name: `${mark.name}x`,
      easting: mark.easting + 0.05,
    }));
    const both = {
      ...task,
      marks: new Map([...task.marks, ...shifted.map((mark) => [mark.name, mark] as const)]),
    };
    expect(outcome(both)).toBe('ambiguous');
  });
});

describe('control', () => {
  it('that is quarantined is never found', () => {
    const task = taskOf(9);
    const [name] = targetsOf(task);
    const { best, strays } = found(withMark(task, { ...task.marks.get(name)!, status: 'quarantined' }));
    expect(best.marks).not.toContain(name);
    expect(strays).toHaveLength(1);
  });

  it('without elevations is found by its plan alone', () => {
    const task = taskOf(10);
    const flat = [...task.marks].map(([name, mark]) => [name, { ...mark, elevation: null }] as const);
    const plan = { ...task, marks: new Map(flat) };
    expect(outcome(plan)).toBe('right');
    expect(found(plan).best.station.axis).toBeNull();
  });

  it('with one point at the origin and one across the world is found all the same', () => {
    const task = taskOf(11);
    const [mark] = task.marks.values();
    const far = withMark(withMark(task, { ...mark, name: 'O', easting: 0, northing: 0 }), {
      ...mark,
      name: 'Z',
      easting: 9e6,
      northing: 9e6,
    });
    expect(outcome(far)).toBe('right');
  });

  it('in one corner of a site is searched without the others', () => {
    const task = taskOf(12, { points: [2000, 2000], shots: [4, 4] });
    expect(outcome(task)).toBe('right');
  });
});

describe('a shot by name', () => {
  let task: Task;
  let open: Identification;
  beforeAll(() => {
    const chance = seededChance(13);
    const layout = REGULAR_LAYOUTS.find(([name]) => name === 'pegs mirrored by a half turn')![1];
    task = asTask(amongPoints(chance, layout(chance), { strays: 0, shots: [6, 6], programme: BOTH }));
    open = found(task);
  });

  it('tells between stands that fit alike', () => {
    expect(open.ambiguous).toBe(true);
    expect(open.rivals).toHaveLength(1);
    const [shot] = task.shots;
    const settled = identified(
      task,
      task.shots.filter(({ target }) => target === shot.target),
    );
    if (settled instanceof IdentificationError) throw settled;
    expect(settled.ambiguous).toBe(false);
    for (const { id, target } of task.shots) expect(namesOf(settled).get(id)).toBe(target);
  });

  it('is proposed where its readings differ, with what they would be', () => {
    const { target, readings, apart } = open.deciding!;
    expect(task.marks.has(target)).toBe(true);
    expect(readings).toHaveLength(2);
    expect(apart).toBeGreaterThan(10);
    const [one, other] = readings.map(({ direction, grid }) => [
      grid * Math.sin(direction),
      grid * Math.cos(direction),
    ]);
    expect(Math.hypot(one[0] - other[0], one[1] - other[1])).toBeGreaterThan(9);
  });
});

describe('nothing is identified', () => {
  it('from two reflectors, though they were shot often', () => {
    expect(refusal(taskOf(14, { shots: [2, 2], programme: BOTH }))).toMatchObject({
      code: 'too_few_reflectors',
      facts: { reflectors: 2 },
    });
  });

  it('from shots without a distance or a zenith angle, which are told', () => {
    const task = taskOf(15);
    const shots = task.shots.map((shot, i) => (i === 0 ? { ...shot, zenith: null } : shot));
    expect(refusal({ ...task, shots })).toMatchObject({
      code: 'reading_lacks',
      facts: { shots: [shots[0].id] },
    });
  });

  it('from two control points', () => {
    const task = taskOf(16);
    const marks = new Map([...task.marks].slice(0, 2));
    expect(refusal({ ...task, marks })).toMatchObject({ code: 'too_little_control', facts: { points: 2 } });
  });

  it('on the control of another site', () => {
    const [task, other] = [taskOf(17), taskOf(18)];
    expect(refusal({ ...task, marks: other.marks }).code).toBe('no_fit');
  });

  it('of shots whose distances are all out of scale', () => {
    const task = taskOf(19);
    const shots = task.shots.map((shot) => ({
      ...shot,
      distance: { ...shot.distance!, slopeDistance: shot.distance!.slopeDistance / 0.3048 },
    }));
    expect(refusal({ ...task, shots }).code).toBe('no_fit');
  });
});

it('looks for pairs among crowded marks until it has compared as many as it may, or is told to stop', () => {
  // Two clusters far apart.
  const marks = Array.from({ length: 2000 }, (_, i): ControlMark => {
    const corner = (i % 2) * 1e6;
    const [easting, northing] = [corner + (i % 50) * 20, corner + Math.floor(i / 50) * 25];
    const sigmas = { horizontalSigma: 0.003, verticalSigma: 0.003 };
    return { name: `P${i}`, version: 1, easting, northing, elevation: 1, ...sigmas, status: 'trusted' };
  });
  const index = new ControlIndex(marks);
  const pairs = (most: number, goOn: boolean) => {
    let count = 0;
    const compared = index.pairs({ distance: 100, rise: 0 }, { distance: 0.01, rise: 0.01 }, most, () => {
      count++;
      return goOn;
    });
    return { count, compared };
  };
  const all = pairs(Number.POSITIVE_INFINITY, true);
  expect(all.count).toBeGreaterThan(2000);
  const some = pairs(20_000, true);
  expect(some.count).toBeLessThan(all.count);
  expect(some.compared).toBeLessThan(20_000 + 2 * marks.length);
  expect(pairs(Number.POSITIVE_INFINITY, false).count).toBe(1);
});
