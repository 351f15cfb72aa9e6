import type {
  LeftOut,
  NetworkError,
  NetworkObservation,
  RemovedObservation,
} from '@/lib/compute/survey/networkResult';
import type { Axis } from '@/lib/compute/survey/verdict';
import type { Lengths } from '@/lib/services/lengths';
import type { Words } from '@/lib/services/setups/words';
import type { AdjustmentNote, AdjustmentReason } from './judge';
import { figureOf } from './observationUnits';
import type { AdjustmentInput } from './result';

const PLACE: Record<Axis, string> = { horizontal: 'in plan', vertical: 'in height' };

const KIND: Record<NetworkObservation['kind'], string> = {
  direction: 'direction',
  zenith: 'zenith angle',
  distance: 'distance',
  levelDifference: 'levelled difference',
  position: 'rover position',
  baseline: 'baseline',
  control: 'published coordinate',
  instrumentCentring: 'centring of the instrument',
  instrumentHeight: 'height of the instrument',
  targetCentring: 'centring of the target',
  targetHeight: 'height of the target',
  refraction: 'refraction',
  collimation: 'collimation',
  verticalIndex: 'vertical index',
  scale: 'scale of the distances',
};

/** More names than that are counted instead. */
const MOST_NAMES = 8;

function names(list: readonly string[]): string {
  const shown = list.slice(0, MOST_NAMES).join(', ');
  return list.length > MOST_NAMES ? `${shown} and ${list.length - MOST_NAMES} more` : shown;
}

/** The client id of a setup or of the level run that a difference is cut from. */
function sourceName({ setups, levelRuns }: AdjustmentInput, source: string): string {
  const [id] = source.split('/');
  return [...setups, ...levelRuns].find((item) => item.id === id)?.clientId ?? source;
}

/** `direction from st-7 to HT-104`. */
export function observationName(
  { kind, source, from, to, component }: NetworkObservation,
  input: AdjustmentInput,
): string {
  const what = component === null ? KIND[kind] : `${KIND[kind]} (${component})`;
  if (kind === 'control') return `${what} of ${source}`;
  const place = input.setups.some(({ id }) => id === source) ? sourceName(input, source) : (from ?? source);
  return to === null ? `${what} of ${place}` : `${what} from ${place} to ${to}`;
}

/** @param observations those that the reasons name, by their numbers */
export function wordsOfReason(
  reason: AdjustmentReason,
  observations: ReadonlyMap<number, NetworkObservation>,
  input: AdjustmentInput,
): Words {
  const { code } = reason;
  switch (code) {
    case 'not_converged':
      return {
        code,
        text: 'The adjustment did not converge: observations contradict each other, or a target is misnamed.',
        action: 'Adjust fewer setups at a time to find the one that does not belong; check its target names.',
      };
    case 'too_many_removed':
      return {
        code,
        text: `${reason.removed} of ${reason.observations} observations do not fit the others: that is no single blunder.`,
        action:
          'Check prism constants, units and the stated accuracy of the instruments; adjust again without the setups that failed.',
      };
    case 'observation_outlier': {
      const name = observationName(observations.get(reason.observation)!, input);
      const why = reason.alone ? ' Too little else controls it to tell where the error is.' : '';
      return {
        code,
        text: `The ${name} does not fit the others: w = ${reason.value.toFixed(1)}, limit ${reason.limit}.${why}`,
        action: reason.alone ? 'Observe there again.' : 'Adjust again with snooping, or without the setup.',
      };
    }
    case 'spread_too_large':
      return {
        code,
        text: `The residuals are larger than the stated accuracies allow: σ₀ = ${reason.value.toFixed(2)}, limit ${reason.limit.toFixed(2)}.`,
        action: 'Look at the largest w; check the stated accuracy of instruments and control.',
      };
    case 'control_disagrees':
      return {
        code,
        text: `${names(reason.points)}: the observations contradict the published coordinates, which were taken out.`,
        action: 'Look at the mark in the field, and call it suspect until it is explained.',
      };
    case 'nothing_redundant':
      return {
        code,
        text: 'No observation is more than the least that is needed: no error would show.',
        action: 'Add setups that see the same points from elsewhere.',
      };
    case 'points_unchecked':
      return {
        code,
        text: `${names(reason.points)}: reached from one setup alone ${PLACE[reason.axis]}, so that an error there would not show.`,
        action: 'Observe from a second setup, or leave these points as they are when you apply it.',
      };
    case 'network_fits':
      return {
        code,
        text: `${reason.observations} observations agree, ${reason.redundancy} of them over.`,
        action: 'Read the shifts, then apply it if the control is to follow.',
      };
  }
}

