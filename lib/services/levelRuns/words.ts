import type { Closure } from '@/lib/compute/survey/levelling/levelRun';
import type { LevelNote, LevelReason } from '@/lib/compute/survey/levelling/runVerdict';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import type { Words } from '@/lib/services/setups/words';

/** One decimal more than the unit usually shows. */
function fine(length: Lengths, metres: number): string {
  return length.text(metres, length.unit === 'm' ? 4 : 3);
}

function signed(length: Lengths, metres: number): string {
  return `${metres < 0 ? '−' : '+'}${fine(length, Math.abs(metres))}`;
}

const arcsec = (radians: number) => `${Math.abs(toArcseconds(radians)).toFixed(0)}″`;

/** Why the verdict is what it is, and what to do. */
export function wordsOfLevelReason(reason: LevelReason, length: Lengths): Words {
  const { code } = reason;
  switch (code) {
    case 'misclosure_over':
      return {
        code,
        text: `${reason.from} to ${reason.to} does not close: ${signed(length, reason.value)}, ${fine(length, reason.limit)} allowed. Nothing was distributed.`,
        action: `Use none of its heights. Level back from ${reason.to} over the same turning points: the first one that differs shows where the error came in.`,
      };
    case 'misclosure_of_marks':
      return {
        code,
        text: `${reason.from} to ${reason.to} misses by ${signed(length, reason.value)}, ${fine(length, reason.limit)} allowed; but their published difference is good to ${fine(length, reason.marks)} at 95 % only. Nothing was distributed.`,
        action: `Level back to ${reason.from}: a loop tells whether it is the levelling or the marks.`,
      };
    case 'error_placed':
      return reason.place.kind === 'start'
        ? {
            code,
            text: `All other marks on the way agree among themselves and differ from ${reason.place.point} by ${signed(length, reason.place.difference)}.`,
            action: `Look at ${reason.place.point} and at the first backsight: check ${reason.place.point} from another mark before it is used again.`,
          }
        : {
            code,
            text: `The run still agrees at ${reason.place.after} and does not any more at ${reason.place.before}.`,
            action: `Re-run from ${reason.place.after} to ${reason.place.before}.`,
          };
    case 'misread_suspected':
      return {
        code,
        text: `The misclosure is a whole figure of the staff, ${length.text(reason.size)}: a reading may be off by it.`,
        action: 'Look for such a figure in the book and the staff before levelling anew.',
      };
    case 'not_closed':
      return {
        code,
        text: `The run ends on ${reason.point} and closes on nothing: no error in it would show.`,
        action: 'Level on to a known mark, or back to the start.',
      };
    case 'mark_not_trusted':
      return {
        code,
        text: `${reason.point} is suspect or quarantined: it neither carries heights nor confirms any.`,
        action: 'Run between trusted marks.',
      };
    case 'point_differs':
      return {
        code,
        text: `${reason.point} on the way differs from its published elevation by ${signed(length, reason.value)}; ${fine(length, reason.allowed)} is explained by the uncertainties.`,
        action: `Level ${reason.point} again from both sides; if it differs again, mark it suspect.`,
      };
    case 'misclosure_unlikely':
      return {
        code,
        text: `It closes to ${signed(length, reason.value)}, within the limit, but ${Math.abs(reason.standardised).toFixed(1)} standard deviations of what level and marks are stated to be good for.`,
        action: 'Check the stated accuracies, or run it again.',
      };
    case 'method_not_capable':
      return {
        code,
        text: `This level brings heights over the run to ${fine(length, reason.value)} at 95 %; the limit is ${fine(length, reason.limit)}: that it closes proves little.`,
        action: 'Use a better level, or run there and back.',
      };
    case 'lengths_unknown':
      return {
        code,
        text: `No sight was measured: the length over ${reason.standings} ${reason.standings === 1 ? 'standing' : 'standings'}, the limit and the balance of the sights rest on 30 m a sight.`,
        action:
          'Send the distances of the sights, by pacing or stadia, or state a limit by the number of setups.',
      };
    case 'peg_test_failed':
      return {
        code,
        text: `The level failed its last two-peg test, with ${arcsec(reason.value)}: that was not taken off, since it may have been adjusted after it.`,
        action: 'Adjust it, test it again, and run again.',
      };
    case 'sights_unbalanced':
      return {
        code,
        text: `Backsights and foresights differ by ${length.text(Math.abs(reason.value), 0)} on the way; what is unknown of the collimation can make ${fine(length, reason.effect)} of that.`,
        action: 'Make a two-peg test and send it with the run, or balance the sights.',
      };
    case 'booking_differs':
      return {
        code,
        text: `The book has ${reason.point} ${fine(length, Math.abs(reason.value))} ${reason.value > 0 ? 'higher' : 'lower'} than its readings do.`,
        action: 'Check the arithmetic of the page, and whether a reading was changed after it was reduced.',
      };
    case 'closes':
      return {
        code,
        text: `It closes to ${signed(length, reason.value)} of ${fine(length, reason.limit)} allowed.`,
      };
  }
}

