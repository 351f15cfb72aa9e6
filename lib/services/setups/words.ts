import type { Explanation } from '@/lib/compute/survey/explain';
import type { Axis, SetupReason, Verdict } from '@/lib/compute/survey/verdict';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import { firstAct } from './explanationWords';
import { wordsOfAmbiguity, wordsOfStray } from './identificationWords';
import type { SetupNote } from './result';

/** A finding in plain words, with what to do next. */
export interface Words {
  code: string;
  text: string;
  action?: string;
}

const PLACE: Record<Axis, string> = { horizontal: 'in plan', vertical: 'in height' };
const KIND = { direction: 'direction', zenith: 'zenith angle', distance: 'distance' } as const;

function axes(list: readonly Axis[]): string {
  return list.map((axis) => PLACE[axis]).join(' and ');
}

/** One decimal more than the unit usually shows: residuals are small. */
function fine(length: Lengths, metres: number): string {
  return length.text(metres, length.unit === 'm' ? 4 : 3);
}

function wordsOfMiss(
  { axis, target, value, limit }: { axis: Axis; target: string; value: number; limit: number },
  length: Lengths,
): string {
  const what = axis === 'horizontal' ? 'distance' : 'difference of heights';
  return `The ${what} to ${target} is ${fine(length, Math.abs(value))} ${value > 0 ? 'more' : 'less'} than the published coordinates make it, ${fine(length, limit)} allowed`;
}

