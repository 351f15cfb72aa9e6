import type { StationError } from '@/lib/compute/survey/stationAdjustment';
import type { Axis, SetupReason } from '@/lib/compute/survey/verdict';
import type { Lengths } from '@/lib/services/lengths';
import { type Words, wordsOfReasons } from '@/lib/services/setups/words';
import type { Forecasted } from './forecast';
import type { ForecastPlan } from './plan';

const PLACE: Record<Axis, string> = { horizontal: 'in plan', vertical: 'in height' };

/** One decimal more than the unit usually shows: residuals are small. */
export function fine(length: Lengths, metres: number): string {
  return length.text(metres, length.unit === 'm' ? 4 : 3);
}

/** What stands against a place, before anybody shoots from it. */
export function wordsOfForecastReason(reason: SetupReason, length: Lengths): Words {
  const { code } = reason;
  switch (code) {
    case 'too_few_marks': {
      const trusted = reason.count === 1 ? 'one trusted mark is' : `${reason.count} trusted marks are`;
      return {
        code,
        text: `Only ${trusted} in range ${PLACE[reason.axis]}; ${reason.limit} are the least.`,
        action: 'Stand nearer to control, or set another mark.',
      };
    }
    case 'single_mark_dominates':
      return {
        code,
        text: `Without ${reason.target} the station may move ${fine(length, reason.value)} ${PLACE[reason.axis]} at 95 %, more than the ${fine(length, reason.limit)} allowed: the setup would hang on that mark.`,
        action: 'Stand where a mark is in sight on a side where none is yet, or set one there.',
      };
    case 'single_mark_needed':
      return {
        code,
        text: `Without ${reason.target} the other marks would not determine the station ${PLACE[reason.axis]}: nothing would check that mark.`,
        action: 'Stand where one more mark is in range, or set one.',
      };
    case 'accuracy_short':
      return {
        code,
        text: `At ${length.text(reason.radius, 0)} a point would be good to ${fine(length, reason.value)} ${PLACE[reason.axis]} at 95 %; the work asks for ${fine(length, reason.limit)}.`,
        action: 'Stand nearer to the work and to the marks, or plan more marks or sets.',
      };
    case 'within_limits':
      return {
        code,
        text: `${reason.marks} marks are in range. At ${length.text(reason.radius, 0)} a point would be good to ${fine(length, reason.horizontal)} in plan and ${fine(length, reason.vertical)} in height at 95 %.`,
      };
    default:
      return wordsOfReasons([reason], [], length)[0];
  }
}

const NO_STATION: Record<StationError['code'], string> = {
  too_few_sights: 'Too few marks in range: two with distances or three with directions are the least.',
  danger_circle: 'The place lies on the circle through its marks, where directions alone do not find it.',
  zenith_wanted: 'Distances without a zenith angle cannot be brought to the horizontal.',
  not_determined: 'What is read leaves the station undetermined.',
  marks_at_station: 'Marks have the coordinates of the place itself.',
};

export function wordsOfNoStation(code: StationError['code']): Words {
  return {
    code: 'no_station',
    text: `${NO_STATION[code]} No station comes of it.`,
    action: 'Stand nearer to control, or set another mark.',
  };
}

/** How a place is called in a sentence. */
function called({ place }: Forecasted, length: Lengths): string {
  const decimals = length.unit === 'm' ? 1 : 0;
  const figure = (metres: number) => length.out(metres).toFixed(decimals);
  return place.name ?? `E ${figure(place.easting)}, N ${figure(place.northing)}`;
}

/** Where to stand, what that gives, and what the worst of the other places would give. */
export function summaryOf(ranked: readonly Forecasted[], plan: ForecastPlan): string {
  const { length, task } = plan;
  const standing = ranked.filter(({ forecast }) => forecast !== null);
  const [best] = standing;
  const range = length.text(task.sight.longest, 0);
  if (!best?.forecast) {
    return ranked.length === 1
      ? `The place has too few marks within ${range}.`
      : `None of ${ranked.length.toLocaleString('en')} places has enough marks within ${range}.`;
  }
  const { fit, work, verdict } = best.forecast;
  const good = (of: Forecasted) => fine(length, of.forecast!.fit.ellipse95.semiMajor);
  const radius = length.text(task.limits.work.radius, 0);
  const height = fit.heightDetermined
    ? ` and ${fine(length, work.vertical)} in height`
    : ', without a height';
  const parts = [
    `Stand at ${called(best, length)}: ${good(best)} at 95 %, and a point at ${radius} is good to ${fine(length, work.horizontal)} in plan${height}.`,
  ];
  if (verdict.verdict !== 'pass') parts.push(`Even there ${plan.className} would be on hold.`);
  const worst = standing[standing.length - 1];
  if (worst !== best) parts.push(`At ${called(worst, length)}: ${good(worst)}.`);
  const none = ranked.length - standing.length;
  if (none > 0) {
    const places = none === 1 ? 'One place has' : `${none.toLocaleString('en')} places have`;
    parts.push(`${places} too few marks in range.`);
  }
  return parts.join(' ');
}

/** What no forecast can know. */
export const FORECAST_LIMITS: readonly string[] = [
  'What stands between a place and a mark is not known here: walk the sight lines before you rely on it.',
  'Stated accuracies are taken as true, and every mark as undisturbed. The verdict of a setup comes of its own shots.',
];
