import { type Identification, IdentificationError, identify } from '@/lib/compute/survey/identify';
import { ControlIndex } from '@/lib/compute/survey/identifyControl';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import type { Unnamed } from '@/tests/simulator/crowdedSite';
import { asEngine, asMark } from './asEngine';

/** A simulated setup as the identification takes it, with the true target of each shot kept aside. */
export function asTask({ observed, control, truth }: Unnamed) {
  const { shots, accuracy, surroundings, ppm } = asEngine(observed);
  const marks = new Map<string, ControlMark>(control.map((mark) => [mark.name, asMark(mark)]));
  return { shots, truth, marks, sighting: { accuracy, surroundings, ppm } };
}

export type Task = ReturnType<typeof asTask>;

export function identified(
  { shots, marks, sighting }: Task,
  named: readonly Shot[] = [],
): Identification | IdentificationError {
  const unnamed = shots.map(({ target: _, ...shot }) => shot);
  try {
    return identify(new ControlIndex(marks.values()), { ...sighting, shots: unnamed, named, control: marks });
  } catch (error) {
    if (error instanceof IdentificationError) return error;
    throw error;
  }
}

/** Target of each shot by its id, as identified. */
export function namesOf({ reflectors, best }: Identification): Map<string, string | null> {
  return new Map(reflectors.flatMap(({ shots }, k) => shots.map((id) => [id, best.marks[k]])));
}

export type Outcome = 'right' | 'wrong' | 'ambiguous' | 'refused';

export function outcome(task: Task, found = identified(task)): Outcome {
  if (found instanceof IdentificationError) return 'refused';
  if (found.ambiguous) return 'ambiguous';
  const names = namesOf(found);
  return task.shots.every(({ id, target }) => names.get(id) === task.truth.get(target)) ? 'right' : 'wrong';
}