/** Why the verdict is what it is. */
function wordsOfReason(reason: SetupReason, length: Lengths): Words {
  const { code } = reason;
  switch (code) {
    case 'not_converged':
      return {
        code,
        text: 'The adjustment did not converge: the shots contradict each other or a target is misnamed.',
        action: 'Check the target names, then shoot again.',
      };
    case 'observation_outlier':
      return {
        code,
        text: `The ${KIND[reason.kind]} to ${reason.target} does not fit the others: w = ${reason.value.toFixed(1)}, limit ${reason.limit}.`,
        action: `Shoot ${reason.target} again, or refit without it.`,
      };
    case 'target_residual_over':
      return {
        code,
        text: `${reason.target} disagrees by ${fine(length, reason.value)} ${PLACE[reason.axis]}, ${fine(length, reason.limit)} allowed.`,
        action: `Shoot ${reason.target} again, or refit without it.`,
      };
    case 'backsight_over':
      return {
        code,
        text: `${wordsOfMiss(reason, length)}.`,
        action:
          reason.axis === 'horizontal'
            ? `Check the names of ${reason.target} and of the occupied mark, the prism constant and the centring, then shoot again.`
            : `Measure the instrument height and the target height at ${reason.target} again.`,
      };
    case 'backsight_unproven':
      return {
        code,
        text: `${wordsOfMiss(reason, length)}; but that is only known to ±${fine(length, 2 * reason.uncertainty)} (2u), so that it proves nothing against the mark, and nothing for it.`,
        action:
          reason.axis === 'horizontal'
            ? 'Shoot a check on a mark whose coordinates are better known.'
            : `Measure the distance to ${reason.target} with the zenith angle, or shoot a check on a mark that is better known.`,
      };
    case 'orientation_undetermined':
      return {
        code,
        text: 'No direction was read: the place is known, the orientation is not. Nothing can be shot from here.',
        action: 'Read the circle to a mark, better to two, and post the setup again.',
      };
    case 'orientation_unproven': {
      const what = reason.measured
        ? 'its distance proves the line, not its direction'
        : 'not even its distance was measured';
      const text =
        reason.target === null
          ? 'No trusted mark orients the circle.'
          : `${reason.target} alone orients the circle: ${what}. If that mark has moved sideways, nothing shows it.`;
      return {
        code,
        text,
        action: 'Shoot a second backsight, or a check on another mark that took no part in the fit.',
      };
    }
    case 'backsights_disagree':
      return {
        code,
        text: `Without ${reason.target} the circle turns by ${toArcseconds(Math.abs(reason.turn)).toFixed(0)}″: ${fine(length, reason.value)} at that mark, more than the ${fine(length, reason.limit)} allowed.`,
        action: 'Shoot a third backsight: it tells which of them is off.',
      };
    case 'occupied_unproven':
      return {
        code,
        text: `That the instrument stands over ${reason.target} is proven by nothing: the backsights alone do not find its place.`,
        action: 'Measure the distances to the backsights, or check on another mark.',
      };
    case 'occupied_suspect':
      return {
        code,
        text: `${reason.target}, the occupied mark, is not trusted: what is set up on it proves nothing.`,
        action: 'Set up over a trusted mark, or check on another mark that took no part in the fit.',
      };
    case 'two_stations': {
      const places = reason.stations.map(
        ({ easting, northing }) => `E ${length.text(easting)}, N ${length.text(northing)}`,
      );
      return {
        code,
        text: `${reason.stations.length === 2 ? 'Two' : reason.stations.length} stations fit these shots alike: ${places.join('; ')}. Nothing tells which it is.`,
        action: 'Shoot a direction or a distance to a further mark, off the line of the others.',
      };
    }
    case 'identification_ambiguous':
      return wordsOfAmbiguity(reason, length);
    case 'near_danger_circle':
      return {
        code,
        text: `The station stands ${length.text(reason.value)} from the circle through ${reason.marks.join(', ')}, ${(100 * reason.value) / reason.radius < 1 ? 'less than 1' : ((100 * reason.value) / reason.radius).toFixed(0)} % of its radius. Directions alone fix it badly there: ${fine(length, reason.semiMajor)} at 95 %, and twice that at half the distance from the circle.`,
        action: 'Measure a distance to one of the marks, or a direction to one well off the circle.',
      };
    case 'check_over':
      return {
        code,
        text: `The check on ${reason.target} is off by ${fine(length, reason.value)} ${PLACE[reason.axis]}, ${fine(length, reason.limit)} allowed.`,
        action: reason.inFit
          ? 'The instrument or the mark has moved: withdraw the setup and set up anew.'
          : `Check ${reason.target} from another mark before anybody works from this setup.`,
      };
    case 'too_few_marks':
      return {
        code,
        text: `${reason.count === 0 ? 'No trusted mark stands' : reason.count === 1 ? 'Only one trusted mark stands' : `Only ${reason.count} trusted marks stand`} in the fit ${PLACE[reason.axis]}; ${reason.limit} are the least.`,
        action: 'Shoot another trusted mark. Repeats and second faces do not count.',
      };
    case 'single_mark_dominates':
      return {
        code,
        text: `Without ${reason.target} the station moves ${fine(length, reason.value)} ${PLACE[reason.axis]}, more than the ${fine(length, reason.limit)} allowed: the setup hangs on that mark.`,
        action: 'Shoot another mark, on a side where none is yet.',
      };
    case 'single_mark_needed':
      return {
        code,
        text: `Without ${reason.target} the other marks do not determine the station ${PLACE[reason.axis]}: nothing checks that mark.`,
        action: 'Shoot another mark.',
      };
    case 'spread_too_large':
      return {
        code,
        text: `The shots scatter more than the stated accuracies allow: σ₀ = ${reason.value.toFixed(2)} of ${reason.limit}, outside the 95 % limit.`,
        action: 'Look at the largest residual; check the instrument’s and the control’s stated accuracy.',
      };
    case 'accuracy_short':
      return {
        code,
        text: `At ${length.text(reason.radius, 0)} a point is good to ${fine(length, reason.value)} ${PLACE[reason.axis]} at 95 %; the work asks for ${fine(length, reason.limit)}.`,
        action: 'Add marks or sets, stand nearer, or use the setup for coarser work.',
      };
    case 'check_disagrees':
      return {
        code,
        text: `The check on ${reason.target} differs by ${fine(length, reason.value)} ${PLACE[reason.axis]}, more than the ${fine(length, reason.limit)} that uncertainty explains.`,
        action: 'Shoot it again in both faces, or check on another mark.',
      };
    case 'check_not_capable':
      return {
        code,
        text: `The check on ${reason.target} could not tell: its uncertainty of ${fine(length, reason.value)} ${PLACE[reason.axis]} is beyond the tolerance of ${fine(length, reason.limit)}.`,
        action: 'Check in both faces on a mark of better accuracy.',
      };
    case 'check_wanted':
      return {
        code,
        text: `An independent check ${axes(reason.axes)} is still wanted: no shot to a trusted mark outside the fit confirms it.`,
        action:
          'Shoot a mark that took no part in the fit, a benchmark for the height, and post it as a setup check.',
      };
    case 'within_limits':
      return {
        code,
        text: `${reason.marks} marks agree. At ${length.text(reason.radius, 0)} a point is good to ${fine(length, reason.horizontal)} in plan and ${fine(length, reason.vertical)} in height at 95 %.`,
      };
    case 'not_checked': {
      const parts = [];
      if (reason.independent.length > 0) parts.push(`a mark outside the fit ${axes(reason.independent)}`);
      if (reason.singleFace) parts.push('collimation and index, with one face only');
      return { code, text: `Not checked: ${parts.join('; ')}.` };
    }
  }
}

/** Findings on single shots, which one fault behind them explains better. */
const SYMPTOMS: ReadonlySet<SetupReason['code']> = new Set([
  'not_converged',
  'observation_outlier',
  'target_residual_over',
  'backsight_over',
  'spread_too_large',
  'check_over',
  'check_disagrees',
]);

/**
 * All reasons in words. Where one explanation stands out, what to do is said once, with the first symptom: to shoot
 * every mark again that a wrong prism constant throws out would help nobody.
 */