const MOVEMENT = {
  easting: 'to the east',
  northing: 'to the north',
  elevation: 'in height',
  rotation: 'by turning',
};

export function wordsOfNote(note: AdjustmentNote): Words {
  const { code } = note;
  switch (code) {
    case 'observations_removed':
      return {
        code,
        text: `${note.removed} of ${note.observations} observations were taken out, the worst first; \`removed\` says which and by how much they were off.`,
      };
    case 'held_not_tested':
      return {
        code,
        text: `${note.points} points were held: an error in their coordinates bends the network instead of showing as theirs.`,
        action: 'Adjust once with them weighted before you trust them.',
      };
    case 'datum_free': {
      const ways = note.free.map((movement) => MOVEMENT[movement]).join(', ');
      return {
        code,
        text: `Nothing observed how the network lies ${ways}: its free points were moved least.`,
      };
    }
    case 'datum_point_unseen':
      return { code, text: `${names(note.points)}: named for the datum, but no observation reaches it.` };
    case 'points_not_trusted':
      return {
        code,
        text: `${names(note.points)}: suspect or quarantined, so found anew from the observations.`,
      };
    case 'points_not_determined':
      return { code, text: `${names(note.points)}: not determined ${PLACE[note.axis]}.` };
    case 'setups_failed':
      return {
        code,
        text: `${names(note.setups)}: failed when computed, and takes part all the same.`,
        action: 'If many of its observations were taken out, adjust again without it.',
      };
    case 'setups_taken_back':
      return {
        code,
        text: `${names(note.setups)}: withdrawn or superseded, and takes part because it was named.`,
        action: 'Adjust again with the setups that stand, unless this one is meant.',
      };
    case 'setups_ambiguous':
      return {
        code,
        text: `${names(note.setups)}: more than one assignment of targets fits the shots, so it took no part.`,
        action: 'Let a check by name decide, then adjust again.',
      };
    case 'atmosphere_unknown':
      return {
        code,
        text: `${names(note.setups)}: no atmosphere was given, so the scale of the distances is found from the network.`,
      };
    case 'spread_small':
      return {
        code,
        text: `The residuals are smaller than stated (σ₀ = ${note.value.toFixed(2)}): the accuracies may be stated too wide.`,
      };
    case 'spread_scaled':
      return { code, text: `All standard deviations were multiplied by σ₀ = ${note.value.toFixed(2)}.` };
  }
}

/** Which observation was taken out, and how far it was off as the others tell it. */
export function wordsOfRemoved(
  observation: NetworkObservation,
  { error, errorSigma, standardised, alternatives }: RemovedObservation,
  named: ReadonlyMap<number, NetworkObservation>,
  input: AdjustmentInput,
  length: Lengths,
): string {
  const name = observationName(observation, input);
  const off = `${figureOf(observation, error, length)} ± ${figureOf(observation, errorSigma, length)}`;
  const others = alternatives.map((number) => `the ${observationName(named.get(number)!, input)}`);
  const instead = others.length > 0 ? ` It may be ${names(others)} instead: nothing tells them apart.` : '';
  return `The ${name} is off by ${off} as the others tell it (w = ${standardised.toFixed(1)}).${instead}`;
}

export function wordsOfLeftOut({ kind, source, reason, shots }: LeftOut, input: AdjustmentInput): string {
  const which = shots.length > 0 ? ` (${names(shots)})` : '';
  const what = `${sourceName(input, source)}, ${kind}${which}`;
  switch (reason) {
    case 'zenith_wanted':
      return `${what}: a slope distance without its zenith angle, between ends whose heights are not both known.`;
    case 'not_connected':
      return `${what}: neither the datum nor any other observation leads there.`;
  }
}

/** Why a network could not be adjusted at all. */
export function wordsOfError(
  { code, points, sources }: Pick<NetworkError, 'code' | 'points' | 'sources'>,
  input: AdjustmentInput,
): string {
  const where = names([...points, ...sources.map((source) => sourceName(input, source))]);
  switch (code) {
    case 'no_observations':
      return 'No observation is left to adjust: no setup and no level run fits what was asked for.';
    case 'no_datum':
      return 'No point of the datum was seen: name points that the setups have shots to, or adjust it free.';
    case 'not_determined':
      return `The observations do not determine ${where || 'the network'}.`;
    case 'contradiction':
      return `The observations contradict each other${where ? `, worst at ${where}` : ''}: check target names and units there.`;
  }
}

export const APPLY_CAUTIONS: readonly string[] = [
  'Setups in force keep the control that they were computed with: set up anew, or check them, before anybody relies on the new versions.',
  'Site rules, local codes and the judgement of a licensed surveyor come before this record; it supports them and replaces none.',
];
