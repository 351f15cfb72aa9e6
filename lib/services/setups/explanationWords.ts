import { type Explanation, SURE } from '@/lib/compute/survey/explain';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';

interface ExplanationWords {
  /** Size in the unit that people think of it in. */
  size: number | null;
  unit: string | null;
  text: string;
  /** The one shot that would settle it. */
  confirm: string;
  /** What to do first, for the radio; null where there is nothing in particular. */
  act: string | null;
}

/** What would explain the residuals, in plain words. */
export function wordsOfExplanation(explanation: Explanation, length: Lengths): ExplanationWords {
  const { fault, subject, size } = explanation;
  const [mark, other] = subject;
  const amount = Math.abs(size ?? 0);
  const fine = (metres: number) => length.text(metres, length.unit === 'm' ? 3 : 2);
  const longer = (size ?? 0) > 0 ? 'long' : 'short';
  switch (fault) {
    case 'none':
      return {
        size: null,
        unit: null,
        text: explanation.weight === 1 ? 'Nothing needs explaining: the shots agree.' : 'Nothing but chance.',
        confirm:
          explanation.weight === 1
            ? 'No further shot is needed for this.'
            : 'Shoot the same marks once more: chance does not repeat itself.',
        act: null,
      };
    case 'distanceConstant': {
      const millimetres = (1000 * amount).toFixed(0);
      return {
        size: 1000 * size!,
        unit: 'mm',
        text: `Every distance comes out ${millimetres} mm too ${longer}: the prism constant is wrong by that much.`,
        confirm: 'Shoot one mark with a reflector whose constant is known.',
        act: `Check the prism constant: every distance comes out ${millimetres} mm too ${longer}.`,
      };
    }
    case 'distanceScale': {
      const ppm = (1e6 * amount).toFixed(0);
      return {
        size: 1e6 * size!,
        unit: 'ppm',
        text: `Every distance comes out ${ppm} ppm too ${longer}: a wrong atmospheric correction or scale factor.`,
        confirm: 'Measure temperature and pressure at the instrument and shoot the longest line again.',
        act: `Check the ppm: every distance comes out ${ppm} ppm too ${longer}.`,
      };
    }
    case 'targetsSwapped':
      return {
        size: null,
        unit: null,
        text: `${mark} and ${other} carry each other’s name.`,
        confirm: `Read the name that stands at ${mark} and shoot it again.`,
        act: `Check the names of ${mark} and ${other}: they look swapped.`,
      };
    case 'targetMoved': {
      const far = `${explanation.atLeast ? 'at least ' : ''}${fine(amount)}`;
      return {
        size: length.out(amount),
        unit: length.unit,
        text: `${mark} stands ${far} from where it was published: it was moved, or published wrongly, or another mark was shot.`,
        confirm: `Shoot ${mark} from another setup, or a mark beside it.`,
        act: `Look at ${mark}: it stands ${far} from where it was published.`,
      };
    }
    case 'heightOfTargetOrMark': {
      const high = (size ?? 0) > 0;
      return {
        size: length.out(size!),
        unit: length.unit,
        text: `${mark} comes out ${fine(amount)} too ${high ? 'high: its target height was sent too small, or the mark has risen' : 'low: its target height was sent too large, or the mark has settled'}.`,
        confirm: `Measure the target height at ${mark} again; if it was right, shoot the mark from another setup.`,
        act: `Measure the target height at ${mark} again: it comes out ${fine(amount)} too ${high ? 'high' : 'low'}.`,
      };
    }
    case 'singleFace': {
      const seconds = toArcseconds(amount).toFixed(0);
      return {
        size: toArcseconds(size!),
        unit: 'arcsec',
        text: `The readings in one face are off by ${seconds}″: collimation or vertical index.`,
        confirm: 'Shoot one mark in both faces.',
        act: `Shoot both faces: one face alone is off by ${seconds}″.`,
      };
    }
    case 'stationMoved':
      return {
        size: length.out(amount),
        unit: length.unit,
        text: `The instrument stands ${fine(amount)} from the published place of ${mark}: not over the mark, over another one, or the mark was moved.`,
        confirm: `Look through the plummet, and read the name that stands at ${mark}.`,
        act: `Check what the instrument stands over: ${fine(amount)} from ${mark}.`,
      };
    case 'instrumentHeight': {
      const high = (size ?? 0) > 0;
      return {
        size: length.out(size!),
        unit: length.unit,
        text: `The axis stands ${fine(amount)} ${high ? 'higher' : 'lower'} than ${mark} and the instrument height make it: the height was misread, or the mark has moved.`,
        confirm: 'Measure the instrument height again.',
        act: `Measure the instrument height again: it comes out ${fine(amount)} too ${high ? 'small' : 'large'}.`,
      };
    }
    case 'wrongFoot':
      return {
        size: null,
        unit: null,
        text: `The coordinates of ${mark} came in the other foot.`,
        confirm: `Look up the unit in which ${mark} was published, and shoot one more mark.`,
        act: `Check the foot of ${mark}: its coordinates look converted by the other one.`,
      };
    case 'instrumentMoved': {
      const seconds = toArcseconds(Math.abs(explanation.turn ?? 0)).toFixed(0);
      const turned = `its circle has turned by ${seconds}″`;
      const what = size === null ? turned : `it has shifted ${fine(amount)} and ${turned}`;
      return {
        size: size === null ? toArcseconds(explanation.turn ?? 0) : length.out(amount),
        unit: size === null ? 'arcsec' : length.unit,
        text: `The instrument has moved since the first shots: ${what}.`,
        confirm: 'Shoot one more mark of the fit: it will be off in the same way.',
        act: `Set up anew: the instrument has moved since the first shots, ${what}.`,
      };
    }
    case 'unexplained':
      return {
        size: null,
        unit: null,
        text: 'No single fault explains it.',
        confirm: 'Shoot every mark again, in both faces.',
        act: null,
      };
  }
}

/** What to do first where one explanation stands out; null where none does. */
export function firstAct(explanations: readonly Explanation[], length: Lengths): string | null {
  const [first] = explanations;
  return first && first.weight >= SURE ? wordsOfExplanation(first, length).act : null;
}