/** What is worth knowing, though no verdict hangs on it. */
export function wordsOfLevelNote(note: LevelNote, length: Lengths): Words {
  const { code } = note;
  switch (code) {
    case 'loop_proves_no_mark':
      return {
        code,
        text: `A loop proves the levelling, not the elevation of ${note.point}.`,
        action: 'Tie it to a second mark.',
      };
    case 'intermediate_unchecked':
      return {
        code,
        text: `Read once, from one standing, and checked by nothing: ${note.points.join(', ')}.`,
      };
    case 'sight_long':
      return {
        code,
        text: `Sights of more than ${length.text(note.limit, 0)} at ${note.points.join(', ')}: a staff is not read to its last figure that far.`,
        action: 'Keep sights under half of that where the height matters.',
      };
    case 'staff_inverted':
      return {
        code,
        text: `Negative readings, as of a staff held upside down, at ${note.points.join(', ')}.`,
      };
    case 'peg_test_missing':
      return {
        code,
        text: `No two-peg test of this level is known from before the run: its collimation is taken as 0 ± ${arcsec(note.sigma)} (common practice).`,
        action: 'Make one and send it under pegTests.',
      };
    case 'peg_test_old':
      return {
        code,
        text: `The last two-peg test is ${note.days} days old.`,
        action: 'Test the level monthly and after every transport (common practice).',
      };
    case 'accuracy_default':
      return {
        code,
        text: 'The level states no accuracy: 2 mm per km there and back stands (common practice).',
      };
    case 'instrument_unstated':
      return {
        code,
        text: 'No level is named: 2 mm per km there and back and an untested line of sight stand (common practice).',
      };
    case 'limit_default':
      return {
        code,
        text: 'Neither run nor project states a limit: third order, 12 mm√km or 0.05 ft√mile, stands (common practice).',
      };
    case 'control_sigma_default':
      return {
        code,
        text: `${note.points.join(', ')} ${note.points.length === 1 ? 'states' : 'state'} no accuracy: the project’s ${fine(length, note.sigma)} stands.`,
      };
  }
}

/** A run in one line, to be read out. */
export function levelRadio(
  run: { verdict: 'pass' | 'hold' | 'fail'; from: string; to: string },
  { kind, misclosure, allowed }: Closure,
  reasons: readonly Words[],
  length: Lengths,
): string {
  const name = kind === 'loop' ? `Level loop on ${run.from}` : `Level run ${run.from} to ${run.to}`;
  if (misclosure === null) return `${name}: on hold, it closes on nothing. Take no grade from it yet.`;
  const closes = `${fine(length, Math.abs(misclosure))} of ${fine(length, allowed)} allowed`;
  if (run.verdict === 'fail') return `${name} fails, it misses by ${closes}. Do not use its heights.`;
  if (run.verdict === 'pass') return `${name} is good, it closes to ${closes}.`;
  if (Math.abs(misclosure) > allowed)
    return `${name}: on hold, it misses by ${closes}. Take no grade from it yet.`;
  return `${name}: on hold, though it closes to ${closes}. ${reasons[0].text}`;
}
