import type { Stray } from '@/lib/compute/survey/identify';
import type { SetupReason } from '@/lib/compute/survey/verdict';
import { toAzimuth } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';

type Ambiguity = Extract<SetupReason, { code: 'identification_ambiguous' }>;

/** Why the identification does not choose, and the shot that would. */
export function wordsOfAmbiguity(reason: Ambiguity, length: Lengths) {
  const { code, stations, confused, more, margin, deciding, contradictedBy } = reason;
  if (contradictedBy.length > 0) {
    return {
      code,
      text: `The shots to ${contradictedBy.join(', ')} fit another of the stands, not the one that this setup was computed with.`,
      action:
        'Send the setup anew with those shots among its own, by name, as checks: then it is the right one.',
    };
  }
  if (confused.length > 0) {
    const pairs = confused.map(([one, other]) => `${one} and ${other}`);
    return {
      code,
      text: `${pairs.join('; ')}: too near each other for the shots to tell which was hit.`,
      action: 'Quarantine the point that is not there, or send the targets by name as a resection.',
    };
  }
  if (stations.length === 1 && more) {
    return {
      code,
      text: 'So many points fit the shots that not all could be looked at: another assignment may be the true one.',
      action: 'Shoot more reflectors, or send the targets by name as a resection.',
    };
  }
  if (stations.length === 1) {
    return {
      code,
      text: `Chance could have made this fit: the odds for it are ${Math.max(1, Math.round(Math.exp(margin)))} to 1, 1000 wanted.`,
      action: 'Shoot one or two more reflectors on control, or send the targets by name as a resection.',
    };
  }
  const count = more
    ? `${stations.length} stands and more`
    : stations.length === 2
      ? 'Two stands'
      : `${stations.length} stands`;
  const places = stations.map(
    ({ easting, northing }) => `E ${length.text(easting)}, N ${length.text(northing)}`,
  );
  return {
    code,
    text: `${count} fit these shots: ${places.join('; ')}. The control repeats itself there, and nothing in the shots tells which it is.`,
    action:
      more || deciding === null
        ? 'Send the targets by name as a resection.'
        : wordsOfDeciding(deciding, length),
  };
}

function wordsOfDeciding({ target, readings }: NonNullable<Ambiguity['deciding']>, length: Lengths): string {
  const each = readings.map(({ direction, grid }, i) => {
    const stand = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth'][i];
    return `at ${toAzimuth(direction).toFixed(2)}° and ${length.text(grid, 1)} if it is the ${stand}`;
  });
  return `Shoot ${target} by name as a check: it is ${each.join(', ')}.`;
}

export function wordsOfStray({ shots, nearest }: Stray, length: Lengths) {
  const text = `${shots.join(', ')} hit no control point and took no part`;
  if (nearest === null) return { text: `${text}.` };
  const high = nearest.vertical === null ? '' : ` in plan and ${length.text(nearest.vertical)} in height`;
  return {
    text: `${text}: ${nearest.target}, the nearest, is ${length.text(nearest.horizontal)} off${high}.`,
  };
}