export function wordsOfReasons(
  reasons: readonly SetupReason[],
  explanations: readonly Explanation[],
  length: Lengths,
): Words[] {
  const act = firstAct(explanations, length);
  const first = reasons.find(({ code }) => SYMPTOMS.has(code));
  return reasons.map((reason) => {
    const words = wordsOfReason(reason, length);
    if (act === null || !SYMPTOMS.has(reason.code)) return words;
    const { code, text } = words;
    return reason === first ? { code, text, action: act } : { code, text };
  });
}

/** What is worth knowing, though no verdict hangs on it. */
export function wordsOfNote(note: SetupNote, length: Lengths): Words {
  const { code } = note;
  switch (code) {
    case 'atmosphere_unknown':
      return {
        code,
        text: `No atmosphere was given: the applied ppm stands and all distances share an uncertainty of ${note.ppm} ppm.`,
        action: 'Send temperature and station pressure with the setup.',
      };
    case 'accuracy_default':
      return {
        code,
        text: 'The instrument states no accuracy: 5″, 5″, 2 mm + 2 ppm were taken (common practice).',
      };
    case 'control_sigma_default':
      return {
        code,
        text: `${note.targets.join(', ')}: no accuracy stated; the project’s ${fine(length, note.horizontal)} in plan and ${fine(length, note.vertical)} in height were taken.`,
      };
    case 'mark_suspect':
      return { code, text: `${note.target} is suspect: it takes part, but proves nothing.` };
    case 'mark_quarantined':
      return { code, text: `${note.target} is quarantined: its shots are kept and took no part.` };
    case 'spread_small':
      return {
        code,
        text: `The shots scatter less than stated (σ₀ = ${note.value.toFixed(2)}): the accuracies may be stated too wide.`,
      };
    case 'spread_scaled':
      return { code, text: `All standard deviations were multiplied by σ₀ = ${note.value.toFixed(2)}.` };
    case 'outside_control':
      return {
        code,
        text: 'The station stands outside the figure of its marks: errors grow away from them.',
      };
    case 'compensator_off':
      return {
        code,
        text: `${note.shots === 1 ? 'One shot was' : `${note.shots} shots were`} read with the compensator off.`,
      };
    case 'distance_unused':
      return {
        code,
        text: `${note.targets.join(', ')}: the distance took no part, since neither a zenith angle nor both heights bring it to the horizontal.`,
        action: 'Read the zenith angle with every distance.',
      };
    case 'directions_scatter':
      return {
        code,
        text: `A direction scatters by ${toArcseconds(note.value).toFixed(1)}″ from set to set, more than the ${toArcseconds(note.limit).toFixed(1)}″ stated allows.`,
        action: 'Look for a loose tribrach, shimmer or a sunlit tripod; check the stated accuracy.',
      };
    case 'height_undetermined':
      return {
        code,
        text: 'No mark with an elevation was seen with a zenith angle: the setup has no height.',
      };
    case 'stray_shots':
      return { code, ...wordsOfStray(note, length) };
    case 'same_place':
      return {
        code,
        text: `${[note.target, ...note.others].join(', ')} stand at one place: ${note.target} was taken for all of them.`,
      };
    case 'check_not_telling':
      return { code, text: `The check on ${note.target} neither confirms nor contradicts the setup.` };
  }
}

/** One line to read out on the radio; it begins with the act. */
export function radioOfSetup(
  station: string,
  verdict: Verdict,
  reasons: readonly SetupReason[],
  explanations: readonly Explanation[],
  className: string,
  status: string,
  length: Lengths,
): string {
  if (status === 'withdrawn') return `Stop. ${station} is withdrawn. Do not work from it.`;
  if (status === 'superseded') return `Stop. ${station} is superseded. Use the refit.`;
  if (status === 'expired') return `Stop. ${station} has run out. Check it and release it again.`;
  const act = wordsOfReasons(reasons, explanations, length)[0].action ?? '';
  switch (verdict) {
    case 'pass': {
      const within = reasons.find((reason) => reason.code === 'within_limits');
      const figure = within
        ? `, ${length.text(within.horizontal)} in plan and ${length.text(within.vertical)} in height at ${length.text(within.radius, 0)}`
        : '';
      const good = `${station} is good for ${className}${figure}.`;
      return status === 'released'
        ? `Go. ${good} Bench the blade before cutting.`
        : `Wait. ${good} Have it released before anybody works from it.`;
    }
    case 'hold':
      return `Wait. ${station} is not proven yet. ${act}`.trim();
    case 'fail':
      return `Stop. ${station} is not to be used. ${act}`.trim();
  }
}

/** Stands beside everything that lets a machine move. */
export const RELEASE_CAUTIONS: readonly string[] = [
  'Before any blade moves: people clear, utilities located and marked, benchmark checked by the machine itself.',
  'Site rules, local codes and the judgement of a licensed surveyor come before this record; it supports them and replaces none.',
];

export const WITHDRAWAL_CAUTION =
  'This stops no machine. Radio every machine named here, now, and have each crew answer.';
