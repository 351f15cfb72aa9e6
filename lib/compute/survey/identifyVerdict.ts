import type { CheckDifference } from './checkShots';
import { type Assignment, type Identification, SURE } from './identify';
import { placeAt } from './identifyPose';
import { placesOf, type Sighting } from './identifyReflectors';
import { REACH } from './identifySearch';
import type { Shot } from './shots';
import type { SetupVerdict } from './verdict';

/**
 * The verdict of a setup whose targets were identified: while another assignment could be true, nothing is proven,
 * however well the shots fit the first.
 */
export function judgeIdentification(
  judged: SetupVerdict,
  identification: Identification | null | undefined,
): SetupVerdict {
  if (!identification?.ambiguous) return judged;
  const { best, rivals, more, margin, deciding, contradictedBy } = identification;
  const confused = rivals.flatMap((rival) =>
    rival.marks.flatMap((name, k) => {
      const own = best.marks[k];
      return own !== null && name !== null && own !== name ? [[own, name] as [string, string]] : [];
    }),
  );
  const held = (verdict: SetupVerdict['verdict']) => (verdict === 'pass' ? 'hold' : verdict);
  const { horizontal, vertical } = judged.verdicts;
  return {
    verdict: held(judged.verdict),
    verdicts: { horizontal: held(horizontal), vertical: held(vertical) },
    reasons: [
      {
        code: 'identification_ambiguous',
        stations: [best, ...rivals].map(({ station }) => station),
        confused: deciding ? [] : confused,
        more,
        margin,
        deciding,
        contradictedBy,
      },
      ...judged.reasons.filter(({ code }) => code !== 'within_limits'),
    ],
  };
}

/**
 * An identification after shots to named marks came in: assignments that they contradict are rivals no more, where the
 * best one agrees with them; where another agrees instead, it says so. Where not all rivals are known, it stays as it is.
 *
 * @param checks differences of the shots from the setup as it stands
 */
export function identificationAfter(
  identification: Identification | null | undefined,
  shots: readonly Shot[],
  checks: readonly CheckDifference[],
  sighting: Sighting,
): Identification | null {
  if (!identification) return null;
  if (!identification.ambiguous || identification.more || checks.length === 0) return identification;
  const { best } = identification;
  const agreeing = [best, ...identification.rivals].filter((one) =>
    checks.every((check) => agrees(check, shiftOf(check, shots, [best, one], sighting))),
  );
  if (!agreeing.includes(best)) {
    const contradictedBy = agreeing.length === 0 ? [] : checks.map(({ target }) => target);
    return { ...identification, contradictedBy };
  }
  const rivals = agreeing.slice(1);
  const margin = best.evidence - Math.max(0, ...rivals.map(({ evidence }) => evidence));
  const ambiguous = rivals.length > 0 || margin < SURE;
  return {
    ...identification,
    rivals,
    margin,
    ambiguous,
    deciding: ambiguous ? identification.deciding : null,
  };
}

type Shift = Record<'east' | 'north' | 'up', number>;

/** How far a check's mark moves from one assignment to another; its shots are one erection. */
function shiftOf(
  { shots: ids }: CheckDifference,
  shots: readonly Shot[],
  [from, to]: [Assignment, Assignment],
  sighting: Sighting,
): Shift {
  const own = shots.filter(({ id }) => ids.includes(id));
  const [place] = placesOf(own, sighting);
  const [here, there] = [placeAt(poseOf(from), place), placeAt(poseOf(to), place)];
  return { east: there.east - here.east, north: there.north - here.north, up: there.up - here.up || 0 };
}

function agrees({ difference, uncertainty }: CheckDifference, { east, north, up }: Shift): boolean {
  const plan = Math.hypot(difference.easting + east, difference.northing + north);
  const height = difference.elevation === null ? 0 : Math.abs(difference.elevation + up);
  return (
    plan <= REACH * uncertainty.horizontal &&
    height <= REACH * (uncertainty.vertical ?? Number.POSITIVE_INFINITY)
  );
}

function poseOf({ station }: Assignment) {
  const { easting: east, northing: north, axis, orientation } = station;
  return { east, north, up: axis ?? Number.NaN, orientation };
}
