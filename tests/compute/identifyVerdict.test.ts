import { describe, expect, it } from 'vitest';
import { type Identification, IdentificationError } from '@/lib/compute/survey/identify';
import type { Shot } from '@/lib/compute/survey/shots';
import { computeSetup, judgeWithCheck, type SetupTask } from '@/lib/services/setups/compute';
import { seededChance } from '@/tests/simulator/chance';
import { amongPoints, crowdedSite } from '@/tests/simulator/crowdedSite';
import { REGULAR_LAYOUTS } from '@/tests/simulator/regularLayouts';
import { asTask, identified, namesOf, type Task } from './identifySite';

const BOTH = { faces: ['left', 'right'] as ('left' | 'right')[], sets: 1 };
const limits = {
  residual: { horizontal: 0.02, vertical: 0.02 },
  work: { radius: 50, horizontal: 0.05, vertical: 0.05 },
  checkRequired: false,
};

const mirrored = (seed: number): Task => {
  const chance = seededChance(seed);
  const layout = REGULAR_LAYOUTS.find(([name]) => name === 'pegs mirrored by a half turn')![1];
  return asTask(amongPoints(chance, layout(chance), { strays: 0, shots: [6, 6], programme: BOTH }));
};

/** The setup that an identification makes, as the hub computes it. */
function computed(task: Task) {
  const found = identified(task);
  if (found instanceof IdentificationError) throw found;
  const names = namesOf(found);
  const shots = task.shots.flatMap((shot): Shot[] => {
    const target = names.get(shot.id);
    return target ? [{ ...shot, target }] : [];
  });
  const input: SetupTask = {
    ...task.sighting,
    shots,
    control: task.marks,
    limits,
    notes: [],
    identification: found,
  };
  return { found, names, result: computeSetup(input).result };
}

/** A later check with what was read to the first target, by a name. */
function checked(task: Task, result: ReturnType<typeof computed>['result'], name: string) {
  const [{ target: first }] = task.shots;
  const shots = task.shots
    .filter(({ target }) => target === first)
    .map((shot): Shot => ({ ...shot, id: `later/${shot.id}`, purpose: 'check', target: name }));
  return judgeWithCheck(result, shots, task.marks, [], []).result;
}

const ambiguity = ({ reasons }: { reasons: { code: string }[] }) =>
  reasons.some(({ code }) => code === 'identification_ambiguous');
const listed = ({ best, rivals }: Identification, k: number) =>
  [best, ...rivals].map(({ marks }) => marks[k]);

describe('a setup whose targets were identified', () => {
  it('passes where nothing else fits', () => {
    const { result } = computed(
      asTask(
        crowdedSite(seededChance(21), {
          points: [300, 300],
          spacing: [20, 20],
          shots: [7, 7],
          strays: 1,
          programme: BOTH,
        }),
      ),
    );
    expect(result.verdict).toBe('pass');
    expect(result.marks).toHaveLength(6);
    expect(result.notes).toContainEqual(expect.objectContaining({ code: 'stray_shots' }));
    expect(ambiguity(result)).toBe(false);
  });

  it('is held where something else fits, however well it fits itself', () => {
    for (let seed = 30; seed < 60; seed++) {
      const { result } = computed(mirrored(seed));
      expect(result.verdict).not.toBe('pass');
      expect(Object.values(result.verdicts)).not.toContain('pass');
      expect(result.reasons[0].code).toBe('identification_ambiguous');
      expect(result.reasons.map(({ code }) => code)).not.toContain('within_limits');
    }
  });

  it('stays so through a check that does not tell, and is settled by one that does', () => {
    const task = mirrored(31);
    const { found, result } = computed(task);
    const k = found.reflectors.findIndex(({ shots }) => shots.includes(task.shots[0].id));
    const [own, other] = listed(found, k);
    const settled = checked(task, result, own!);
    expect(ambiguity(settled)).toBe(false);
    expect(settled.identification).toMatchObject({ ambiguous: false, rivals: [], deciding: null });
    expect(settled.identification!.margin).toBeGreaterThan(Math.log(1000));
    expect(settled.verdict).toBe('pass');

    const contradicted = checked(task, result, other!);
    expect(contradicted.verdict).toBe('fail');
    expect(contradicted.reasons[0]).toMatchObject({
      code: 'identification_ambiguous',
      contradictedBy: [other],
    });

    const elsewhere = [...task.marks.keys()].find((name) => name !== own && name !== other)!;
    const neither = checked(task, result, elsewhere);
    expect(neither.identification).toMatchObject({ ambiguous: true, contradictedBy: [] });
    expect(ambiguity(neither)).toBe(true);
  });
});
