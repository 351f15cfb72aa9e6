import { type Identification, type IdentificationError, identify } from '@/lib/compute/survey/identify';
import type { ControlIndex } from '@/lib/compute/survey/identifyControl';
import type { Sighting, UnnamedShot } from '@/lib/compute/survey/identifyReflectors';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import type { SetupNote } from './result';

/** More control points than a setup's shots are searched among. */
export const MOST_POINTS = 10_000;

export interface Identified {
  identification: Identification;
  /** Name of each shot's target; shots of strays are not in it. */
  names: ReadonlyMap<string, string>;
}

/**
 * The targets of unnamed shots. Shots to named marks, which are checks, decide where several assignments fit.
 *
 * @throws IdentificationError where none fits
 */
export function identifyTargets(
  index: ControlIndex,
  input: Sighting & {
    shots: readonly UnnamedShot[];
    named: readonly Shot[];
    control: ReadonlyMap<string, ControlMark>;
  },
): Identified {
  const { control } = input;
  const named = input.named.filter(({ target }) => control.get(target)?.status !== 'quarantined');
  const identification = identify(index, { ...input, named });
  return { identification, names: targetsOf(identification) };
}

/** Name of each shot's target in the best assignment, by the shot's id; shots of strays are not in it. */
export function targetsOf({ reflectors, best }: Identification): Map<string, string> {
  const names = new Map<string, string>();
  reflectors.forEach(({ shots }, k) => {
    const name = best.marks[k];
    if (name !== null) for (const id of shots) names.set(id, name);
  });
  return names;
}

/** What an identification leaves to be known, though no verdict hangs on it. */
export function notesOfIdentification({ strays, samePlace }: Identification): SetupNote[] {
  return [
    ...strays.map((stray): SetupNote => ({ code: 'stray_shots', ...stray })),
    ...samePlace.map((one): SetupNote => ({ code: 'same_place', ...one })),
  ];
}

/** Why no control was found behind the shots, and what to do. */
export function wordsOfNoIdentification({ code, facts }: IdentificationError): {
  detail: string;
  fix: string;
} {
  const { reflectors, points, most, shots } = facts;
  switch (code) {
    case 'reading_lacks':
      return {
        detail: `${shots.join(', ')}: an unnamed shot is known by its place alone, which takes horizontal, zenith and slopeDistance; a second face may leave out the distance.`,
        fix: 'Send all three readings, or name the targets and send a resection.',
      };
    case 'too_few_reflectors':
      return {
        detail: `The shots go to ${reflectors === 1 ? 'one place' : `${reflectors} places`}: any two points equally far apart would fit. Faces, sets and repeats do not count.`,
        fix: 'Shoot at least three reflectors, better five; or name the targets and send a resection.',
      };
    case 'too_little_control':
      return {
        detail: `The project has ${points === 1 ? 'one control point' : `${points} control points`} that may be used; three are the least.`,
        fix: 'Post the control first.',
      };
    case 'no_fit':
      return {
        detail: `No control points lie as the ${reflectors} reflectors do: ${most === 0 ? 'no three of them fit' : `at most ${most} of them fit together, and more than half have to`}, within what is stated of instrument and control.`,
        fix: 'Check prism constant, units and target heights, and that the control is this site’s; or name the targets and send a resection, which names the fault.',
      };
    case 'too_many_fits':
      return {
        detail:
          'The control is so dense, or stated so coarsely, that too many points fit the shots to look at them all.',
        fix: 'State the control’s accuracy, shoot more reflectors, or name the targets and send a resection.',
      };
  }
}
